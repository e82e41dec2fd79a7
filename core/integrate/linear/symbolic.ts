/**
 * Where a factor of a sparse matrix has entries, found once for the matrix's life: along the elimination tree each column
 * takes over what its children have. Everything is in positions of the order of elimination.
 * Source: George & Liu, Computer Solution of Large Sparse Positive Definite Systems (1981), chapter 5.
 */
import type { Pattern } from './pattern.ts';

export interface FactorPattern {
  /** Row k of U right of its diagonal: columns `upper[upperStart[k]] ..`, rising. Column k of L has the same positions. */
  readonly upperStart: Int32Array;
  readonly upper: Int32Array;
  /** Row k of L left of its diagonal: columns `lower[lowerStart[k]] ..`, rising. */
  readonly lowerStart: Int32Array;
  readonly lower: Int32Array;
}

/**
 * @param order the unknowns in the order of elimination
 * @param position its inverse
 */
export function factorPattern(
  { size, start, neighbours }: Pattern,
  order: Int32Array,
  position: Int32Array,
): FactorPattern {
  const children: number[][] = Array.from({ length: size }, () => []);
  const columns: Int32Array[] = [];
  const mark = new Int32Array(size).fill(-1);
  const found: number[] = [];
  for (let k = 0; k < size; k++) {
    found.length = 0;
    mark[k] = k;
    const i = order[k]!;
    for (let e = start[i]!; e < start[i + 1]!; e++) {
      const p = position[neighbours[e]!]!;
      if (p < k || mark[p] === k) continue;
      mark[p] = k;
      found.push(p);
    }
    for (const child of children[k]!) {
      for (const p of columns[child]!) {
        if (mark[p] === k) continue;
        mark[p] = k;
        found.push(p);
      }
    }
    const column = Int32Array.from(found).sort();
    columns.push(column);
    if (column.length > 0) children[column[0]!]!.push(k);
  }
  const upperStart = new Int32Array(size + 1);
  const lowerStart = new Int32Array(size + 1);
  for (let k = 0; k < size; k++) {
    upperStart[k + 1] = upperStart[k]! + columns[k]!.length;
    for (const p of columns[k]!) lowerStart[p + 1]!++;
  }
  for (let k = 0; k < size; k++) lowerStart[k + 1]! += lowerStart[k]!;
  const upper = new Int32Array(upperStart[size]!);
  const lower = new Int32Array(upperStart[size]!);
  const fill = lowerStart.slice(0, size);
  for (let k = 0; k < size; k++) {
    upper.set(columns[k]!, upperStart[k]);
    for (const p of columns[k]!) lower[fill[p]!++] = k;
  }
  return { upperStart, upper, lowerStart, lower };
}

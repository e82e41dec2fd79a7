/** Which entries of a sparse matrix may be other than zero: symmetric, without the diagonal, each neighbour once. */

export interface Pattern {
  readonly size: number;
  /** Unknown i meets `neighbours[start[i]] .. neighbours[start[i + 1] - 1]`, rising. */
  readonly start: Int32Array;
  readonly neighbours: Int32Array;
}

/**
 * @param rows,columns entries; they may repeat, hold the diagonal, and be given on one side only
 */
export function buildPattern(size: number, rows: Int32Array, columns: Int32Array): Pattern {
  const count = new Int32Array(size + 1);
  for (let e = 0; e < rows.length; e++) {
    const r = rows[e]!;
    const c = columns[e]!;
    if (r === c) continue;
    count[r + 1]!++;
    count[c + 1]!++;
  }
  for (let i = 0; i < size; i++) count[i + 1]! += count[i]!;
  const all = new Int32Array(count[size]!);
  const fill = count.slice(0, size);
  for (let e = 0; e < rows.length; e++) {
    const r = rows[e]!;
    const c = columns[e]!;
    if (r === c) continue;
    all[fill[r]!++] = c;
    all[fill[c]!++] = r;
  }
  const start = new Int32Array(size + 1);
  let kept = 0;
  for (let i = 0; i < size; i++) {
    const list = all.subarray(count[i], count[i + 1]).sort();
    for (let e = 0; e < list.length; e++) {
      // Lists move to the left only, so none is written over before it is read.
      const next = list[e]!;
      if (e === 0 || next !== all[kept - 1]) all[kept++] = next;
    }
    start[i + 1] = kept;
  }
  return { size, start, neighbours: all.slice(0, kept) };
}

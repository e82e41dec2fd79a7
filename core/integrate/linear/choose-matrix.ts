/** Picks the shape of matrix that a pattern of entries allows: arrow, dense, or general sparse. */
import { createArrow } from './arrow.ts';
import type { AssembledMatrix } from './assembled.ts';
import { createDense } from './dense.ts';
import { createSparse } from './sparse.ts';

const MOST_HUBS = 8;
const LARGEST_DENSE = 24;

/**
 * @param rows,columns entries that may be other than zero; they may repeat and may hold the diagonal
 */
export function createMatrix(size: number, rows: Int32Array, columns: Int32Array): AssembledMatrix {
  const hubs = findHubs(size, rows, columns);
  if (hubs !== null && size > 2 * hubs.length) return createArrow(size, hubs);
  if (size <= LARGEST_DENSE) return createDense(size);
  return createSparse(size, rows, columns);
}

/**
 * Unknowns, each time the one that touches most, until every entry off the diagonal touches one of them; null where more than a
 * few are needed.
 */
export function findHubs(size: number, rows: Int32Array, columns: Int32Array): number[] | null {
  const hubs: number[] = [];
  const isHub = new Uint8Array(size);
  const touched = new Int32Array(size);
  for (;;) {
    touched.fill(0);
    let left = 0;
    for (let e = 0; e < rows.length; e++) {
      const r = rows[e]!;
      const c = columns[e]!;
      if (r === c || isHub[r] === 1 || isHub[c] === 1) continue;
      touched[r]!++;
      touched[c]!++;
      left++;
    }
    if (left === 0) return hubs;
    if (hubs.length === MOST_HUBS) return null;
    let best = 0;
    for (let i = 1; i < size; i++) if (touched[i]! > touched[best]!) best = i;
    hubs.push(best);
    isHub[best] = 1;
  }
}

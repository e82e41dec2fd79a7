/** Dense matrices, LU with partial pivoting: for a few unknowns that all meet, and for the hubs of an arrow. */
import { SMALLEST_PIVOT, type AssembledMatrix } from './assembled.ts';

/**
 * LU of a row-major n x n matrix in place; `pivots[c]` is the row that was exchanged with row c.
 * @param columnSizes the size that column c's pivot is measured against
 * @returns false where a pivot is too small to trust, or no number
 */
export function factorDense(lu: Float64Array, n: number, columnSizes: Float64Array, pivots: Int32Array): boolean {
  for (let c = 0; c < n; c++) {
    let best = c;
    let largest = Math.abs(lu[c * n + c]!);
    for (let r = c + 1; r < n; r++) {
      const size = Math.abs(lu[r * n + c]!);
      if (!(size <= largest)) {
        largest = size;
        best = r;
      }
    }
    pivots[c] = best;
    if (!(largest > SMALLEST_PIVOT * columnSizes[c]!) || largest === Infinity) return false;
    if (best !== c) {
      for (let j = 0; j < n; j++) {
        const other = lu[c * n + j]!;
        lu[c * n + j] = lu[best * n + j]!;
        lu[best * n + j] = other;
      }
    }
    const inverse = 1 / lu[c * n + c]!;
    for (let r = c + 1; r < n; r++) {
      const factor = lu[r * n + c]! * inverse;
      lu[r * n + c] = factor;
      if (factor === 0) continue;
      for (let j = c + 1; j < n; j++) lu[r * n + j]! -= factor * lu[c * n + j]!;
    }
  }
  return true;
}

/** Replaces x by the solution, with the factors of `factorDense`. */
export function solveDense(lu: Float64Array, n: number, pivots: Int32Array, x: Float64Array): void {
  for (let c = 0; c < n; c++) {
    const p = pivots[c]!;
    if (p === c) continue;
    const other = x[c]!;
    x[c] = x[p]!;
    x[p] = other;
  }
  for (let i = 1; i < n; i++) {
    let sum = x[i]!;
    for (let j = 0; j < i; j++) sum -= lu[i * n + j]! * x[j]!;
    x[i] = sum;
  }
  for (let i = n - 1; i >= 0; i--) {
    let sum = x[i]!;
    for (let j = i + 1; j < n; j++) sum -= lu[i * n + j]! * x[j]!;
    x[i] = sum / lu[i * n + i]!;
  }
}

/** A dense n x n matrix; every entry has a place. */
export function createDense(n: number): AssembledMatrix {
  const values = new Float64Array(n * n);
  const lu = new Float64Array(n * n);
  const columnSizes = new Float64Array(n);
  const pivots = new Int32Array(n);
  return {
    size: n,
    values,
    slot: (row, column) => row * n + column,
    clear: () => values.fill(0),

    factor(shift) {
      for (let q = 0; q < n * n; q++) lu[q] = -values[q]!;
      for (let i = 0; i < n; i++) lu[i * n + i]! += shift;
      columnSizes.fill(0);
      for (let i = 0; i < n; i++) {
        for (let j = 0; j < n; j++) {
          const size = Math.abs(lu[i * n + j]!);
          if (!(size <= columnSizes[j]!)) columnSizes[j] = size;
          // NaN stays, whatever follows it.
          if (size !== size) return false;
        }
      }
      return factorDense(lu, n, columnSizes, pivots);
    },

    solve: (x) => solveDense(lu, n, pivots, x),
  };
}

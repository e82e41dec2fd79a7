/** Random sparse systems for the tests of the three matrices, and a dense solution of each by the library `ml-matrix`. */
import { Matrix, solve } from 'ml-matrix';
import type { AssembledMatrix } from '../../../../core/integrate/linear/assembled.ts';
import { gaussian } from '../../../bench/problems.ts';

export interface Pattern {
  readonly rows: Int32Array;
  readonly columns: Int32Array;
}

/** Entries (i, i), (i, j) and (j, i) of `links` random pairs; pairs may repeat, as links between two bubbles may. */
export function randomPattern(size: number, links: number, seed: number): Pattern {
  const g = gaussian(seed);
  const pick = (): number => Math.floor(Math.abs(g()) * 1e6) % size;
  const rows: number[] = [];
  const columns: number[] = [];
  for (let l = 0; l < links; l++) {
    const [i, j] = [pick(), pick()];
    rows.push(i, i, j, j);
    columns.push(i, j, i, j);
  }
  return { rows: Int32Array.from(rows), columns: Int32Array.from(columns) };
}

/** Fills J with random values at the pattern's places, added where they repeat; returns J as a dense matrix. */
export function fillRandomly(matrix: AssembledMatrix, { rows, columns }: Pattern, seed: number): Matrix {
  const g = gaussian(seed);
  const dense = Matrix.zeros(matrix.size, matrix.size);
  matrix.clear();
  rows.forEach((row, e) => {
    const column = columns[e]!;
    const value = g();
    matrix.values[matrix.slot(row, column)]! += value;
    dense.set(row, column, dense.get(row, column) + value);
  });
  return dense;
}

/** Solution of (shift I - J) x = b. */
export function denseSolution(J: Matrix, shift: number, b: Float64Array): Float64Array {
  const shifted = Matrix.sub(Matrix.eye(J.rows).mul(shift), J);
  return Float64Array.from(solve(shifted, Matrix.columnVector(Array.from(b))).to1DArray());
}

/** Largest difference over the largest entry of `right`. */
export function distance(left: Float64Array, right: Float64Array): number {
  let worst = 0;
  let size = 0;
  left.forEach((value, i) => {
    worst = Math.max(worst, Math.abs(value - right[i]!));
    size = Math.max(size, Math.abs(right[i]!));
  });
  return worst / size;
}

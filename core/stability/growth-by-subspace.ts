/**
 * The fastest growth rate of a part too interlinked to eliminate (a large bed of bubbles in contact), by a growing and
 * restarted subspace.
 *
 * With potentials z, `x = Lap z`, a mode obeys `T z = rate z` with `T = -U Lap`, which is symmetric in the inner product
 * `<a, b> = a' Lap b`. The subspace is kept orthonormal in it, so the largest Ritz value never exceeds the largest rate.
 * Residuals are shaped before they join the subspace, so that nodes that push back follow the others at once.
 * Sources: Davidson, J. Comput. Phys. 17 (1975) 87; thick restart, Wu & Simon (2000).
 */

import { EigenvalueDecomposition, Matrix } from 'ml-matrix';
import type { Growth } from './growth-by-inertia.ts';
import { startVector } from './growth-by-inertia.ts';
import type { Part } from './mode-network.ts';
import { applyLaplacian, dot, nodeStrength } from './part-laplacian.ts';
import { residualShaper } from './residual-shape.ts';

const LARGEST_BASIS = 24;
const KEPT = 10;
const MOST_STEPS = 500;
/** Estimated relative error of the rate that is good enough. */
const GOOD = 1e-8;
/** So many leading Ritz pairs must be told apart before the first is believed: a slower mode of another place settles early. */
const WATCHED = 5;
/**
 * Finds the largest growing rate; the part must have one (see `inertia.ts`).
 * @param growing number of growing modes of the part, by inertia: where few grow, all of them are found
 * @returns `converged` false where the residual did not fall far enough or the leading rates were not told apart; `rate` is
 *   then a lower bound, 0 where none was found
 */
export function growthBySubspace(part: Part, growing: number): Growth {
  const { size, u } = part;
  const watched = Math.min(WATCHED, growing);
  const strength = nodeStrength(part);
  const shaper = residualShaper(part, strength);
  const basis: Float64Array[] = [];
  const images: Float64Array[] = []; // Lap times the basis
  for (let k = 0; k < LARGEST_BASIS; k++) {
    basis.push(new Float64Array(size));
    images.push(new Float64Array(size));
  }
  const projected = new Matrix(LARGEST_BASIS, LARGEST_BASIS);
  const residual = startVector(size, -1);
  const ritz = new Float64Array(size);
  const leading = new Float64Array(size);
  const room = new Float64Array(size);
  // Every node gets the same share of the inner product: no mode, however local, is missing from the start.
  for (let i = 0; i < size; i++) residual[i]! /= Math.sqrt(strength[i]!);
  let count = 0;
  let rate = 0;
  let uncertainty = 1;
  let settled = false;
  for (let step = 0; step < MOST_STEPS; step++) {
    if (!join()) break;
    const small = new EigenvalueDecomposition(projected.subMatrix(0, count - 1, 0, count - 1), {
      assumeSymmetric: true,
    });
    const values = small.realEigenvalues; // rising
    const vectors = small.eigenvectorMatrix;
    rate = values[count - 1]!;
    let unsettled = -1;
    let shape = rate;
    for (let k = 0; k < Math.min(watched, count) && unsettled < 0; k++) {
      const value = values[count - 1 - k]!;
      const norm = residualOf(vectors, count - 1 - k, value);
      if (k === 0) {
        leading.set(ritz);
        // The residual bounds the distance to a rate; its square over the gap estimates it (Parlett 1998, 11.7).
        const gap = count > 1 ? rate - values[count - 2]! : 0;
        uncertainty = rate > 0 ? Math.min(1, norm / rate, gap > 0 ? (norm * norm) / (gap * rate) : 1) : 1;
        if (!(uncertainty <= GOOD && norm <= 1e-3 * rate)) unsettled = k;
      } else if (value + norm > rate && norm > 1e-4 * rate) unsettled = k;
      shape = value;
    }
    settled = unsettled < 0 && count >= watched;
    if (settled) break;
    if (count === LARGEST_BASIS) restart(vectors, values);
    shaper(residual, Math.abs(shape));
  }
  // Potentials z and pressures y = u x are eigenvectors of the same `-U Lap`: where the rate is not 0 they are one vector.
  return { rate: Math.max(0, rate), pressures: leading, uncertainty, converged: settled };

  /** Writes the residual of a Ritz pair and returns its norm. */
  function residualOf(vectors: Matrix, column: number, value: number): number {
    combine(basis, vectors, column, ritz);
    combine(images, vectors, column, room);
    for (let i = 0; i < size; i++) residual[i] = -u[i]! * room[i]! - value * ritz[i]!;
    applyLaplacian(part, residual, room);
    return Math.sqrt(Math.max(0, dot(residual, room)));
  }

  /** Makes `residual` orthonormal to the basis and adds it; false where nothing of it is left. */
  function join(): boolean {
    const vector = basis[count]!;
    const image = images[count]!;
    vector.set(residual);
    for (let pass = 0; pass < 3; pass++) {
      applyLaplacian(part, vector, image);
      const norm = Math.sqrt(dot(vector, image));
      if (!(norm > 0 && norm < Infinity)) return false;
      for (let i = 0; i < size; i++) vector[i]! /= norm;
      for (let i = 0; i < size; i++) image[i]! /= norm;
      if (pass === 2) break;
      for (let k = 0; k < count; k++) {
        const share = dot(images[k]!, vector);
        const other = basis[k]!;
        for (let i = 0; i < size; i++) vector[i]! -= share * other[i]!;
      }
    }
    for (let k = 0; k <= count; k++) {
      const other = images[k]!;
      let sum = 0;
      for (let i = 0; i < size; i++) sum -= u[i]! * other[i]! * image[i]!;
      projected.set(k, count, sum);
      projected.set(count, k, sum);
    }
    count++;
    return true;
  }

  /** Keeps the leading Ritz vectors only. */
  function restart(vectors: Matrix, values: readonly number[]): void {
    const row = new Float64Array(LARGEST_BASIS);
    for (const set of [basis, images]) {
      for (let i = 0; i < size; i++) {
        for (let k = 0; k < LARGEST_BASIS; k++) row[k] = set[k]![i]!;
        for (let c = 0; c < KEPT; c++) {
          let sum = 0;
          for (let k = 0; k < LARGEST_BASIS; k++) sum += row[k]! * vectors.get(k, LARGEST_BASIS - 1 - c);
          set[c]![i] = sum;
        }
      }
    }
    for (let c = 0; c < KEPT; c++) {
      for (let k = 0; k < KEPT; k++) projected.set(c, k, c === k ? values[LARGEST_BASIS - 1 - c]! : 0);
    }
    count = KEPT;
  }

  function combine(set: readonly Float64Array[], vectors: Matrix, column: number, out: Float64Array): void {
    out.fill(0);
    for (let k = 0; k < count; k++) {
      const share = vectors.get(k, column);
      const one = set[k]!;
      for (let i = 0; i < size; i++) out[i]! += share * one[i]!;
    }
  }
}

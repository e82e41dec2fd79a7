/**
 * Shapes a residual of the iterative path: the nodes that push back (cavities, pools, stiff films) follow the others as they
 * would at the sought rate, so that relaxation decades faster than the growth does not slow the search.
 *
 * Solves `(s + U+ Lap) t = r` with U+ = max(u, 0): at nodes with u < 0, `t = r/s`; at the others (P)
 * `(Lap_PP + s/u) t_P = r_P/u - Lap_PN t_N`, symmetric positive definite, by conjugate gradients scaled by the diagonal,
 * to a rough tolerance: it shapes a direction, it does not enter the result.
 * Source: Hestenes & Stiefel (1952); Golub & Van Loan, Matrix Computations, section 11.5.
 */

import type { Part } from './mode-network.ts';
import { applyLaplacian } from './part-laplacian.ts';

const MOST_SWEEPS = 60;
const REDUCTION = 0.05;

/** Shapes `residual` in place at the rate scale `s` (1/s, above 0). */
export type ResidualShaper = (residual: Float64Array, s: number) => void;

/** @param strength diagonal of the Laplacian (see `nodeStrength`) */
export function residualShaper(part: Part, strength: Float64Array): ResidualShaper {
  const { size, u } = part;
  const follower = Uint8Array.from(u, (value) => (value > 0 ? 1 : 0));
  const any = follower.includes(1);
  const solution = new Float64Array(size);
  const left = new Float64Array(size);
  const direction = new Float64Array(size);
  const image = new Float64Array(size);

  return (residual, s) => {
    if (!any || !(s > 0)) return;
    for (let i = 0; i < size; i++) solution[i] = follower[i] === 1 ? 0 : residual[i]! / s;
    applyLaplacian(part, solution, image);
    let size2 = 0;
    for (let i = 0; i < size; i++) {
      left[i] = follower[i] === 1 ? residual[i]! / u[i]! - image[i]! : 0;
      direction[i] = follower[i] === 1 ? left[i]! / (strength[i]! + s / u[i]!) : 0;
      size2 += left[i]! * direction[i]!;
    }
    const goal = REDUCTION * REDUCTION * size2;
    for (let sweep = 0; sweep < MOST_SWEEPS && size2 > goal; sweep++) {
      applyLaplacian(part, direction, image);
      let energy = 0;
      for (let i = 0; i < size; i++) {
        if (follower[i] !== 1) continue;
        image[i]! += (s / u[i]!) * direction[i]!;
        energy += direction[i]! * image[i]!;
      }
      if (!(energy > 0)) break;
      const step = size2 / energy;
      let next = 0;
      for (let i = 0; i < size; i++) {
        if (follower[i] !== 1) continue;
        solution[i]! += step * direction[i]!;
        left[i]! -= step * image[i]!;
        next += (left[i]! * left[i]!) / (strength[i]! + s / u[i]!);
      }
      const share = next / size2;
      for (let i = 0; i < size; i++) {
        if (follower[i] === 1) direction[i] = left[i]! / (strength[i]! + s / u[i]!) + share * direction[i]!;
      }
      size2 = next;
    }
    residual.set(solution);
  };
}

/**
 * The factor of `K(s) = Lap + s diag(1/u)` by star-mesh elimination, its inertia, and solves with it.
 *
 * Pressures `y = U x` of a mode with rate s obey `K(s) y = 0`, and K's inertia counts rates: as s rises through a positive
 * rate one eigenvalue of K passes from plus to minus, hence `rates above s = neg(u) - neg(K(s))`.
 *
 * What a row sums to (`excess`: leak + s/u) is carried apart from the conductances and never rebuilt by subtraction,
 * so the slow rate of a network with links ten decades faster keeps its digits
 * (Grassmann, Taksar & Heyman 1985; O'Cinneide 1993).
 */

import type { EliminationOrder } from './elimination-order.ts';
import type { Part } from './mode-network.ts';

/** A factor at one s, with the room to make it anew. Arrays are in positions of the order. */
export interface StarMesh {
  readonly part: Part;
  readonly order: EliminationOrder;
  /** Conductances between what is left when each column is eliminated; the pattern of `order.rows`. */
  readonly conductance: Float64Array;
  readonly excess: Float64Array;
  readonly pivot: Float64Array;
  readonly work: Float64Array;
}

/** Room for factors of a part. */
export function starMesh(part: Part, order: EliminationOrder): StarMesh {
  return {
    part,
    order,
    conductance: new Float64Array(order.rows.length),
    excess: new Float64Array(part.size),
    pivot: new Float64Array(part.size),
    work: new Float64Array(part.size),
  };
}

/**
 * Factors K(s).
 * @param s trial rate, 1/s, above 0
 * @returns number of negative pivots, which is the number of negative eigenvalues of K; NaN where a pivot is not a number
 */
export function factor(mesh: StarMesh, s: number): number {
  const { part, order, conductance, excess, pivot } = mesh;
  const { start, rows, position, linkPlace } = order;
  conductance.fill(0);
  for (let e = 0; e < linkPlace.length; e++) conductance[linkPlace[e]!]! += part.conductance[e]!;
  for (let i = 0; i < part.size; i++) excess[position[i]!] = part.leak[i]! + s / part.u[i]!;
  let negative = 0;
  for (let k = 0; k < part.size; k++) {
    const first = start[k]!;
    const last = start[k + 1]!;
    let sum = 0;
    for (let a = first; a < last; a++) sum += conductance[a]!;
    let d = excess[k]! + sum;
    // A pivot of exactly 0 stands for an s that is a rate to rounding: the nearest number decides its side.
    if (d === 0) d = -Number.EPSILON * (Math.abs(sum) + Math.abs(excess[k]!)) || -Number.MIN_VALUE;
    if (Number.isNaN(d)) return NaN;
    if (d < 0) negative++;
    pivot[k] = d;
    const own = excess[k]!;
    for (let a = first; a < last; a++) {
      const i = rows[a]!;
      const share = conductance[a]! / d;
      excess[i]! += share * own;
      // G_ij += G_ik G_kj / d for the later j: both runs rise, and column i holds every such j.
      let place = start[i]!;
      for (let b = a + 1; b < last; b++) {
        const j = rows[b]!;
        while (rows[place]! < j) place++;
        conductance[place]! += share * conductance[b]!;
      }
    }
  }
  return negative;
}

/** Replaces `x` (in node order) by the solution of `K x = right side`, with the last factor. */
export function solve(mesh: StarMesh, x: Float64Array): void {
  const { part, order, conductance, pivot, work } = mesh;
  const { start, rows, position } = order;
  for (let i = 0; i < part.size; i++) work[position[i]!] = x[i]!;
  for (let k = 0; k < part.size; k++) {
    const scaled = work[k]! / pivot[k]!;
    for (let a = start[k]!; a < start[k + 1]!; a++) work[rows[a]!]! += conductance[a]! * scaled;
  }
  for (let k = part.size - 1; k >= 0; k--) {
    let sum = work[k]!;
    for (let a = start[k]!; a < start[k + 1]!; a++) sum += conductance[a]! * work[rows[a]!]!;
    work[k] = sum / pivot[k]!;
  }
  for (let i = 0; i < part.size; i++) x[i] = work[position[i]!]!;
}

/**
 * How many modes of a network grow, by counting signs: exact at any size, no eigenvalue needed.
 *
 * Derivation. `-Lap U` has the nonzero eigenvalues of the symmetric `-Lap^(1/2) U Lap^(1/2)`, so they are real, and as many
 * are positive as the form `sum u_i x_i^2` has negative directions on the range of Lap (Sylvester's law of inertia).
 * - Open part (a reservoir on it): Lap is positive definite, the range is everything: the count is neg(u).
 * - Closed part: the range is `sum x_i = 0`. Take the bordered matrix `B = [[U, 1], [1', 0]]`. On the one hand
 *   In(B) = In(U on sum x = 0) + (1, 1, 0); on the other, where no u is 0, Haynsworth's additivity (1968) gives
 *   In(B) = In(U) + In(-sum 1/u_i). Hence the count is neg(u) where `sum 1/u_i > 0` and neg(u) - 1 where it is
 *   negative; where it is exactly 0, neg(u) - 1 and one mode at rest. With a u_k = 0 the sum is infinite and node k
 *   takes up the constraint at no cost: the count is neg(u).
 * For one negative u_k this is the known rule: stable when `1/|u_k|` exceeds the sum of 1/u_i over the others.
 */

import type { ModeNetwork, Parts } from './mode-network.ts';

/** A |u| below this share of the greatest in the network counts as 0: its inverse would overflow. */
const SOFT = 1e-200;

/** 1 for each node whose u counts as 0. */
export function softNodes(network: ModeNetwork): Uint8Array {
  const { size, u, grounded } = network;
  const soft = new Uint8Array(size);
  let greatest = 0;
  for (let i = 0; i < size; i++) if (grounded[i] !== 1) greatest = Math.max(greatest, Math.abs(u[i]!));
  for (let i = 0; i < size; i++) if (grounded[i] !== 1 && Math.abs(u[i]!) <= SOFT * greatest) soft[i] = 1;
  return soft;
}

/**
 * Number of growing modes of each part.
 * @returns length `parts.count`
 */
export function countGrowing(network: ModeNetwork, parts: Parts, soft: Uint8Array): Int32Array {
  const { size, u } = network;
  const { count, part, open } = parts;
  const negative = new Int32Array(count);
  const hasSoft = new Uint8Array(count);
  const least = new Float64Array(count).fill(Infinity);
  for (let i = 0; i < size; i++) {
    const p = part[i]!;
    if (p < 0) continue;
    if (soft[i] === 1) {
      hasSoft[p] = 1;
      continue;
    }
    if (u[i]! < 0) negative[p]!++;
    least[p] = Math.min(least[p]!, Math.abs(u[i]!));
  }
  // sum of least/u, with Neumaier's compensation: terms of both signs nearly cancel at the boundary.
  const sum = new Float64Array(count);
  const lost = new Float64Array(count);
  for (let i = 0; i < size; i++) {
    const p = part[i]!;
    if (p < 0 || soft[i] === 1) continue;
    const term = least[p]! / u[i]!;
    const total = sum[p]! + term;
    if (Math.abs(sum[p]!) >= Math.abs(term)) lost[p]! += sum[p]! - total + term;
    else lost[p]! += term - total + sum[p]!;
    sum[p] = total;
  }
  for (let p = 0; p < count; p++) {
    const closed = open[p] === 0 && hasSoft[p] === 0;
    if (closed && negative[p]! > 0 && sum[p]! + lost[p]! <= 0) negative[p]!--;
  }
  return negative;
}

/**
 * The conductance Laplacian of a part as an operator, and what goes with it.
 */

import type { Part } from './mode-network.ts';

/** `out = Lap z`, mol/s for z in Pa. */
export function applyLaplacian(part: Part, z: Float64Array, out: Float64Array): void {
  const { from, to, conductance, leak } = part;
  for (let i = 0; i < part.size; i++) out[i] = leak[i]! * z[i]!;
  for (let e = 0; e < from.length; e++) {
    const i = from[e]!;
    const j = to[e]!;
    const flow = conductance[e]! * (z[i]! - z[j]!);
    out[i]! += flow;
    out[j]! -= flow;
  }
}

/** All conductance at each node, the diagonal of the Laplacian, mol/(s Pa). */
export function nodeStrength(part: Part): Float64Array {
  const strength = new Float64Array(part.leak);
  for (let e = 0; e < part.from.length; e++) {
    strength[part.from[e]!]! += part.conductance[e]!;
    strength[part.to[e]!]! += part.conductance[e]!;
  }
  return strength;
}

export function dot(a: Float64Array, b: Float64Array): number {
  let sum = 0;
  for (let i = 0; i < a.length; i++) sum += a[i]! * b[i]!;
  return sum;
}

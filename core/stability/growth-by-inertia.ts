/**
 * The fastest growth rate of one part, bracketed by the inertia of `K(s)` and found by inverse iteration inside the bracket.
 * The bracket is a proof: below its low end a growing rate is missing, above its high end there is none.
 * Sources: Parlett, The Symmetric Eigenvalue Problem (1998), chapters 3 and 4 (spectrum slicing, inverse iteration).
 */

import type { EliminationOrder } from './elimination-order.ts';
import type { Part } from './mode-network.ts';
import { factor, solve, starMesh } from './star-mesh.ts';

/** The fastest growth of a part. */
export interface Growth {
  /** 1/s, above 0. */
  readonly rate: number;
  /** The mode as pressures y = u x, in the part's numbering, any scale and sign. */
  readonly pressures: Float64Array;
  /** Relative uncertainty of `rate`: the bracket's width and the rounding of u here, estimated from the residual on the iterative path. */
  readonly uncertainty: number;
  readonly converged: boolean;
}

/** Relative width at which the bracket counts as closed. */
const CLOSED = 1e-9;
const MOST_FACTORS = 160;

/**
 * A rate that no growth of the part exceeds, 1/s, and the node that sets it.
 * Nodes that push back only lower the rates, so the largest eigenvalue among those that do not (with the others held) is
 * a bound, and Gershgorin's theorem bounds that one: `|u_i| (L_ii + sum of G_ij over negative j)`.
 */
export function growthBound(part: Part): { readonly rate: number; readonly node: number } {
  const rows = new Float64Array(part.leak);
  for (let e = 0; e < part.from.length; e++) {
    const i = part.from[e]!;
    const j = part.to[e]!;
    const g = part.conductance[e]!;
    rows[i]! += part.u[j]! < 0 ? 2 * g : g;
    rows[j]! += part.u[i]! < 0 ? 2 * g : g;
  }
  let rate = 0;
  let node = -1;
  for (let i = 0; i < part.size; i++) {
    const bound = -part.u[i]! * rows[i]!;
    if (!(bound > rate)) continue;
    rate = bound;
    node = i;
  }
  return { rate: rate * (1 + 1e-12), node };
}

/**
 * Finds the largest growing rate; the part must have one (see `inertia.ts`).
 * @returns `converged` false where the bracket did not close
 */
export function growthByInertia(part: Part, order: EliminationOrder): Growth {
  const { size, u } = part;
  const mesh = starMesh(part, order);
  let negativeNodes = 0;
  for (let i = 0; i < size; i++) if (u[i]! < 0) negativeNodes++;
  const bound = growthBound(part);
  let low = 0;
  let high = bound.rate;
  const y = startVector(size, bound.node);
  const next = new Float64Array(size);
  let trial = high;
  let candidate = NaN;
  for (let round = 0; round < MOST_FACTORS && high - low > CLOSED * high; round++) {
    const negative = factor(mesh, trial);
    if (Number.isNaN(negative)) return { rate: high, pressures: y, uncertainty: 1, converged: false };
    if (negativeNodes - negative > 0) low = trial;
    else high = trial;
    const previous = candidate;
    for (let pass = 0; pass < 2; pass++) candidate = trial - inverseStep(y, next);
    trial = nextTrial(low, high, candidate, previous);
  }
  const inside = candidate >= low && candidate <= high;
  return {
    rate: inside ? candidate : (low + high) / 2,
    pressures: y,
    uncertainty: (high - low) / high + rounding(),
    converged: high - low <= CLOSED * high,
  };

  /**
   * What rounding of the stiffnesses does to the rate, relative: from `y' Lap y + rate sum y^2/u = 0`, where the two
   * sides of the sum nearly cancel (a bank at its boundary) the rate is that much less certain.
   */
  function rounding(): number {
    let sizes = 0;
    let sum = 0;
    for (let i = 0; i < size; i++) {
      sizes += Math.abs((y[i]! * y[i]!) / u[i]!);
      sum += (y[i]! * y[i]!) / u[i]!;
    }
    return Math.min(1, (4 * Number.EPSILON * sizes) / Math.abs(sum));
  }

  /** One step `y <- K^-1 U^-1 y`, scaled; returns the distance `trial - rate` that it points to. */
  function inverseStep(vector: Float64Array, room: Float64Array): number {
    for (let i = 0; i < size; i++) room[i] = vector[i]! / u[i]!;
    solve(mesh, room);
    let across = 0;
    let own = 0;
    let largest = 0;
    for (let i = 0; i < size; i++) {
      across += (vector[i]! * room[i]!) / u[i]!;
      own += (vector[i]! * vector[i]!) / u[i]!;
      largest = Math.max(largest, Math.abs(room[i]!));
    }
    if (largest > 0 && largest < Infinity) for (let i = 0; i < size; i++) vector[i] = room[i]! / largest;
    return own / across;
  }
}

/** Where to factor next: on either side of a candidate that has settled, at a candidate inside the bracket, else between. */
function nextTrial(low: number, high: number, candidate: number, previous: number): number {
  if (candidate > low && candidate < high) {
    if (Math.abs(candidate - previous) <= 0.1 * CLOSED * candidate) {
      const below = candidate * (1 - 0.4 * CLOSED);
      const above = candidate * (1 + 0.4 * CLOSED);
      if (above < high) return above;
      if (below > low) return below;
    }
    return candidate;
  }
  if (low === 0) return high / 16;
  return high > 4 * low ? Math.sqrt(low * high) : (low + high) / 2;
}

/** The node that bounds the rate, and a little of everything: the same numbers at each call. */
export function startVector(size: number, node: number): Float64Array {
  const vector = new Float64Array(size);
  let state = 12345;
  for (let i = 0; i < size; i++) {
    // A linear congruence of full period (Knuth, The Art of Computer Programming 2, 3.3.4).
    state = (Math.imul(state, 1664525) + 1013904223) | 0;
    vector[i] = state / 4294967296;
  }
  if (node >= 0) vector[node] = 1;
  return vector;
}

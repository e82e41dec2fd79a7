/**
 * What every node shows to its links at one instant: pressure, partial pressures, radius, and their slopes.
 * The arrays are made once; `evaluate.ts` fills them at each call.
 */
import { BUBBLE, CAVITY, POOL, RESERVOIR, type Network } from './network.ts';

export interface NodeState {
  readonly network: Network;
  readonly species: number;
  /** Total gas pressure, Pa. */
  readonly pressure: Float64Array;
  /** Partial pressures, Pa, node * species + k. The same array as `pressure` where there is one species. */
  readonly partial: Float64Array;
  /** Radius of curvature, m; Infinity for nodes that are no bubble, so that the smaller of two is always the bubble's. */
  readonly radius: Float64Array;
  /** The unknown of the bubble's own balance: radius of a free sphere, height of a cap, m. Warm start of the next solve. */
  readonly size: Float64Array;
  readonly sizeSlope: Float64Array; // d size / d n, m/mol
  readonly lastAmount: Float64Array; // mol, at which `size` was found
  readonly tension: Float64Array; // N/m
  readonly elasticity: Float64Array; // N/m
  readonly coverage: Float64Array;
  readonly twoPhase: Float64Array; // indicator of the film, positive inside
  readonly micelles: Float64Array; // indicator of the film, positive above the cmc
  // Slopes, filled when asked for.
  /** u = dp/dn at constant composition, Pa/mol. */
  readonly stiffness: Float64Array;
  /** d partial_k / d n_l, Pa/mol, (node * species + k) * species + l. The same array as `stiffness` for one species. */
  readonly partialSlope: Float64Array;
  readonly radiusSlope: Float64Array; // dR/dn, m/mol
  /** Rates of change at constant amounts, because the vessel's or a reservoir's pressure moves. */
  readonly pressureDrift: Float64Array; // Pa/s
  readonly radiusDrift: Float64Array; // m/s
  /** Bubbles to be evaluated: a set that shrinks as bubbles vanish or are carried apart. */
  readonly spheres: Int32Array;
  /** The node at which the last evaluation failed. */
  failed: number;
  sphereCount: number;
  readonly shaped: Int32Array;
  shapedCount: number;
  /** Nodes that are neither bubbles nor accounts. */
  readonly rigid: Int32Array;
}

/** True for a bubble that the fast kernel serves: a free sphere of constant tension, without a wall. */
export function isPlainSphere(network: Network, node: number): boolean {
  const { nodes, films } = network;
  return nodes.mouth[node] === 0 && nodes.wallStiffness[node] === 0 && films[nodes.film[node]!]!.constantTension;
}

/** Makes the arrays for a network; all its bubbles are active. */
export function createNodeState(network: Network): NodeState {
  const { nodes, films } = network;
  const n = nodes.count;
  const species = network.species.length;
  const pressure = new Float64Array(n);
  const stiffness = new Float64Array(n);
  const state: NodeState = {
    network,
    species,
    pressure,
    partial: species === 1 ? pressure : new Float64Array(n * species),
    radius: new Float64Array(n).fill(Infinity),
    size: new Float64Array(n),
    sizeSlope: new Float64Array(n),
    lastAmount: new Float64Array(n),
    tension: new Float64Array(n),
    elasticity: new Float64Array(n),
    coverage: new Float64Array(n).fill(NaN),
    twoPhase: new Float64Array(n).fill(-1),
    micelles: new Float64Array(n).fill(-1),
    stiffness,
    partialSlope: species === 1 ? stiffness : new Float64Array(n * species * species),
    radiusSlope: new Float64Array(n),
    pressureDrift: new Float64Array(n),
    radiusDrift: new Float64Array(n),
    spheres: new Int32Array(nodes.bubbleCount),
    failed: -1,
    sphereCount: 0,
    shaped: new Int32Array(nodes.bubbleCount),
    shapedCount: 0,
    rigid: Int32Array.from({ length: n }, (_, i) => i).filter((i) => {
      const kind = nodes.kind[i];
      return kind === CAVITY || kind === POOL || kind === RESERVOIR;
    }),
  };
  for (let i = 0; i < n; i++) {
    if (nodes.kind[i] === BUBBLE) state.tension[i] = films[nodes.film[i]!]!.cleanTension;
  }
  setActiveBubbles(state, new Uint8Array(n).fill(1));
  return state;
}

/** Chooses which bubbles are evaluated: those with a nonzero entry in `active` (one per node). */
export function setActiveBubbles(state: NodeState, active: Uint8Array): void {
  state.sphereCount = state.shapedCount = 0;
  for (let i = 0; i < state.network.nodes.bubbleCount; i++) if (active[i] !== 0) activateBubble(state, i);
}

/** Adds one bubble to those that are evaluated. */
export function activateBubble(state: NodeState, i: number): void {
  if (isPlainSphere(state.network, i)) state.spheres[state.sphereCount++] = i;
  else state.shaped[state.shapedCount++] = i;
}

/** A node has no state: an evaluation ends with false, and tells which. */
export function fail(state: NodeState, i: number): false {
  state.failed = i;
  return false;
}

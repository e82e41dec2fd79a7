/**
 * Dying bubbles, carried apart. A free bubble that will be gone within a few steps would make the whole network step at its own
 * pace; it leaves the main system instead and is integrated alone (with those it touches that die too) in s = R^2, which falls
 * nearly linearly in time. Its gas enters the main system as a smooth source, a quadratic in time for each neighbour, and after
 * the step the bubble is integrated again between the neighbours' new pressures: what the two passes differ by is the error of
 * this set, handed to the step control, and is moved at the step's end, so that no gas is lost.
 */
import { waveformValue } from '../network/waveform.ts';
import type { Companion } from '../integrate2/owned-stepper.ts';
import type { Adjacency } from './adjacency.ts';
import { createCluster, type Cluster } from './cluster.ts';
import type { NetworkSystem } from './system.ts';

/** A bubble is carried once its remaining life is shorter than this many steps. */
const LIFE_IN_STEPS = 4;

export interface Vanishing {
  readonly node: number;
  readonly time: number;
  /** What was left in it and handed over, mol. */
  readonly amount: number;
}

export interface Carried extends Companion {
  /** Nodes that are carried in the step at hand. */
  readonly members: readonly number[];
  isMember(node: number): boolean;
  /** Forgets the past, after a jump of state. */
  restart(): void;
  /** Chooses who is carried in the next step, of about `h`. Node states must be those of (t, y). */
  plan(t: number, y: Float64Array, h: number): void;
  /** Vanishings of the step just done, in time order. */
  losses(): Vanishing[];
  /** The step stands: the corrections of the state through `adjust(unknown, delta)`. */
  commit(t: number, y: Float64Array, adjust: (unknown: number, delta: number) => void): void;
  /** The step is cut: the state is taken from `complete`, and the past is forgotten. */
  cutShort(): void;
  /** Turns a dense output of the main system at time t inside the last step into the whole state: carried bubbles, gas on its way. */
  complete(t: number, y: Float64Array): void;
}

/**
 * @param alive one entry a node: 0 once it has vanished
 * @param linkOpen one array a group: 1 where the link is alive and its valve open
 * @param candidates one entry a node: 1 for free spheres whose links are all diffusive
 * @param withSlopes whether node states at a step's end are wanted with slopes
 * @param dropped receives gas that had no neighbour to go to, mol per species
 */
export function createCarried(
  system: NetworkSystem,
  adjacency: Adjacency,
  alive: Uint8Array,
  linkOpen: readonly Uint8Array[],
  candidates: Uint8Array,
  vanishRadius: number,
  tolerance: number,
  dropped: Float64Array,
  withSlopes: boolean,
): Carried {
  const { network, state } = system;
  const { nodes } = network;
  const species = state.species;
  const n = nodes.count;
  const active = new Uint8Array(n).fill(1);
  const members: number[] = [];
  /** Clusters are used again from step to step; the first `clusterCount` are those of the step at hand. */
  const pool: Cluster[] = [];
  let clusterCount = 0;
  const mark = new Int32Array(n).fill(-1);
  // Node states at the start of the step, one step before, and at its end: what the carried bubbles see of their neighbours.
  const now = { partial: new Float64Array(n * species), radius: new Float64Array(n) };
  const past = { partial: new Float64Array(n * species), radius: new Float64Array(n) };
  const next = { partial: new Float64Array(n * species), radius: new Float64Array(n) };
  let pastStep = 0; // length of the step before, 0 where there is none
  let totalAmount = 0;
  let start = 0;
  const scratch = new Float64Array(system.size);
  const misplaced = new Float64Array(system.size); // zero between uses
  const scale = new Float64Array(system.size);

  const surroundings = { now, past, next, pastStep: 0, step: 0 };

  function lifetime(i: number, y: Float64Array, rates: Float64Array | null): number {
    if (rates === null) {
      const s = now.radius[i]! * now.radius[i]!;
      const before = past.radius[i]! * past.radius[i]!;
      return before > s ? (s * pastStep) / (before - s) : Infinity;
    }
    let amount = 0;
    let rate = 0;
    for (let k = 0; k < species; k++) {
      amount += y[i * species + k]!;
      rate += rates[i * species + k]!;
    }
    // n goes as s^(3/2): s/(-ds/dt) = 1.5 n/(-dn/dt).
    return rate < 0 ? (-1.5 * amount) / rate : Infinity;
  }

  function clearSources(): void {
    const { sources } = system;
    for (let q = 0; q < sources.count; q++) sources.place[sources.unknown[q]!] = -1;
    sources.count = 0;
  }

  function select(t: number, y: Float64Array, h: number): void {
    let rates: Float64Array | null = null;
    if (pastStep === 0) {
      rates = scratch;
      active.set(alive);
      clearSources();
      system.setActive(active, linkOpen);
      system.rates(t, y, rates);
    }
    for (const i of members) mark[i] = -1;
    members.length = 0;
    for (let i = 0; i < nodes.bubbleCount; i++) {
      if (candidates[i] === 0 || alive[i] === 0) continue;
      if (lifetime(i, y, rates) < LIFE_IN_STEPS * h) members.push(i);
    }
  }

  /** Those that touch are integrated together. */
  function gather(): void {
    clusterCount = 0;
    for (const i of members) mark[i] = -2;
    for (const i of members) {
      if (mark[i] !== -2) continue;
      const group = [i];
      mark[i] = clusterCount;
      for (let q = 0; q < group.length; q++) {
        const a = group[q]!;
        for (let e = adjacency.start[a]!; e < adjacency.start[a + 1]!; e++) {
          const b = adjacency.other[e]!;
          if (mark[b] === -2 && linkOpen[adjacency.group[e]!]![adjacency.link[e]!] !== 0) {
            mark[b] = clusterCount;
            group.push(b);
          }
        }
      }
      pool[clusterCount] ??= createCluster(system, adjacency, linkOpen, alive, vanishRadius, tolerance);
      pool[clusterCount++]!.assign(group);
    }
  }

  return {
    members,
    isMember: (node) => mark[node]! >= 0,

    restart() {
      pastStep = 0;
    },

    plan(t, y, h) {
      if (pastStep > 0) {
        past.partial.set(now.partial);
        past.radius.set(now.radius);
      }
      now.partial.set(state.partial);
      now.radius.set(state.radius);
      select(t, y, h);
      totalAmount = 0;
      for (let i = 0; i < nodes.bubbleCount * species; i++) totalAmount += y[i]!;
      gather();
      for (let c = 0; c < clusterCount; c++) pool[c]!.load(y);
      active.set(alive);
      for (const i of members) active[i] = 0;
      system.setActive(active, linkOpen);
      system.errorScale(y, scale);
      start = t;
    },

    begin(t, h) {
      surroundings.pastStep = pastStep;
      surroundings.step = 0; // the end of the step is not known yet: extrapolate
      const { sources } = system;
      clearSources();
      sources.origin = t;
      const ambient = waveformValue(network.ambient, t);
      for (let c = 0; c < clusterCount; c++) {
        pool[c]!.integrate(t, h, ambient, surroundings);
        pool[c]!.fit(h, sources);
      }
    },

    error(t, h, candidate) {
      if (!system.evaluate(t + h, candidate, withSlopes)) return Infinity;
      next.partial.set(state.partial);
      next.radius.set(state.radius);
      surroundings.step = h;
      const ambient = waveformValue(network.ambient, t);
      for (let c = 0; c < clusterCount; c++) {
        pool[c]!.integrate(t, h, ambient, surroundings);
        pool[c]!.addMisplaced(misplaced);
      }
      // Gas misplaced for one step, against what its receiver holds; a pool's receivers are all the bubbles on it.
      let worst = 0;
      for (let c = 0; c < clusterCount; c++) {
        for (const u of pool[c]!.receivers) {
          const node = Math.floor(u / species);
          const holds = node < nodes.bubbleCount ? scale[u]! : tolerance * totalAmount;
          const e = (0.1 * Math.abs(misplaced[u]!)) / holds;
          if (e > worst) worst = e;
        }
      }
      for (let c = 0; c < clusterCount; c++) for (const u of pool[c]!.receivers) misplaced[u] = 0;
      // The clusters wrote their neighbours' courses into the node state: put the end of the step back.
      state.partial.set(next.partial);
      state.radius.set(next.radius);
      for (let c = 0; c < clusterCount; c++) pool[c]!.showEnd();
      return worst;
    },

    losses() {
      const vanished: Vanishing[] = [];
      for (let c = 0; c < clusterCount; c++) pool[c]!.addLosses(start, vanished);
      return vanished.sort((a, b) => a.time - b.time || a.node - b.node);
    },

    cutShort() {
      pastStep = 0;
    },

    commit(t, y, adjust) {
      pastStep = t - start;
      for (let c = 0; c < clusterCount; c++) {
        const cluster = pool[c]!;
        cluster.addMisplaced(misplaced);
        for (const u of cluster.receivers) {
          if (misplaced[u] !== 0) adjust(u, misplaced[u]!);
          misplaced[u] = 0;
        }
        cluster.finish(y, adjust, dropped);
      }
    },

    complete(t, y) {
      for (let c = 0; c < clusterCount; c++) pool[c]!.complete(t - start, y);
    },
  };
}

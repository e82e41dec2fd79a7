/**
 * Dying bubbles, carried apart. A free bubble that will be gone within a few steps would make the whole network step at its own
 * pace; it leaves the main system instead and is integrated alone (with those it touches that die too), see `cluster.ts`. Its gas
 * enters the main system as a smooth source, a quadratic in time for each neighbour, and after the step the bubble is integrated again
 * between the neighbours' new states. What the two passes differ by, and what the sources are ahead or behind meanwhile, is the error
 * of this set, handed to the step control; what is misplaced is put right at the step's end, so that no gas is lost.
 */
import { waveformValue } from '../network/waveform.ts';
import type { Companion, ErrorNorm } from '../integrate/owned-stepper.ts';
import type { Adjacency } from './adjacency.ts';
import { createCluster } from './cluster.ts';
import { createClusterList } from './cluster-list.ts';
import { activateBubble, setActiveBubbles } from '../network/node-state.ts';
import { addSource, type NetworkSystem } from './system.ts';

/** A bubble is carried once its remaining life is shorter than this many steps. */
const LIFE_IN_STEPS = 4;
/** Mark of a bubble that has been selected and not yet grouped. */
const WAITING = -2;

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
  /**
   * Gas of the last step that its sources misplaced and that the nodes after the bubbles have still to get (it may be below zero),
   * mol, (node - bubbles) * species + k. A pool is stiff: it gets it smoothly during the next step, not at a stroke.
   */
  readonly inTransit: Float64Array;
  /** Delivers what is in transit at once: at the end of a run. */
  deliver(adjust: (unknown: number, delta: number) => void): void;
  /** The step stands: the corrections of the state through `adjust(unknown, delta)`. */
  commit(t: number, y: Float64Array, adjust: (unknown: number, delta: number) => void): void;
  /** The step is cut: the state is taken from `complete`, and the past is forgotten. */
  cutShort(): void;
  /**
   * Turns a dense output of the main system at time t inside the last step into the whole state: carried bubbles, gas on its way.
   * Bubbles that had vanished by then hold nothing.
   */
  complete(t: number, y: Float64Array): void;
  /** Gas that by time t inside the last step had left with bubbles that had no neighbour, mol a species; the array is written anew. */
  droppedBy(t: number): Float64Array;
  /** Writes the amounts of one carried bubble at time t inside the last step, or those it vanished with, into the state y. */
  completeOne(t: number, node: number, y: Float64Array): void;
}

/**
 * @param alive one entry a node: 0 once it has vanished
 * @param linkOpen one array a group: 1 where the link is alive and its valve open
 * @param candidates one entry a node: 1 for free spheres whose links are all diffusive
 * @param norm of the errors of single bubbles, the main system's
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
  norm: ErrorNorm,
  dropped: Float64Array,
): Carried {
  const { network, state } = system;
  const { nodes } = network;
  const species = state.species;
  const n = nodes.count;
  const bubbleUnknowns = nodes.bubbleCount * species;
  const active = new Uint8Array(n).fill(1);
  const cluster = createCluster(system, adjacency, linkOpen, alive, vanishRadius, tolerance);
  const list = createClusterList(species);
  const { members } = list;
  /** The cluster of each node; -1: not carried. */
  const clusterOf = new Int32Array(n).fill(-1);
  // Node states at the start of the step, one step before, and at its end: what the carried bubbles see of their neighbours.
  const now = { partial: new Float64Array(n * species), radius: new Float64Array(n) };
  const past = { partial: new Float64Array(n * species), radius: new Float64Array(n) };
  const next = { partial: new Float64Array(n * species), radius: new Float64Array(n) };
  let pastStep = 0; // length of the step before, 0 where there is none
  let totalAmount = 0;
  let start = 0;
  let ambient = 0;
  const inTransit = new Float64Array(system.size - bubbleUnknowns);
  let stepLength = 0;
  const scratch = new Float64Array(system.size);
  const misplaced = new Float64Array(system.size); // zero between uses
  const untimely = new Float64Array(system.size); // zero between uses
  const conductances = new Float64Array(species);
  const scale = new Float64Array(system.size);
  const found: number[] = []; // selected, before they are grouped
  const group: number[] = [];
  const amounts: number[] = [];
  const droppedSoFar = new Float64Array(species);
  /** The cluster whose course the worker holds, between the neighbours' known ends; -1: none. */
  let followed = -1;

  const ahead = { now, past, next, pastStep: 0, step: 0 }; // the end of the step extrapolated
  const known = { now, past, next, pastStep: 0, step: 0 }; // and known

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

  /** What is in transit becomes a source over [0, h] that begins and ends at nought: 6 delta tau (h - tau)/h^3. */
  function addTransit(h: number): void {
    for (let q = 0; q < inTransit.length; q++) {
      if (inTransit[q] === 0) continue;
      const c = (6 * inTransit[q]!) / (h * h * h);
      addSource(system.sources, bubbleUnknowns + q, 0, c * h, -c);
    }
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
    found.length = 0;
    for (let i = 0; i < nodes.bubbleCount; i++) {
      if (candidates[i] === 0 || alive[i] === 0) continue;
      if (lifetime(i, y, rates) < LIFE_IN_STEPS * h) found.push(i);
    }
  }

  /** Those that touch are integrated together. */
  function gather(y: Float64Array): void {
    for (const i of members) clusterOf[i] = -1;
    list.clear();
    for (const i of found) clusterOf[i] = WAITING;
    for (const i of found) {
      if (clusterOf[i] !== WAITING) continue;
      group.length = 0;
      group.push(i);
      clusterOf[i] = list.count;
      for (let q = 0; q < group.length; q++) {
        const a = group[q]!;
        for (let e = adjacency.start[a]!; e < adjacency.start[a + 1]!; e++) {
          const b = adjacency.other[e]!;
          if (clusterOf[b] === WAITING && linkOpen[adjacency.group[e]!]![adjacency.link[e]!] !== 0) {
            clusterOf[b] = list.count;
            group.push(b);
          }
        }
      }
      list.add(group, y);
    }
  }

  /** Cluster c into the worker. */
  function take(c: number): void {
    followed = -1;
    list.readGroup(c, group);
    cluster.take(group, now.radius, list.startAmount, list.memberStart[c]! * species);
  }

  /** Node states of carried bubbles at the end of the step, or at their own: by the same laws as the others'. */
  function showEnd(t: number, candidate: Float64Array): void {
    scratch.set(candidate);
    state.sphereCount = state.shapedCount = 0;
    for (let q = 0; q < members.length; q++) {
      const i = members[q]!;
      const amount = list.goneAt[q] === Infinity ? list.endAmount : list.goneAmount;
      for (let k = 0; k < species; k++) scratch[i * species + k] = amount[q * species + k]!;
      activateBubble(state, i);
    }
    if (!system.evaluate(t, scratch, true)) throw new Error('a dying bubble has no state at the end of a step');
  }

  /**
   * Gas that for a part of the step was not where it belonged, against what its receiver may err by. Its total is put right at the end
   * of the step; what remains is what the receiver did meanwhile without it: the share h lambda, lambda being how fast its own rate
   * answers to its amount. A pool's receivers are all the bubbles on it; of its sources only the totals count, for it keeps nothing.
   * The norm is the main system's. Node states are those of the step's end.
   */
  function errorOfPlacing(t: number, h: number): number {
    let ofBubbles = 0;
    let ofAll = 0;
    for (let q = 0; q < list.flows; q++) {
      const u = list.receiver[q]!;
      const amount = Math.abs(misplaced[u]!) + (u < bubbleUnknowns ? untimely[u]! : 0);
      misplaced[u] = untimely[u] = 0;
      if (amount === 0) continue;
      if (u < bubbleUnknowns) {
        const e = (Math.min(1, h * answer(Math.floor(u / species), t)) * amount) / scale[u]!;
        ofBubbles = norm === 'max' ? Math.max(ofBubbles, e * e) : ofBubbles + (e * e) / bubbleUnknowns;
      } else {
        const e = amount / (LIFE_IN_STEPS * tolerance * totalAmount);
        ofAll += e * e;
      }
    }
    return Math.sqrt(ofBubbles + ofAll);
  }

  /** How fast the rate of a bubble's amount answers to its amount, 1/s: its links' conductances times its stiffness. */
  function answer(i: number, t: number): number {
    let sum = 0;
    for (let e = adjacency.start[i]!; e < adjacency.start[i + 1]!; e++) {
      const g = adjacency.group[e]!;
      if (linkOpen[g]![adjacency.link[e]!] === 0) continue;
      const { group, kernel } = system.groups[g]!;
      kernel.conductance(group, adjacency.link[e]!, state, t, conductances);
      let largest = 0;
      for (let k = 0; k < species; k++) largest = Math.max(largest, conductances[k]!);
      sum += largest;
    }
    return sum * Math.abs(state.stiffness[i]!);
  }

  return {
    members,
    isMember: (node) => clusterOf[node]! >= 0,
    inTransit,

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
      for (let u = 0; u < bubbleUnknowns; u++) totalAmount += y[u]!;
      gather(y);
      active.set(alive);
      for (const i of members) active[i] = 0;
      system.setActive(active, linkOpen);
      system.errorScale(y, scale);
      start = t;
      ambient = waveformValue(network.ambient, t);
    },

    begin(t, h) {
      ahead.pastStep = pastStep;
      const { sources } = system;
      clearSources();
      sources.origin = t;
      stepLength = h;
      addTransit(h);
      for (let c = 0; c < list.count; c++) {
        take(c);
        cluster.integrate(t, h, ambient, ahead);
        list.fit(c, cluster, h, sources);
      }
    },

    error(t, h, candidate) {
      if (!system.evaluate(t + h, candidate, true)) return Infinity;
      next.partial.set(state.partial);
      next.radius.set(state.radius);
      known.pastStep = pastStep;
      known.step = h;
      for (let c = 0; c < list.count; c++) {
        take(c);
        cluster.integrate(t, h, ambient, known);
        list.correct(c, cluster, misplaced, untimely);
      }
      // The clusters wrote their neighbours' courses into the node state: put the end of the step back.
      state.partial.set(next.partial);
      state.radius.set(next.radius);
      const error = errorOfPlacing(t, h);
      if (error <= 1) {
        showEnd(t + h, candidate);
        setActiveBubbles(state, active);
      }
      return error;
    },

    losses() {
      const vanished: Vanishing[] = [];
      members.forEach((node, q) => {
        if (list.goneAt[q] === Infinity) return;
        let amount = 0;
        for (let k = 0; k < species; k++) amount += list.goneAmount[q * species + k]!;
        vanished.push({ node, time: start + list.goneAt[q]!, amount });
      });
      return vanished.sort((a, b) => a.time - b.time || a.node - b.node);
    },

    cutShort() {
      pastStep = 0;
      inTransit.fill(0);
    },

    deliver(adjust) {
      for (let q = 0; q < inTransit.length; q++) if (inTransit[q] !== 0) adjust(bubbleUnknowns + q, inTransit[q]!);
      inTransit.fill(0);
    },

    commit(t, y, adjust) {
      pastStep = t - start;
      inTransit.fill(0);
      for (let q = 0; q < list.flows; q++) {
        const u = list.receiver[q]!;
        const delta = list.moved[q]! - list.predicted[q]!;
        if (delta === 0) continue;
        if (u >= bubbleUnknowns) inTransit[u - bubbleUnknowns]! += delta;
        else adjust(u, delta);
      }
      members.forEach((i, q) => {
        for (let k = 0; k < species; k++)
          adjust(i * species + k, list.endAmount[q * species + k]! - y[i * species + k]!);
      });
      for (let q = 0; q < list.count * species; q++) {
        dropped[q % species]! += list.dropped[q]!;
        list.dropped[q] = 0;
      }
    },

    complete(t, y) {
      const tau = t - start;
      const x = stepLength > 0 ? tau / stepLength : 1;
      const under = 1 - x * x * (3 - 2 * x);
      for (let q = 0; q < inTransit.length; q++) y[bubbleUnknowns + q]! += under * inTransit[q]!;
      for (let c = 0; c < list.count; c++) {
        followTo(c, tau);
        list.complete(c, tau, amounts, y);
      }
    },

    droppedBy(t) {
      droppedSoFar.fill(0);
      for (let c = 0; c < list.count; c++) {
        // Only the last of a cluster that leads nowhere has no neighbour.
        let last = 0;
        for (let q = list.memberStart[c]!; q < list.memberStart[c + 1]!; q++) last = Math.max(last, list.goneAt[q]!);
        if (start + last > t) continue;
        for (let k = 0; k < species; k++) droppedSoFar[k] = droppedSoFar[k]! + list.dropped[c * species + k]!;
      }
      return droppedSoFar;
    },

    completeOne(t, node, y) {
      const c = clusterOf[node]!;
      const q = members.indexOf(node, list.memberStart[c]);
      if (start + list.goneAt[q]! <= t) {
        for (let k = 0; k < species; k++) y[node * species + k] = list.goneAmount[q * species + k]!;
        return;
      }
      followTo(c, t - start);
      const m = q - list.memberStart[c]!;
      for (let k = 0; k < species; k++) y[node * species + k] = amounts[m * species + k]!;
    },
  };

  /**
   * The amounts of cluster c's bubbles at tau, into `amounts`: it is integrated again, as it was when its step stood, unless it was
   * the last to be.
   */
  function followTo(c: number, tau: number): void {
    if (followed !== c) {
      take(c);
      cluster.integrate(start, stepLength, ambient, known);
      followed = c;
    }
    cluster.amountsAt(tau, amounts);
  }
}

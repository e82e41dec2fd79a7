/**
 * The clusters of one step, in flat lists: their bubbles one after the other, their flows one after the other, and what the worker
 * found of each. Lists keep their length from step to step, so that a large foam makes no garbage of its dying bubbles.
 */
import type { Cluster } from './cluster.ts';
import { addSource, type SourceTerms } from './system.ts';

export interface ClusterList {
  readonly count: number;
  /** Bubbles, cluster by cluster; those of cluster c are memberStart[c] .. memberStart[c + 1]. */
  readonly members: number[];
  readonly memberStart: readonly number[];
  /** Amounts at the start and the end of the step, mol, place among `members` * species + k. */
  readonly startAmount: readonly number[];
  readonly endAmount: readonly number[];
  /** Per place among `members`: when it vanished, s after the start (Infinity: it lives); and with how much, mol, place * species + k. */
  readonly goneAt: readonly number[];
  readonly goneAmount: readonly number[];
  /** Flows out of the clusters: how many, the network's unknown that each goes to, what it moved and was foreseen to move, mol. */
  readonly flows: number;
  readonly receiver: readonly number[];
  readonly moved: readonly number[];
  readonly predicted: readonly number[];
  /** Gas without a neighbour to go to, mol, cluster * species + k; whoever books it sets it to nought. */
  readonly dropped: number[];
  clear(): void;
  add(group: readonly number[], y: Float64Array): void;
  readGroup(c: number, out: number[]): void;
  /** Takes what the worker found of cluster c, and adds its flows to the sources, as quadratics over [0, h] with the same total. */
  fit(c: number, found: Cluster, h: number, sources: SourceTerms): void;
  /**
   * Takes what the worker found of cluster c between neighbours that are known now. Adds (moved - foreseen) to `misplaced`, and to
   * `untimely` the most that each source was ahead or behind on the way, both per unknown, mol.
   */
  correct(c: number, found: Cluster, misplaced: Float64Array, untimely: Float64Array): void;
  /**
   * Cluster c in the whole state at tau: its bubbles' amounts there, and its gas on its way in the receivers, whose state
   * so far holds what the fitted sources brought.
   */
  complete(c: number, tau: number, amounts: readonly number[], y: Float64Array): void;
}

export function createClusterList(species: number): ClusterList {
  let count = 0;
  let flows = 0;
  const members: number[] = [];
  const memberStart: number[] = [0];
  const flowStart: number[] = [0];
  const startAmount: number[] = [];
  const endAmount: number[] = [];
  const goneAt: number[] = [];
  const goneAmount: number[] = [];
  const receiver: number[] = [];
  const moved: number[] = [];
  const predicted: number[] = [];
  const fitted: number[] = []; // 3 numbers a flow
  const dropped: number[] = [];
  const deviation: number[] = [];

  function keep(c: number, found: Cluster): void {
    const first = memberStart[c]!;
    const size = memberStart[c + 1]! - first;
    for (let m = 0; m < size; m++) {
      goneAt[first + m] = found.goneAt[m]!;
      for (let k = 0; k < species; k++) {
        endAmount[(first + m) * species + k] = found.amount[m * species + k]!;
        if (goneAt[first + m] !== Infinity) goneAmount[(first + m) * species + k] = found.goneAmount[m * species + k]!;
      }
    }
    for (let k = 0; k < species; k++) dropped[c * species + k] = found.dropped[k]!;
    const base = flowStart[c]!;
    for (let q = 0; q < found.flows; q++) moved[base + q] = found.moved[q]!;
  }

  return {
    members,
    memberStart,
    startAmount,
    endAmount,
    goneAt,
    goneAmount,
    receiver,
    moved,
    predicted,
    dropped,
    get count() {
      return count;
    },
    get flows() {
      return flows;
    },

    clear() {
      count = 0;
      flows = 0;
      members.length = 0;
    },

    add(group, y) {
      for (const i of group) {
        for (let k = 0; k < species; k++) startAmount[members.length * species + k] = y[i * species + k]!;
        members.push(i);
      }
      memberStart[++count] = members.length;
    },

    readGroup(c, out) {
      out.length = 0;
      for (let q = memberStart[c]!; q < memberStart[c + 1]!; q++) out.push(members[q]!);
    },

    fit(c, found, h, sources) {
      const base = flowStart[c]!;
      flows = flowStart[c + 1] = base + found.flows;
      keep(c, found);
      for (let q = 0; q < found.flows; q++) {
        receiver[base + q] = found.receivers[q]!;
        predicted[base + q] = found.moved[q]!;
        const a = found.startFlow[q]!;
        // q(tau) = a + b tau + c tau^2 with q(h) = endFlow and integral = moved.
        const A = found.moved[q]! / h - a;
        const B = found.endFlow[q]! - a;
        const bend = (-6 * (A - 0.5 * B)) / (h * h);
        const slope = (B - bend * h * h) / h;
        fitted[3 * (base + q)] = a;
        fitted[3 * (base + q) + 1] = slope;
        fitted[3 * (base + q) + 2] = bend;
        addSource(sources, found.receivers[q]!, a, slope, bend);
      }
    },

    correct(c, found, misplaced, untimely) {
      keep(c, found);
      const base = flowStart[c]!;
      found.deviations(fitted, 3 * base, deviation);
      for (let q = 0; q < found.flows; q++) {
        misplaced[receiver[base + q]!]! += moved[base + q]! - predicted[base + q]!;
        untimely[receiver[base + q]!]! += deviation[q]!;
      }
    },

    complete(c, tau, amounts, y) {
      const first = memberStart[c]!;
      const size = memberStart[c + 1]! - first;
      let lost = 0;
      let lostAtEnd = 0;
      for (let q = 0; q < size * species; q++) {
        lost += startAmount[first * species + q]! - amounts[q]!;
        lostAtEnd += startAmount[first * species + q]! - endAmount[first * species + q]!;
        y[members[first + Math.floor(q / species)]! * species + (q % species)] = amounts[q]!;
      }
      // Each flow has moved the same share of its total as the cluster has lost of its own.
      const share = lostAtEnd === 0 ? 0 : lost / lostAtEnd;
      for (let k = 0; k < species; k++) {
        let closing = 0;
        for (let m = 0; m < size; m++) {
          closing += startAmount[(first + m) * species + k]! - amounts[m * species + k]!;
        }
        for (let q = flowStart[c]! + k; q < flowStart[c + 1]!; q += species) {
          const last = q + species >= flowStart[c + 1]!;
          const arrived = last && dropped[c * species + k] === 0 ? closing : share * moved[q]!;
          closing -= arrived;
          y[receiver[q]!]! +=
            arrived - tau * (fitted[3 * q]! + tau * (fitted[3 * q + 1]! / 2 + (tau * fitted[3 * q + 2]!) / 3));
        }
      }
    },
  };
}

/**
 * A picture of the network at one instant: every bubble of the scenario, every open pair and link, and the row of sizes and modes.
 * One set of arrays is made at the start and filled again for each frame.
 */
import { bubbleVolume } from '../network/geometry.ts';
import { type Network } from '../network/network.ts';
import { bubbleIndex } from '../stability/indices.ts';
import { networkModes } from './modes.ts';
import type { Pairs } from './pairs.ts';
import { BUBBLE_STATES, type Frame, type PairTable, type SeriesRow } from './record.ts';
import type { NetworkSystem } from './system.ts';

const FREE = BUBBLE_STATES.indexOf('free');
const ABOVE = BUBBLE_STATES.indexOf('cap-above-mouth');
const BELOW = BUBBLE_STATES.indexOf('cap-below-mouth');
const VANISHED = BUBBLE_STATES.indexOf('vanished');

/** The whole scenario's bubbles, by which frames are laid out; `network` is the one the run started with. */
export function createFrameMaker(network: Network): FrameMaker {
  const { nodes } = network;
  const count = nodes.bubbleCount;
  const place = new Map<number, number>(); // origin -> row
  for (let i = 0; i < count; i++) place.set(nodes.origin[i]!, i);
  const real = (): Float64Array => new Float64Array(count);
  const columns = {
    time: 0,
    bubbleIds: Array.from({ length: count }, (_, i) => network.nodeName(nodes.origin[i]!)),
    radius: real(),
    volume: real(),
    pressure: real(),
    amount: real(),
    tension: real(),
    elasticity: real(),
    coverage: real(),
    index: real(),
    state: new Uint8Array(count),
  };

  return {
    make(system, alive, linkOpen, pairs, t, y, gasBalance) {
      columns.state.fill(VANISHED);
      for (const column of [columns.radius, columns.volume, columns.amount]) column.fill(0);
      for (const column of [columns.pressure, columns.tension, columns.elasticity, columns.coverage, columns.index])
        column.fill(NaN);
      const { state, network: now } = system;
      const species = state.species;
      const sums = [0, 0, 0, 0];
      for (let i = 0; i < now.nodes.bubbleCount; i++) {
        if (alive[i] === 0) continue;
        const row = place.get(now.nodes.origin[i]!)!;
        const R = state.radius[i]!;
        const mouth = now.nodes.mouth[i]!;
        let amount = 0;
        for (let k = 0; k < species; k++) amount += y[i * species + k]!;
        columns.radius[row] = R;
        columns.volume[row] = bubbleVolume(mouth, state.size[i]!);
        columns.pressure[row] = state.pressure[i]!;
        columns.amount[row] = amount;
        columns.tension[row] = state.tension[i]!;
        columns.elasticity[row] = state.elasticity[i]!;
        columns.coverage[row] = state.coverage[i]!;
        columns.index[row] = bubbleIndex(state.elasticity[i]!, state.tension[i]!);
        columns.state[row] = mouth === 0 ? FREE : state.size[i]! >= mouth ? ABOVE : BELOW;
        sums[0]! += 1;
        sums[1]! += R;
        sums[2]! += R * R;
        sums[3]! += R * R * R;
      }
      pairs.refresh(state, t);
      const table = pairTable(system, alive, linkOpen, pairs, t);
      let minimumMargin = Infinity;
      for (let k = 0; k < table.count; k++) if (table.margin[k]! < minimumMargin) minimumMargin = table.margin[k]!;
      const modes = networkModes(system, alive, linkOpen, t);
      const series: SeriesRow = {
        time: t,
        bubbles: sums[0]!,
        R10: sums[1]! / sums[0]!,
        R21: sums[2]! / sums[1]!,
        R32: sums[3]! / sums[2]!,
        growingModes: modes.count,
        fastestRate: modes.fastestRate,
        minimumMargin: minimumMargin === Infinity ? NaN : minimumMargin,
        gasBalance,
      };
      return { ...columns, time: t, pairs: table, series };
    },
  };
}

export interface FrameMaker {
  /** From the node state at (t, y), slopes included. The arrays are overwritten by the next call. */
  make(
    system: NetworkSystem,
    alive: Uint8Array,
    linkOpen: readonly Uint8Array[],
    pairs: Pairs,
    t: number,
    y: Float64Array,
    gasBalance: number,
  ): Frame;
}

/** Pairs first, then the links that are no pair, with their flow alone. */
function pairTable(
  system: NetworkSystem,
  alive: Uint8Array,
  linkOpen: readonly Uint8Array[],
  pairs: Pairs,
  t: number,
): PairTable {
  const { network, state, groups } = system;
  const { nodes } = network;
  const link: string[] = [];
  const from: string[] = [];
  const to: string[] = [];
  const flow: number[] = [];
  const margin: number[] = [];
  const rate: number[] = [];
  for (let k = 0; k < pairs.count; k++) {
    if (!pairs.isOpen(k, alive)) continue;
    const [a, b] = pairs.ends(k);
    link.push(pairs.linkName(k));
    from.push(a);
    to.push(b);
    flow.push(pairs.flow(k, state, t));
    margin.push(pairs.margin(k, state, t));
    rate.push(pairs.rate(k, state, t));
  }
  const flows = new Float64Array(network.species.length);
  groups.forEach(({ group, kernel }, g) => {
    const { table } = group;
    for (let l = 0; l < table.count; l++) {
      const i = table.from[l]!;
      const j = table.to[l]!;
      if (pairs.isPair(i, j) || linkOpen[g]![l] === 0 || alive[i] === 0 || alive[j] === 0) continue;
      kernel.flow(group, l, state, t, flows);
      link.push(network.linkName(table.origin[l]!));
      from.push(network.nodeName(nodes.origin[i]!));
      to.push(network.nodeName(nodes.origin[j]!));
      flow.push(flows.reduce((sum, q) => sum + q, 0));
      margin.push(NaN);
      rate.push(NaN);
    }
  });
  return {
    count: link.length,
    link,
    from,
    to,
    flow: Float64Array.from(flow),
    margin: Float64Array.from(margin),
    rate: Float64Array.from(rate),
  };
}

/**
 * The network as a system of rates: nodes evaluated, links added, feeds and hand-over sources added, and the analytic Jacobian
 * assembled into a matrix that fits the network's structure. This is where a bubble becomes an unknown.
 */
import type { System } from '../integrate/system.ts';
import type { AssembledMatrix } from '../integrate/linear/assembled.ts';
import { createMatrix } from '../integrate/linear/choose-matrix.ts';
import { createColumnSums } from './column-sums.ts';
import { evaluateNodes } from '../network/evaluate.ts';
import { BUBBLE, CAVITY, OUTSIDE, POOL, stateSize, type Network } from '../network/network.ts';
import { createNodeState, setActiveBubbles, type NodeState } from '../network/node-state.ts';
import { waveformSlope, waveformValue, type Waveform } from '../network/waveform.ts';
import { GAS_CONSTANT } from '../quantities/constants.ts';
import { createLinkGroup, type LinkGroup, type LinkKernel } from '../transfer/link-kernel.ts';
import { LINK_KERNELS } from '../transfer/register.ts';

/** Up to this size the work space of `rateBound` is kept. */
const LARGEST_KEPT = 1000;

/** Gas that arrives from bubbles that are carried apart: per unknown a quadratic in time since `origin`. */
export interface SourceTerms {
  origin: number;
  count: number;
  readonly unknown: Int32Array;
  /** Place of an unknown in the list, or -1. */
  readonly place: Int32Array;
  readonly coefficients: Float64Array; // 3 a place: mol/s, mol/s^2, mol/s^3
}

/** Adds a + b tau + c tau^2, mol/s, to what unknown u gets. */
export function addSource(sources: SourceTerms, u: number, a: number, b: number, c: number): void {
  let place = sources.place[u]!;
  if (place < 0) {
    place = sources.count++;
    sources.place[u] = place;
    sources.unknown[place] = u;
    sources.coefficients.fill(0, 3 * place, 3 * place + 3);
  }
  sources.coefficients[3 * place]! += a;
  sources.coefficients[3 * place + 1]! += b;
  sources.coefficients[3 * place + 2]! += c;
}

export interface NetworkSystem extends System {
  readonly network: Network;
  readonly state: NodeState;
  readonly groups: readonly { readonly group: LinkGroup; readonly kernel: LinkKernel }[];
  readonly sources: SourceTerms;
  /** The next edge of a waveform: at and beyond it, edges have the value before it. */
  segmentEnd: number;
  /** Evaluates node states at (t, y) without rates. Returns false where a bubble has no state. */
  evaluate(t: number, y: Float64Array, withSlopes: boolean): boolean;
  /**
   * Chooses the unknowns that move and the links that carry gas.
   * @param nodeActive one entry a node; inactive ones (vanished or carried apart) keep their amounts
   * @param linkOpen one array a group, one entry a link: alive and its valve open
   */
  setActive(nodeActive: Uint8Array, linkOpen: readonly Uint8Array[]): void;
}

/**
 * @param tolerance relative error of a bubble's amount in one step; of a cavity's and a pool's pressure against `pressureSignal`
 * @param pressureSignal the size of the pressure differences that drive the network, Pa
 */
export function createNetworkSystem(network: Network, tolerance: number, pressureSignal: number): NetworkSystem {
  const { nodes, feeds } = network;
  const species = network.species.length;
  const size = stateSize(network);
  const state = createNodeState(network);
  const groups = network.links.map((table) => ({ group: createLinkGroup(table), kernel: LINK_KERNELS[table.kind] }));
  const active = new Uint8Array(nodes.count).fill(1);
  const sources: SourceTerms = {
    origin: 0,
    count: 0,
    unknown: new Int32Array(size),
    place: new Int32Array(size).fill(-1),
    coefficients: new Float64Array(3 * size),
  };
  let matrix: AssembledMatrix | null = null;
  let columnSums: ReturnType<typeof createColumnSums> | null = null;

  const assembled = (): AssembledMatrix => (matrix ??= buildMatrix(network, groups));

  const side = (t: number): 1 | -1 => (t >= system.segmentEnd ? -1 : 1);

  /** Rates from the present node state: links, feeds, and what bubbles carried apart hand over. */
  function addAll(t: number, out: Float64Array): void {
    out.fill(0);
    for (const { group, kernel } of groups) {
      if (group.activeCount > 0) kernel.addRates(group, state, t, out);
    }
    if (feeds.length > 0) addFeeds(network, (wave) => waveformValue(wave, t, side(t)), active, out);
    const tau = t - sources.origin;
    const c = sources.coefficients;
    for (let q = 0; q < sources.count; q++) {
      const u = sources.unknown[q]!;
      out[u] = out[u]! + c[3 * q]! + tau * (c[3 * q + 1]! + tau * c[3 * q + 2]!);
    }
  }

  /** No rates where a node has no state: NaN at that node alone, so that it can be named. */
  function markFailure(out: Float64Array): void {
    out.fill(0);
    out.fill(NaN, state.failed * species, (state.failed + 1) * species);
  }

  const system: NetworkSystem = {
    size,
    network,
    state,
    groups,
    sources,
    segmentEnd: Infinity,
    get matrix() {
      return assembled();
    },

    evaluate(t, y, withSlopes) {
      return evaluateNodes(state, t, y, side(t), withSlopes);
    },

    rates(t, y, out) {
      if (system.evaluate(t, y, false)) addAll(t, out);
      else markFailure(out);
    },

    linearise(t, y, rates, timeDerivative) {
      const jacobian = assembled();
      timeDerivative.fill(0);
      jacobian.clear();
      if (!system.evaluate(t, y, true)) {
        jacobian.values.fill(NaN);
        markFailure(rates);
        return;
      }
      addAll(t, rates);
      for (const { group, kernel } of groups) {
        if (group.activeCount > 0) kernel.addSlopes(group, state, t, jacobian.values, timeDerivative);
      }
      if (feeds.length > 0) addFeeds(network, (wave) => waveformSlope(wave, t, side(t)), active, timeDerivative);
      const tau = t - sources.origin;
      for (let q = 0; q < sources.count; q++) {
        timeDerivative[sources.unknown[q]!]! +=
          sources.coefficients[3 * q + 1]! + 2 * tau * sources.coefficients[3 * q + 2]!;
      }
    },

    rateBound(t, y) {
      if (!system.evaluate(t, y, true)) return NaN;
      // Small networks are asked at every step, large ones once.
      const sums = columnSums ?? createColumnSums(size, species, groups);
      if (size <= LARGEST_KEPT) columnSums = sums;
      return sums(state, t);
    },

    errorScale(y, out) {
      const RT = GAS_CONSTANT * network.temperature;
      for (let i = 0; i < nodes.count; i++) {
        const kind = nodes.kind[i];
        if (active[i] === 0) {
          for (let k = 0; k < species; k++) out[i * species + k] = Infinity;
        } else if (kind === BUBBLE) {
          let n = 0;
          for (let k = 0; k < species; k++) n += y[i * species + k]!;
          // A trace is resolved to the tolerance down to a ten-thousandth of the bubble's gas.
          for (let k = 0; k < species; k++)
            out[i * species + k] = tolerance * (species === 1 ? n : y[i * species + k]! + 1e-4 * n);
        } else if (kind === CAVITY) {
          for (let k = 0; k < species; k++) out[i * species + k] = (tolerance * pressureSignal * nodes.volume[i]!) / RT;
        } else if (kind === POOL) {
          for (let k = 0; k < species; k++)
            out[i * species + k] = tolerance * pressureSignal * nodes.capacity[i * species + k]!;
        } else {
          for (let k = 0; k < species; k++) out[i * species + k] = Infinity;
        }
      }
    },

    setActive(nodeActive, linkOpen) {
      active.set(nodeActive);
      setActiveBubbles(state, nodeActive);
      groups.forEach(({ group }, g) => {
        const open = linkOpen[g]!;
        const { from, to, count } = group.table;
        let n = 0;
        for (let l = 0; l < count; l++) {
          if (open[l] !== 0 && nodeActive[from[l]!] !== 0 && nodeActive[to[l]!] !== 0) group.active[n++] = l;
        }
        group.activeCount = n;
      });
    },
  };
  return system;
}

function outsideNode(network: Network): number {
  return network.nodes.kind.indexOf(OUTSIDE);
}

/** Adds `amount` of each feed's wave (its value, or its slope) to the fed node, and takes it from the account outside. */
function addFeeds(network: Network, amount: (wave: Waveform) => number, active: Uint8Array, out: Float64Array): void {
  const species = network.species.length;
  const outside = outsideNode(network);
  for (const feed of network.feeds) {
    if (active[feed.node] === 0) continue;
    const rate = amount(feed.rate);
    for (let k = 0; k < species; k++) {
      out[feed.node * species + k]! += rate * feed.fraction[k]!;
      out[outside * species + k]! -= rate * feed.fraction[k]!;
    }
  }
}

/** The matrix that fits the pattern of the links, and the places of each link's entries in it. */
function buildMatrix(network: Network, groups: NetworkSystem['groups']): AssembledMatrix {
  const species = network.species.length;
  const perLink = 4 * species * species;
  const total = perLink * groups.reduce((sum, { group }) => sum + group.table.count, 0);
  const rows = new Int32Array(total);
  const columns = new Int32Array(total);
  let at = 0;
  for (const { group } of groups) {
    const { from, to, count } = group.table;
    for (let l = 0; l < count; l++) {
      // Quarters in the order of LinkGroup.slots: (from,from) (to,from) (from,to) (to,to).
      for (let quarter = 0; quarter < 4; quarter++) {
        const row = (quarter & 1 ? to[l]! : from[l]!) * species;
        const column = (quarter & 2 ? to[l]! : from[l]!) * species;
        for (let k = 0; k < species; k++) {
          for (let m = 0; m < species; m++) {
            rows[at] = row + k;
            columns[at++] = column + m;
          }
        }
      }
    }
  }
  const matrix = createMatrix(stateSize(network), rows, columns);
  at = 0;
  for (const { group } of groups) {
    const slots = new Int32Array(perLink * group.table.count);
    for (let s = 0; s < slots.length; s++, at++) slots[s] = matrix.slot(rows[at]!, columns[at]!);
    group.slots = slots;
  }
  return matrix;
}

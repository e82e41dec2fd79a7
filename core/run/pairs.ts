/**
 * What counts as a pair (physics.md section 5), and its margin, rate and flow at an instant: two bubbles with a link between
 * them; two that reach each other through cavities only (`via:M`); a bubble and a reservoir or pool.
 */
import { bubbleVolume } from '../network/geometry.ts';
import { BUBBLE, CAVITY, POOL, type Network } from '../network/network.ts';
import { isPlainSphere, type NodeState } from '../network/node-state.ts';
import { GAS_CONSTANT } from '../quantities/constants.ts';
import { capillaryStiffness, mobileStiffness, pairMargin, pairRate } from '../stability/indices.ts';
import { eliminateInterior, LARGEST_CLUSTER } from '../stability/kron.ts';
import { diffusivePairRate } from '../stability/pair-exchange.ts';
import type { LinkGroup, LinkKernel } from '../transfer/link-kernel.ts';
import type { NetworkSystem } from './system.ts';

export interface Pairs {
  readonly count: number;
  /** True where a link between nodes i and j makes a pair. */
  isPair(i: number, j: number): boolean;
  from(k: number): number;
  to(k: number): number;
  /** A number of the pair's own that outlives a network made smaller. */
  key(k: number): number;
  ends(k: number): readonly [string, string];
  linkName(k: number): string;
  /** True while both ends live and gas can pass. */
  isOpen(k: number, alive: Uint8Array): boolean;
  /** True for two pure-liquid spheres: they never push back. */
  alwaysUnstable(k: number): boolean;
  /** Dimensionless, 1 at the boundary; from the present node state with slopes. */
  margin(k: number, state: NodeState, t: number): number;
  /** 1/s; positive: the pair runs away. */
  rate(k: number, state: NodeState, t: number): number;
  /** mol/s, from -> to. */
  flow(k: number, state: NodeState, t: number): number;
  /** Finds the ways through cavities anew from the present node state, after valves or bubbles changed. */
  refresh(state: NodeState, t: number): void;
}

interface Via {
  readonly i: number;
  readonly j: number;
  readonly name: string;
  conductance: number; // mol/(s Pa)
}

/**
 * @param runLength s: a species whose own exchange takes longer counts as frozen
 */
export function createPairs(system: NetworkSystem, linkOpen: readonly Uint8Array[], runLength: number): Pairs {
  const { network, groups } = system;
  const { nodes } = network;
  const species = network.species.length;
  const RT = GAS_CONSTANT * network.temperature;
  // A bubble and a cavity are not a pair to judge by: a small cavity is stiff, whatever the bubbles on it do to each other.
  const isPair = (i: number, j: number): boolean =>
    (nodes.kind[i] === BUBBLE && nodes.kind[j] !== CAVITY) || (nodes.kind[j] === BUBBLE && nodes.kind[i] !== CAVITY);
  // Links that make a pair by themselves, as flat lists: beds have 10^5 of them.
  const found: number[] = [];
  groups.forEach(({ group }, g) => {
    const { from, to, count } = group.table;
    for (let l = 0; l < count; l++) if (isPair(from[l]!, to[l]!)) found.push(g, l);
  });
  const direct = found.length / 2;
  const groupAt = Int32Array.from({ length: direct }, (_, k) => found[2 * k]!);
  const linkAt = Int32Array.from({ length: direct }, (_, k) => found[2 * k + 1]!);
  const fromOf = (k: number): number =>
    k < direct ? groups[groupAt[k]!]!.group.table.from[linkAt[k]!]! : through[k - direct]!.i;
  const toOf = (k: number): number =>
    k < direct ? groups[groupAt[k]!]!.group.table.to[linkAt[k]!]! : through[k - direct]!.j;
  const through = viaCavities(network);
  const flows = new Float64Array(species);
  const conductances = new Float64Array(species);
  const frozen = new Uint8Array(species);
  const side = new Float64Array(2); // u and d of one end
  const diagonal = new Float64Array(species);
  const common = new Float64Array(species);
  const kernelOf = (g: number): LinkKernel => groups[g]!.kernel;
  const groupOf = (g: number): LinkGroup => groups[g]!.group;

  const name = (i: number): string => network.nodeName(nodes.origin[i]!);

  /** u of one end for the mobile gas, and d, the size of its capillary destabilising part, into `side`. */
  function lookAt(i: number, state: NodeState, anyFrozen: boolean): void {
    if (nodes.kind[i] !== BUBBLE) {
      side[0] = state.stiffness[i]!;
      side[1] = 0;
      if (nodes.kind[i] === POOL && species > 1) {
        let capacity = 0;
        for (let k = 0; k < species; k++)
          if (!anyFrozen || frozen[k] === 0) capacity += nodes.capacity[i * species + k]!;
        side[0] = 1 / capacity;
      }
      return;
    }
    const p = state.pressure[i]!;
    side[0] = state.stiffness[i]!;
    side[1] = capillaryStiffness(nodes.faces[i]!, state.tension[i]!, state.radius[i]!, p, network.temperature);
    if (!anyFrozen) return;
    let still = 0;
    for (let k = 0; k < species; k++) if (frozen[k] === 1) still += state.partial[i * species + k]!;
    const volume = bubbleVolume(nodes.mouth[i]!, state.size[i]!);
    side[0] = mobileStiffness(volumeStiffness(i, state, volume), still, volume, p - still, network.temperature);
  }

  /** dp/dV of a bubble from its u = p' RT/(p + V p'), Pa/m^3. */
  function volumeStiffness(i: number, state: NodeState, volume: number): number {
    const u = state.stiffness[i]!;
    return (u * state.pressure[i]!) / (RT - u * volume);
  }

  /** The parts of H = diag(a) - b 1^T that one end adds to a pair's exchange (see stability/pair-exchange.ts). */
  function addExchange(i: number, state: NodeState): void {
    const kind = nodes.kind[i];
    if (kind === POOL) {
      for (let k = 0; k < species; k++) diagonal[k]! += 1 / nodes.capacity[i * species + k]!;
    } else if (kind === BUBBLE) {
      const volume = bubbleVolume(nodes.mouth[i]!, state.size[i]!);
      const widening = RT / (state.pressure[i]! + volume * volumeStiffness(i, state, volume)); // dV/dn
      for (let k = 0; k < species; k++) {
        diagonal[k]! += RT / volume;
        common[k]! += (state.partial[i * species + k]! / volume) * widening;
      }
    }
  }

  /** Which species are frozen on a diffusive link: own exchange time, with both ends' capacities in series, beyond the run. */
  function freeze(k: number, state: NodeState, t: number): boolean {
    const group = groupAt[k]!;
    const ends = [fromOf(k), toOf(k)];
    if (species === 1 || !kernelOf(group).diffusive) return false;
    kernelOf(group).conductance(groupOf(group), linkAt[k]!, state, t, conductances);
    let still = 0;
    for (let s = 0; s < species; s++) {
      let inverse = 0;
      for (const i of ends) {
        if (nodes.kind[i] === BUBBLE) inverse += 1 / bubbleVolume(nodes.mouth[i]!, state.size[i]!);
      }
      frozen[s] = 1 / (RT * conductances[s]! * inverse) > runLength ? 1 : 0;
      still += frozen[s]!;
    }
    // Where nothing can move within the run, the whole gas speaks: the margin then tells of a longer one.
    return still > 0 && still < species;
  }

  return {
    count: direct + through.length,
    isPair,
    from: fromOf,
    to: toOf,
    // Via cavities: far below zero, and so apart from the links' own numbers (those that were joined have small negative ones).
    key: (k) =>
      k < direct
        ? groupOf(groupAt[k]!).table.origin[linkAt[k]!]!
        : -(2 ** 32) - nodes.origin[fromOf(k)]! * 2 ** 26 - nodes.origin[toOf(k)]!,
    ends(k) {
      return [name(fromOf(k)), name(toOf(k))];
    },
    linkName(k) {
      if (k >= direct) return through[k - direct]!.name;
      const group = groupAt[k]!;
      const link = linkAt[k]!;
      return network.linkName(groupOf(group).table.origin[link]!);
    },
    isOpen(k, alive) {
      const i = fromOf(k);
      const j = toOf(k);
      if (alive[i] === 0 || alive[j] === 0) return false;
      if (k >= direct) return through[k - direct]!.conductance > 0;
      return linkOpen[groupAt[k]!]![linkAt[k]!] !== 0;
    },
    alwaysUnstable(k) {
      const i = fromOf(k);
      const j = toOf(k);
      const hopeless = (n: number): boolean => nodes.kind[n] !== BUBBLE || isPlainSphere(network, n);
      return species === 1 && nodes.kind[i] !== POOL && nodes.kind[j] !== POOL && hopeless(i) && hopeless(j);
    },
    margin(k, state, t) {
      const i = fromOf(k);
      const j = toOf(k);
      const anyFrozen = k < direct && freeze(k, state, t);
      lookAt(i, state, anyFrozen);
      const ui = side[0]!;
      const di = side[1]!;
      lookAt(j, state, anyFrozen);
      return pairMargin(ui, side[0]!, di, side[1]!);
    },
    rate(k, state, t) {
      const i = fromOf(k);
      const j = toOf(k);
      if (k >= direct) {
        return pairRate(through[k - direct]!.conductance, state.stiffness[i]!, state.stiffness[j]!);
      }
      const group = groupAt[k]!;
      const link = linkAt[k]!;
      const kernel = kernelOf(group);
      kernel.conductance(groupOf(group), link, state, t, conductances);
      if (species === 1 || !kernel.diffusive) {
        return pairRate(conductances[0]!, state.stiffness[i]!, state.stiffness[j]!);
      }
      diagonal.fill(0);
      common.fill(0);
      addExchange(i, state);
      addExchange(j, state);
      return diffusivePairRate(diagonal, common, conductances, species);
    },
    flow(k, state, t) {
      const i = fromOf(k);
      const j = toOf(k);
      if (k >= direct) {
        return through[k - direct]!.conductance * (state.pressure[i]! - state.pressure[j]!);
      }
      const group = groupAt[k]!;
      const link = linkAt[k]!;
      kernelOf(group).flow(groupOf(group), link, state, t, flows);
      let sum = 0;
      for (let s = 0; s < species; s++) sum += flows[s]!;
      return sum;
    },
    refresh(state, t) {
      if (through.length === 0) return;
      const from: number[] = [];
      const to: number[] = [];
      const conductance: number[] = [];
      groups.forEach(({ group, kernel }, g) => {
        if (kernel.diffusive) return;
        for (let l = 0; l < group.table.count; l++) {
          if (linkOpen[g]![l] === 0) continue;
          kernel.conductance(group, l, state, t, conductances);
          from.push(group.table.from[l]!);
          to.push(group.table.to[l]!);
          conductance.push(conductances[0]!);
        }
      });
      const interior = Uint8Array.from(nodes.kind, (kind) => (kind === CAVITY ? 1 : 0));
      const left = new Map<number, number>();
      for (const cluster of eliminateInterior(
        nodes.count,
        Int32Array.from(from),
        Int32Array.from(to),
        Float64Array.from(conductance),
        interior,
      )) {
        cluster.from.forEach((i, q) => left.set(i * nodes.count + cluster.to[q]!, cluster.conductance[q]!));
      }
      for (const pair of through) pair.conductance = left.get(pair.i * nodes.count + pair.j) ?? 0;
    },
  };
}

/** Every two bubbles that reach each other through cavities only, whatever the valves; clusters of too many are left out. */
function viaCavities(network: Network): Via[] {
  const { nodes } = network;
  if (!nodes.kind.includes(CAVITY)) return [];
  const parent = Int32Array.from({ length: nodes.count }, (_, i) => i);
  const root = (i: number): number => {
    while (parent[i] !== i) i = parent[i] = parent[parent[i]!]!;
    return i;
  };
  const touching = new Map<number, Set<number>>(); // cavity -> bubbles with a tube to it
  for (const table of network.links) {
    for (let l = 0; l < table.count; l++) {
      const i = table.from[l]!;
      const j = table.to[l]!;
      const [a, b] = [nodes.kind[i] === CAVITY, nodes.kind[j] === CAVITY];
      if (a && b) parent[root(i)] = root(j);
      else if (a && nodes.kind[j] === BUBBLE) touching.set(i, (touching.get(i) ?? new Set()).add(j));
      else if (b && nodes.kind[i] === BUBBLE) touching.set(j, (touching.get(j) ?? new Set()).add(i));
    }
  }
  const clusters = new Map<number, { bubbles: Set<number>; cavities: number[] }>();
  for (let c = 0; c < nodes.count; c++) {
    if (nodes.kind[c] !== CAVITY) continue;
    const cluster = clusters.get(root(c)) ?? { bubbles: new Set<number>(), cavities: [] };
    clusters.set(root(c), cluster);
    cluster.cavities.push(c);
    for (const bubble of touching.get(c) ?? []) cluster.bubbles.add(bubble);
  }
  const pairs: Via[] = [];
  for (const { bubbles, cavities } of clusters.values()) {
    if (bubbles.size > LARGEST_CLUSTER) continue;
    const label = `via:${cavities.map((c) => network.nodeName(nodes.origin[c]!)).join('+')}`;
    const list = [...bubbles].sort((a, b) => a - b);
    for (let a = 0; a < list.length; a++) {
      for (let b = a + 1; b < list.length; b++) pairs.push({ i: list[a]!, j: list[b]!, name: label, conductance: 0 });
    }
  }
  return pairs;
}

/**
 * The growing modes of the network at an instant: how many, how fast, and whom they feed and starve.
 * One gas, or the gas whole through tubes: by stiffness and conductance. Several gases through films: by the exchange's own matrix.
 */
import { BUBBLE, POOL, RESERVOIR } from '../network/network.ts';
import { growingModesOfMatrix } from '../stability/matrix-modes.ts';
import { modeGroups } from '../stability/mode-groups.ts';
import { growingModes } from '../stability/modes.ts';
import type { NetworkSystem } from './system.ts';

export interface NetworkModes {
  readonly count: number;
  /** 1/s; 0 where nothing grows. */
  readonly fastestRate: number;
  /** Node indices, the most fed and most starved first. */
  readonly feeds: readonly number[];
  readonly starves: readonly number[];
  /** What the count rests on, where that is not the whole exchange; '' otherwise. */
  readonly caveat: string;
}

/** Several gases: the largest matrix whose eigenvalues are computed whole. */
const LARGEST_MATRIX = 400;

/** From the present node state, slopes included. */
export function networkModes(
  system: NetworkSystem,
  alive: Uint8Array,
  linkOpen: readonly Uint8Array[],
  t: number,
): NetworkModes {
  const { network, state, groups } = system;
  const { nodes } = network;
  const species = network.species.length;
  const from: number[] = [];
  const to: number[] = [];
  const conductance: number[] = [];
  const bySpecies = new Float64Array(species);
  const diffusive = groups.some(
    ({ group, kernel }, g) => kernel.diffusive && linkOpen[g]!.subarray(0, group.table.count).includes(1),
  );
  groups.forEach(({ group, kernel }, g) => {
    const { table } = group;
    for (let l = 0; l < table.count; l++) {
      const i = table.from[l]!;
      const j = table.to[l]!;
      if (linkOpen[g]![l] === 0 || alive[i] === 0 || alive[j] === 0) continue;
      kernel.conductance(group, l, state, t, bySpecies);
      from.push(i);
      to.push(j);
      conductance.push(kernel.diffusive ? mixed(bySpecies, i, j) : bySpecies[0]!);
    }
  });
  const named = Uint8Array.from(nodes.kind, (kind, i) => (kind === BUBBLE && alive[i] !== 0 ? 1 : 0));
  const signs = { named, pressure: state.pressure };

  if (species > 1 && diffusive) {
    const living = Array.from({ length: nodes.count }, (_, i) => i).filter(
      (i) => alive[i] !== 0 && nodes.kind[i] !== RESERVOIR && nodes.kind[i]! <= POOL,
    );
    if (living.length * species <= LARGEST_MATRIX) return modesOfMatrix(living);
  }
  const u = Float64Array.from(state.stiffness);
  if (species > 1) {
    for (let i = 0; i < nodes.count; i++) {
      if (nodes.kind[i] !== POOL) continue;
      let capacity = 0;
      for (let k = 0; k < species; k++) capacity += nodes.capacity[i * species + k]!;
      u[i] = 1 / capacity;
    }
  }
  for (let i = 0; i < nodes.count; i++) if (alive[i] === 0 || nodes.kind[i]! > POOL) u[i] = 0;
  const grounded = Uint8Array.from(nodes.kind, (kind) => (kind > POOL ? 1 : 0));
  const modes = growingModes(
    {
      size: nodes.count,
      u,
      from: Int32Array.from(from),
      to: Int32Array.from(to),
      conductance: Float64Array.from(conductance),
      grounded,
    },
    signs,
  );
  const caveat =
    species > 1 && diffusive ? 'counted for the whole gas: a trapped species may hold what this calls growing' : '';
  return { count: modes.count, fastestRate: modes.fastestRate, feeds: modes.feeds, starves: modes.starves, caveat };

  /** Conductance for the whole gas of a diffusive link: species by their shares in the two nodes. */
  function mixed(g: Float64Array, i: number, j: number): number {
    if (species === 1) return g[0]!;
    let sum = 0;
    const p = state.pressure[i]! + state.pressure[j]!;
    for (let k = 0; k < species; k++)
      sum += (g[k]! * (state.partial[i * species + k]! + state.partial[j * species + k]!)) / p;
    return sum;
  }

  function modesOfMatrix(living: readonly number[]): NetworkModes {
    const size = living.length * species;
    const place = new Map(living.map((node, q) => [node, q]));
    const J = new Float64Array(size * size);
    // flow_k = g_k (p_i,k - p_j,k) by diffusion, G x_k (p_i - p_j) through a tube: linearised at constant g and x.
    groups.forEach(({ group, kernel }, g) => {
      const { table } = group;
      for (let l = 0; l < table.count; l++) {
        const ends = [table.from[l]!, table.to[l]!] as const;
        if (linkOpen[g]![l] === 0 || alive[ends[0]] === 0 || alive[ends[1]] === 0) continue;
        kernel.conductance(group, l, state, t, bySpecies);
        const up = state.pressure[ends[0]]! >= state.pressure[ends[1]]! ? ends[0] : ends[1];
        for (let side = 0; side < 2; side++) {
          const column = place.get(ends[side]!);
          if (column === undefined) continue;
          for (let k = 0; k < species; k++) {
            for (let m = 0; m < species; m++) {
              let slope = 0;
              if (kernel.diffusive) slope = bySpecies[k]! * slopeOf(ends[side]!, k, m);
              else {
                for (let s = 0; s < species; s++) slope += slopeOf(ends[side]!, s, m);
                slope *= (bySpecies[0]! * state.partial[up * species + k]!) / state.pressure[up]!;
              }
              for (let other = 0; other < 2; other++) {
                const row = place.get(ends[other]!);
                if (row === undefined) continue;
                J[(row * species + k) * size + column * species + m]! += other === side ? -slope : slope;
              }
            }
          }
        }
      }
    });
    const modes = growingModesOfMatrix(J, size, conservedTotals(living));
    if (modes.count === 0) return { count: 0, fastestRate: 0, feeds: [], starves: [], caveat: '' };
    const change = Float64Array.from(living, (_, q) => {
      let sum = 0;
      for (let k = 0; k < species; k++) sum += modes.vector[q * species + k]!;
      return sum;
    });
    const { feeds, starves } = modeGroups(Int32Array.from(living), change, signs);
    return { count: modes.count, fastestRate: modes.fastestRate, feeds, starves, caveat: '' };
  }

  function slopeOf(node: number, k: number, m: number): number {
    return state.partialSlope[(node * species + k) * species + m]!;
  }

  /** One a species and closed part of the network. */
  function conservedTotals(living: readonly number[]): number {
    const parent = new Map(living.map((node) => [node, node]));
    const root = (node: number): number => {
      let i = node;
      while (parent.get(i) !== i) i = parent.get(i)!;
      return i;
    };
    const open = new Set<number>();
    from.forEach((i, e) => {
      const j = to[e]!;
      if (parent.has(i) && parent.has(j)) parent.set(root(i), root(j));
    });
    from.forEach((i, e) => {
      const j = to[e]!;
      if (!parent.has(i) && parent.has(j)) open.add(root(j));
      if (!parent.has(j) && parent.has(i)) open.add(root(i));
    });
    const closed = new Set(living.map(root).filter((part) => !open.has(part)));
    return closed.size * species;
  }
}

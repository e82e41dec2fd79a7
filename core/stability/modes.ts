/**
 * The growing modes of a whole network: how many, the fastest, and which bubbles it feeds and starves.
 * `dx/dt = -Lap diag(u) x`; the count is exact by inertia, the rate by a proved bracket or, in large beds, iteratively.
 */

import { eliminationOrder } from './elimination-order.ts';
import type { Growth } from './growth-by-inertia.ts';
import { growthBound, growthByInertia } from './growth-by-inertia.ts';
import { growthBySubspace } from './growth-by-subspace.ts';
import { countGrowing, softNodes } from './inertia.ts';
import type { ModeGroups, NodeSigns } from './mode-groups.ts';
import { modeGroups } from './mode-groups.ts';
import type { ModeNetwork, Part } from './mode-network.ts';
import { connectedParts, extractParts } from './mode-network.ts';
import { applyLaplacian, nodeStrength } from './part-laplacian.ts';

/** What the modes of a network say. */
export interface GrowingModes extends ModeGroups {
  /** Number of growing modes. */
  readonly count: number;
  /** Fastest growth, 1/s; 0 where nothing grows. */
  readonly fastestRate: number;
  /** Relative uncertainty of `fastestRate`. */
  readonly uncertainty: number;
  /**
   * False where the search for the rate did not end: `fastestRate` is then a rate reached, and another place may grow
   * faster. The count is exact all the same.
   */
  readonly converged: boolean;
}

/** Multiplications of one factorisation that are always cheap. */
const CHEAP_WORK = 2e7;
/** The most that is spent on one where iteration does not get there. */
const GREATEST_WORK = 3e8;

/**
 * Growing modes of a network.
 * @param network at one instant; pairs of species are the business of `matrix-modes.ts`
 * @param signs which nodes may be named, and what orients the mode
 * @throws RangeError where a stiffness or conductance is not finite, or a conductance is negative
 */
export function growingModes(network: ModeNetwork, signs: NodeSigns = {}): GrowingModes {
  const parts = connectedParts(network);
  const soft = softNodes(network);
  const counts = countGrowing(network, parts, soft);
  const wanted = new Uint8Array(parts.count);
  let count = 0;
  for (let p = 0; p < parts.count; p++) {
    count += counts[p]!;
    if (counts[p]! > 0) wanted[p] = 1;
  }
  if (count === 0) return { count, fastestRate: 0, uncertainty: 0, converged: true, feeds: [], starves: [] };
  const candidates = extractParts(network, parts, wanted, soft).map((part) => ({
    part,
    growing: counts[parts.part[part.nodes[0]!]!]!,
    bound: growthBound(part).rate,
  }));
  candidates.sort((a, b) => b.bound - a.bound || a.part.nodes[0]! - b.part.nodes[0]!);
  let fastest: Growth | undefined;
  let where: Part | undefined;
  let converged = true;
  for (const { part, growing, bound } of candidates) {
    if (fastest !== undefined && bound <= fastest.rate) break;
    const growth = fastestGrowth(part, growing);
    converged &&= growth.converged;
    if (fastest !== undefined && growth.rate <= fastest.rate) continue;
    fastest = growth;
    where = part;
  }
  const { rate, uncertainty } = fastest!;
  return { count, fastestRate: rate, uncertainty, converged, ...groupsOf(network, where!, fastest!, signs) };
}

/** The fastest growth of one part by the way that suits its shape. */
function fastestGrowth(part: Part, growing: number): Growth {
  // A large bed in three dimensions fills in: it is not worth the attempt to order it.
  const bed = part.size > 4000 && part.from.length > 1.8 * part.size;
  const order = bed ? null : eliminationOrder(part, CHEAP_WORK);
  if (order !== null) return growthByInertia(part, order);
  const iterated = growthBySubspace(part, growing);
  if (iterated.converged) return iterated;
  const costly = eliminationOrder(part, GREATEST_WORK);
  return costly === null ? iterated : growthByInertia(part, costly);
}

/** Changes of amount from the pressures of the mode, for the part and the soft nodes beside it, and their two groups. */
function groupsOf(network: ModeNetwork, part: Part, growth: Growth, signs: NodeSigns): ModeGroups {
  const flows = new Float64Array(part.size);
  applyLaplacian(part, growth.pressures, flows);
  // A node of huge u (a cavity) has its change from y/u, where the sum of its flows would cancel;
  // a node of tiny u (a pool) from its flows, where y is all rounding.
  const strength = nodeStrength(part);
  const local = new Map<number, number>();
  for (let k = 0; k < part.size; k++) local.set(part.nodes[k]!, k);
  const change = new Map<number, number>();
  for (let k = 0; k < part.size; k++) {
    const stiff = Math.abs(part.u[k]!) * strength[k]! > growth.rate;
    change.set(part.nodes[k]!, stiff ? growth.pressures[k]! / part.u[k]! : -flows[k]! / growth.rate);
  }
  for (let e = 0; e < network.from.length; e++) {
    const i = network.from[e]!;
    const j = network.to[e]!;
    const k = local.get(i);
    const l = local.get(j);
    if (k !== undefined && l === undefined) addInflow(j, k, e);
    if (l !== undefined && k === undefined) addInflow(i, l, e);
  }
  return modeGroups(Int32Array.from(change.keys()), Float64Array.from(change.values()), signs);

  /** A soft node or reservoir takes what its neighbours lose: `dx/dt = rate x = sum G y`. */
  function addInflow(node: number, neighbour: number, link: number): void {
    const inflow = (network.conductance[link]! * growth.pressures[neighbour]!) / growth.rate;
    if (inflow !== 0) change.set(node, (change.get(node) ?? 0) + inflow);
  }
}

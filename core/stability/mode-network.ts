/**
 * The network as the modes see it: stiffnesses on nodes, conductances on links; and its connected parts.
 * Small changes x of the amounts obey `dx/dt = -Lap diag(u) x`, with Lap the conductance Laplacian.
 */

/** A network with one gas (or with the total gas), linearised at one instant. Nothing here is kept or written. */
export interface ModeNetwork {
  /** Number of nodes. */
  readonly size: number;
  /** u = dp/dn of each node, Pa/mol; entries of grounded nodes are not read. */
  readonly u: Float64Array;
  readonly from: Int32Array;
  readonly to: Int32Array;
  /** d(molar flow)/d(pressure) of each link, mol/(s Pa), >= 0; a link with 0 (a shut valve) does not connect. */
  readonly conductance: Float64Array;
  /** 1 for reservoirs: their pressure does not answer, their gas is unlimited. */
  readonly grounded: Uint8Array;
}

/** Labels of the connected parts. Reservoirs belong to none and connect nothing: their pressure is not moved. */
export interface Parts {
  readonly count: number;
  /** Part of each node; -1 for grounded nodes. */
  readonly part: Int32Array;
  /** 1 for a part with an open link to a reservoir. */
  readonly open: Uint8Array;
}

/** One connected part with its own numbering. */
export interface Part {
  readonly size: number;
  /** Index in the network of each node of the part. */
  readonly nodes: Int32Array;
  readonly u: Float64Array;
  readonly from: Int32Array;
  readonly to: Int32Array;
  readonly conductance: Float64Array;
  /** Conductance to nodes whose pressure cannot move, mol/(s Pa). */
  readonly leak: Float64Array;
}

/**
 * Finds the connected parts of a network.
 * @throws RangeError where a conductance is negative or not finite, or a stiffness is not finite: the caller must
 *   leave out what no longer exists (a ruptured film) before it asks for modes
 */
export function connectedParts(network: ModeNetwork): Parts {
  const { size, u, from, to, conductance, grounded } = network;
  for (let i = 0; i < size; i++) {
    if (grounded[i] !== 1 && !Number.isFinite(u[i]!)) throw new RangeError(`stiffness of node ${i} is ${u[i]!}`);
  }
  const parent = new Int32Array(size);
  for (let i = 0; i < size; i++) parent[i] = i;
  for (let e = 0; e < from.length; e++) {
    const g = conductance[e]!;
    if (!(g >= 0 && g < Infinity)) throw new RangeError(`conductance of link ${e} is ${g}`);
    if (g === 0 || grounded[from[e]!] === 1 || grounded[to[e]!] === 1) continue;
    const i = rootOf(parent, from[e]!);
    const j = rootOf(parent, to[e]!);
    if (i < j) parent[j] = i;
    else parent[i] = j;
  }
  const part = new Int32Array(size);
  let count = 0;
  for (let i = 0; i < size; i++) {
    if (grounded[i] === 1) part[i] = -1;
    else if (rootOf(parent, i) === i) part[i] = count++;
    else part[i] = part[rootOf(parent, i)]!; // the root is the least index of its part, so it is labelled already
  }
  const open = new Uint8Array(count);
  for (let e = 0; e < from.length; e++) {
    if (conductance[e] === 0) continue;
    const i = part[from[e]!]!;
    const j = part[to[e]!]!;
    if (i < 0 && j >= 0) open[j] = 1;
    if (j < 0 && i >= 0) open[i] = 1;
  }
  return { count, part, open };
}

function rootOf(parent: Int32Array, node: number): number {
  let i = node;
  while (parent[i]! !== i) {
    parent[i] = parent[parent[i]!]!;
    i = parent[i]!;
  }
  return i;
}

/**
 * Takes the wanted parts out of the network, each with its own numbering.
 * A node with u = 0 does not move its pressure whatever it takes in: it stands as a leak of its neighbours and is not
 * in `nodes` (its own change follows from theirs).
 * @param wanted 1 for each part to extract, length `parts.count`
 * @param isSoft says for a node whether its u counts as 0
 */
export function extractParts(network: ModeNetwork, parts: Parts, wanted: Uint8Array, isSoft: Uint8Array): Part[] {
  const { size, u, from, to, conductance } = network;
  const { part, count } = parts;
  const nodeCount = new Int32Array(count);
  const linkCount = new Int32Array(count);
  const local = new Int32Array(size).fill(-1);
  for (let i = 0; i < size; i++) {
    const p = part[i]!;
    if (p >= 0 && wanted[p] === 1 && isSoft[i] !== 1) local[i] = nodeCount[p]!++;
  }
  for (let e = 0; e < from.length; e++) {
    if (conductance[e]! > 0 && from[e] !== to[e] && local[from[e]!]! >= 0 && local[to[e]!]! >= 0) {
      linkCount[part[from[e]!]!]!++;
    }
  }
  const extracted: (Part | undefined)[] = new Array<Part | undefined>(count);
  for (let p = 0; p < count; p++) if (wanted[p] === 1) extracted[p] = emptyPart(nodeCount[p]!, linkCount[p]!);
  for (let i = 0; i < size; i++) {
    if (local[i]! < 0) continue;
    const target = extracted[part[i]!]!;
    target.nodes[local[i]!] = i;
    target.u[local[i]!] = u[i]!;
  }
  linkCount.fill(0);
  for (let e = 0; e < from.length; e++) {
    const g = conductance[e]!;
    if (!(g > 0) || from[e] === to[e]) continue;
    const i = local[from[e]!]!;
    const j = local[to[e]!]!;
    if (i >= 0 && j >= 0) {
      const target = extracted[part[from[e]!]!]!;
      const place = linkCount[part[from[e]!]!]!++;
      target.from[place] = i;
      target.to[place] = j;
      target.conductance[place] = g;
    } else if (i >= 0) extracted[part[from[e]!]!]!.leak[i]! += g;
    else if (j >= 0) extracted[part[to[e]!]!]!.leak[j]! += g;
  }
  return extracted.filter((one) => one !== undefined);
}

function emptyPart(size: number, links: number): Part {
  return {
    size,
    nodes: new Int32Array(size),
    u: new Float64Array(size),
    from: new Int32Array(links),
    to: new Int32Array(links),
    conductance: new Float64Array(links),
    leak: new Float64Array(size),
  };
}

/**
 * Elimination of cavities from the conductance Laplacian (Kron reduction): what conductance is left between the nodes
 * that reach each other through cavities only. Pairs named `via:M` come from here.
 * Source: Doerfler & Bullo, Kron reduction of graphs (2013): eliminating one node k is the star-mesh transformation
 * `G_ij += G_ik G_kj / sum_l G_kl`, which has no subtraction and so keeps every digit of small conductances.
 */

/** Above this many nodes around one cluster of cavities no pairs are listed: the modes speak for them. */
export const LARGEST_CLUSTER = 64;

/** Cavities connected among themselves by open links, and the nodes around them. */
export interface CavityCluster {
  /** The interior nodes, in rising order. */
  readonly interior: readonly number[];
  /** The nodes around them, in rising order. */
  readonly exterior: readonly number[];
  /** False where there are more than `largest` nodes around: `from`, `to`, `conductance` are then empty. */
  readonly listed: boolean;
  /** The pairs `from < to`, each once. */
  readonly from: Int32Array;
  readonly to: Int32Array;
  /** Conductance left between the two through this cluster, mol/(s Pa); direct links between them are not in it. */
  readonly conductance: Float64Array;
}

/**
 * Reduces every cluster of interior nodes.
 * @param size number of nodes
 * @param from,to,conductance the links, mol/(s Pa); a conductance of zero (a shut valve) does not connect
 * @param interior 1 for the nodes to eliminate, length `size`
 * @param largest most exterior nodes for which pairs are listed
 * @returns clusters in the order of their first interior node
 */
export function eliminateInterior(
  size: number,
  from: Int32Array,
  to: Int32Array,
  conductance: Float64Array,
  interior: Uint8Array,
  largest: number = LARGEST_CLUSTER,
): CavityCluster[] {
  const around: (Map<number, number> | undefined)[] = new Array<Map<number, number> | undefined>(size);
  for (let i = 0; i < size; i++) if (interior[i] === 1) around[i] = new Map();
  for (let e = 0; e < from.length; e++) {
    const i = from[e]!;
    const j = to[e]!;
    if (!(conductance[e]! > 0) || i === j) continue;
    addTo(around[i], j, conductance[e]!);
    addTo(around[j], i, conductance[e]!);
  }
  const clusters: CavityCluster[] = [];
  const seen = new Uint8Array(size);
  for (let i = 0; i < size; i++) {
    if (interior[i] !== 1 || seen[i] === 1) continue;
    clusters.push(reduceCluster(gather(i, around, seen), around, largest));
  }
  return clusters;
}

function addTo(map: Map<number, number> | undefined, key: number, value: number): void {
  if (map !== undefined) map.set(key, (map.get(key) ?? 0) + value);
}

/** Interior nodes that `start` reaches through interior nodes, in rising order. */
function gather(start: number, around: readonly (Map<number, number> | undefined)[], seen: Uint8Array): number[] {
  const cluster = [start];
  seen[start] = 1;
  for (let next = 0; next < cluster.length; next++) {
    for (const neighbour of around[cluster[next]!]!.keys()) {
      if (around[neighbour] === undefined || seen[neighbour] === 1) continue;
      seen[neighbour] = 1;
      cluster.push(neighbour);
    }
  }
  return cluster.sort((a, b) => a - b);
}

function reduceCluster(
  cluster: readonly number[],
  around: readonly (Map<number, number> | undefined)[],
  largest: number,
): CavityCluster {
  const outside = new Set<number>();
  for (const node of cluster) {
    for (const neighbour of around[node]!.keys()) if (around[neighbour] === undefined) outside.add(neighbour);
  }
  const exterior = [...outside].sort((a, b) => a - b);
  const count = exterior.length;
  if (count > largest || count < 2) {
    const none = { from: new Int32Array(0), to: new Int32Array(0), conductance: new Float64Array(0) };
    return { interior: cluster, exterior, listed: count <= largest, ...none };
  }
  const place = new Map(exterior.map((node, index) => [node, index]));
  const reduced = new Float64Array(count * count);
  const left = new Set(cluster);
  while (left.size > 0) {
    const node = fewestNeighbours(left, around);
    left.delete(node);
    const star = [...around[node]!];
    let sum = 0;
    for (const [, g] of star) sum += g;
    for (let s = 0; s < star.length; s++) {
      const [i, gi] = star[s]!;
      around[i]?.delete(node);
      for (let t = s + 1; t < star.length; t++) {
        const [j, gj] = star[t]!;
        const g = gi * (gj / sum);
        const pi = place.get(i);
        const pj = place.get(j);
        if (pi !== undefined && pj !== undefined) reduced[Math.min(pi, pj) * count + Math.max(pi, pj)]! += g;
        addTo(around[i], j, g);
        addTo(around[j], i, g);
      }
    }
  }
  return { interior: cluster, exterior, listed: true, ...pairsOf(exterior, reduced) };
}

function fewestNeighbours(left: ReadonlySet<number>, around: readonly (Map<number, number> | undefined)[]): number {
  let best = -1;
  let least = Infinity;
  for (const node of left) {
    const degree = around[node]!.size;
    if (degree >= least) continue;
    best = node;
    least = degree;
    if (degree <= 2) break;
  }
  return best;
}

function pairsOf(exterior: readonly number[], reduced: Float64Array) {
  const from: number[] = [];
  const to: number[] = [];
  const conductance: number[] = [];
  const count = exterior.length;
  for (let i = 0; i < count; i++) {
    for (let j = i + 1; j < count; j++) {
      if (!(reduced[i * count + j]! > 0)) continue;
      from.push(exterior[i]!);
      to.push(exterior[j]!);
      conductance.push(reduced[i * count + j]!);
    }
  }
  return { from: Int32Array.from(from), to: Int32Array.from(to), conductance: Float64Array.from(conductance) };
}

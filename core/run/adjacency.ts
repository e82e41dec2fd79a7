/** Which links a node has: compressed rows of (group, link) pairs, made once for a network. */
import type { Network } from '../network/network.ts';

export interface Adjacency {
  /** Links of node i are entries start[i] .. start[i+1] of `group` and `link`. */
  readonly start: Int32Array;
  readonly group: Int32Array;
  readonly link: Int32Array;
  /** The node at the other end. */
  readonly other: Int32Array;
}

export function buildAdjacency(network: Network): Adjacency {
  const n = network.nodes.count;
  const start = new Int32Array(n + 1);
  for (const table of network.links) {
    for (let l = 0; l < table.count; l++) {
      start[table.from[l]! + 1]!++;
      start[table.to[l]! + 1]!++;
    }
  }
  for (let i = 0; i < n; i++) start[i + 1]! += start[i]!;
  const fill = start.slice(0, n);
  const total = start[n]!;
  const adjacency: Adjacency = {
    start,
    group: new Int32Array(total),
    link: new Int32Array(total),
    other: new Int32Array(total),
  };
  network.links.forEach((table, g) => {
    for (let l = 0; l < table.count; l++) {
      for (let end = 0; end < 2; end++) {
        const own = (end === 0 ? table.from : table.to)[l]!;
        const at = fill[own]!++;
        adjacency.group[at] = g;
        adjacency.link[at] = l;
        adjacency.other[at] = (end === 0 ? table.to : table.from)[l]!;
      }
    }
  });
  return adjacency;
}

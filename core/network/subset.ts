/** A network without the nodes that have vanished: everything re-numbered, names kept through `origin`. */
import type { LinkTable, Network, NodeTable } from './network.ts';

/**
 * @param keep one entry a node; nodes with 0 are left out, and every link that touches them
 * @param keepLink one array a link table; links with 0 are left out
 * @returns the smaller network, and for each of its nodes and links the index it had before
 */
export function subsetNetwork(
  network: Network,
  keep: Uint8Array,
  keepLink: readonly Uint8Array[],
): { network: Network; nodeBefore: Int32Array; linkBefore: Int32Array[] } {
  const { nodes } = network;
  const species = network.species.length;
  const kept: number[] = [];
  const place = new Int32Array(nodes.count).fill(-1);
  for (let i = 0; i < nodes.count; i++) {
    if (keep[i] === 0) continue;
    place[i] = kept.length;
    kept.push(i);
  }
  const nodeBefore = Int32Array.from(kept);
  const real = (from: Float64Array): Float64Array => Float64Array.from(nodeBefore, (i) => from[i]!);
  const perSpecies = (from: Float64Array): Float64Array => {
    const out = new Float64Array(nodeBefore.length * species);
    nodeBefore.forEach((i, q) => out.set(from.subarray(i * species, (i + 1) * species), q * species));
    return out;
  };
  const table: NodeTable = {
    count: nodeBefore.length,
    bubbleCount: kept.filter((i) => i < nodes.bubbleCount).length,
    origin: nodeBefore.map((i) => nodes.origin[i]!),
    kind: Uint8Array.from(nodeBefore, (i) => nodes.kind[i]!),
    faces: real(nodes.faces),
    mouth: real(nodes.mouth),
    head: real(nodes.head),
    wallStiffness: real(nodes.wallStiffness),
    wallVolume: real(nodes.wallVolume),
    film: nodeBefore.map((i) => nodes.film[i]!),
    surfactant: real(nodes.surfactant),
    liquid: real(nodes.liquid),
    volume: real(nodes.volume),
    capacity: perSpecies(nodes.capacity),
    fraction: perSpecies(nodes.fraction),
    drive: Array.from(nodeBefore, (i) => nodes.drive[i] ?? null),
  };
  const linkBefore: Int32Array[] = [];
  const links = network.links.map((links, g): LinkTable => {
    const before = Int32Array.from(
      Array.from({ length: links.count }, (_, l) => l).filter(
        (l) => keepLink[g]![l] !== 0 && place[links.from[l]!]! >= 0 && place[links.to[l]!]! >= 0,
      ),
    );
    linkBefore.push(before);
    const coefficients = new Float64Array(before.length * links.stride);
    before.forEach((l, q) =>
      coefficients.set(links.coefficients.subarray(l * links.stride, (l + 1) * links.stride), q * links.stride),
    );
    return {
      ...links,
      count: before.length,
      origin: before.map((l) => links.origin[l]!),
      from: before.map((l) => place[links.from[l]!]!),
      to: before.map((l) => place[links.to[l]!]!),
      coefficients,
      open: Array.from(before, (l) => links.open[l] ?? null),
      thickness: links.thickness.length === 0 ? links.thickness : Float64Array.from(before, (l) => links.thickness[l]!),
      extent: links.extent.length === 0 ? links.extent : Float64Array.from(before, (l) => links.extent[l]!),
    };
  });
  const feeds = network.feeds
    .filter((feed) => place[feed.node]! >= 0)
    .map((feed) => ({ ...feed, node: place[feed.node]! }));
  return { network: { ...network, nodes: table, links, feeds }, nodeBefore, linkBefore };
}

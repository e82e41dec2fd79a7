/** A network made smaller when bubbles have vanished: the rest keeps its names, parameters and rates. */
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { subsetNetwork } from '../../../core/network/subset.ts';
import type { LinkTable, Network, NodeTable } from '../../../core/network/network.ts';
import { createNetworkSystem } from '../../../core/run/system.ts';
import { randomNetwork } from '../transfer/random-documents.ts';
import { generator } from '../stability/random-networks.ts';

const seeds = fc.nat(2 ** 31);

/** A network and a random choice of what stays: most bubbles, all else, most links. */
function draw(seed: number): {
  network: Network;
  keep: Uint8Array;
  keepLink: Uint8Array[];
  y: Float64Array;
  sizes: Float64Array;
  t: number;
} {
  const random = generator(seed + 1);
  const { sample: drawn, t } = randomNetwork(seed);
  const { network, y, start } = drawn;
  const keep = Uint8Array.from({ length: network.nodes.count }, (_, i) =>
    i < network.nodes.bubbleCount && random() < 0.4 ? 0 : 1,
  );
  const keepLink = network.links.map(({ count }) => Uint8Array.from({ length: count }, () => (random() < 0.2 ? 0 : 1)));
  return { network, keep, keepLink, y, sizes: start.sizes, t };
}

const NODE_COLUMNS = [
  'origin',
  'kind',
  'faces',
  'mouth',
  'head',
  'wallStiffness',
  'wallVolume',
  'film',
  'surfactant',
  'liquid',
  'volume',
  'drive',
] as const satisfies readonly (keyof NodeTable)[];
const SPECIES_COLUMNS = ['capacity', 'fraction'] as const satisfies readonly (keyof NodeTable)[];
const LINK_COLUMNS = ['origin', 'open', 'thickness', 'extent'] as const satisfies readonly (keyof LinkTable)[];

describe('a network without the nodes that have vanished', () => {
  it('has every column of every node that stays, and no other', () => {
    fc.assert(
      fc.property(seeds, (seed) => {
        const { network, keep, keepLink } = draw(seed);
        const { network: smaller, nodeBefore } = subsetNetwork(network, keep, keepLink);
        const kept = [...keep.keys()].filter((i) => keep[i] === 1);
        expect([...nodeBefore]).toEqual(kept);
        expect(smaller.nodes.count).toBe(kept.length);
        expect(smaller.nodes.bubbleCount).toBe(kept.filter((i) => i < network.nodes.bubbleCount).length);
        for (const column of NODE_COLUMNS) {
          expect(Array.from<unknown>(smaller.nodes[column])).toEqual(kept.map((i) => network.nodes[column][i]));
        }
        const species = network.species.length;
        for (const column of SPECIES_COLUMNS) {
          const expected = kept.flatMap((i) => [...network.nodes[column].subarray(i * species, (i + 1) * species)]);
          expect([...smaller.nodes[column]]).toEqual(expected);
        }
        const names = Array.from(smaller.nodes.origin, smaller.nodeName);
        expect(names).toEqual(kept.map((i) => network.nodeName(network.nodes.origin[i]!)));
      }),
      { seed: 1, numRuns: 150 },
    );
  });

  it('knows every column that a node and a link have, so that none is forgotten', () => {
    const { network } = draw(3);
    const columns = [...NODE_COLUMNS, ...SPECIES_COLUMNS, 'count', 'bubbleCount'];
    expect(Object.keys(network.nodes).sort()).toEqual([...columns].sort());
    const link = [...LINK_COLUMNS, 'kind', 'count', 'from', 'to', 'stride', 'coefficients'];
    for (const table of network.links) expect(Object.keys(table).sort()).toEqual([...link].sort());
  });

  it('has the links that stay between nodes that stay, each with its ends, its coefficients and its name', () => {
    let lost = 0;
    fc.assert(
      fc.property(seeds, (seed) => {
        const { network, keep, keepLink } = draw(seed);
        const { network: smaller, nodeBefore, linkBefore } = subsetNetwork(network, keep, keepLink);
        expect(smaller.links.map(({ kind }) => kind)).toEqual(network.links.map(({ kind }) => kind));
        smaller.links.forEach((table, g) => {
          const whole = network.links[g]!;
          const stays = (l: number): boolean =>
            keepLink[g]![l] === 1 && keep[whole.from[l]!] === 1 && keep[whole.to[l]!] === 1;
          const kept = [...whole.origin.keys()].filter(stays);
          lost += whole.count - kept.length;
          expect([...linkBefore[g]!]).toEqual(kept);
          expect(table.count).toBe(kept.length);
          expect(table.stride).toBe(whole.stride);
          expect(Array.from(table.from, (i) => nodeBefore[i])).toEqual(kept.map((l) => whole.from[l]));
          expect(Array.from(table.to, (i) => nodeBefore[i])).toEqual(kept.map((l) => whole.to[l]));
          for (const column of LINK_COLUMNS) {
            if (whole[column].length === 0) expect(table[column]).toHaveLength(0);
            else expect(Array.from<unknown>(table[column])).toEqual(kept.map((l) => whole[column][l]));
          }
          const { stride } = whole;
          expect([...table.coefficients]).toEqual(
            kept.flatMap((l) => [...whole.coefficients.subarray(l * stride, (l + 1) * stride)]),
          );
        });
      }),
      { seed: 2, numRuns: 150 },
    );
    expect(lost).toBeGreaterThan(100);
  });

  it('has the rates of the whole one with those nodes and links switched off, to the last bit', () => {
    fc.assert(
      fc.property(seeds, (seed) => {
        const { network, keep, keepLink, y, sizes, t } = draw(seed);
        const { network: smaller, nodeBefore } = subsetNetwork(network, keep, keepLink);
        const species = network.species.length;
        const [whole, part] = [createNetworkSystem(network, 1e-6, 1), createNetworkSystem(smaller, 1e-6, 1)];
        whole.state.size.set(sizes);
        whole.setActive(keep, keepLink);
        const fewer = new Float64Array(part.size);
        nodeBefore.forEach((i, q) => {
          part.state.size[q] = sizes[i]!;
          fewer.set(y.subarray(i * species, (i + 1) * species), q * species);
        });
        const [expected, got] = [new Float64Array(whole.size), new Float64Array(part.size)];
        whole.rates(t, y, expected);
        part.rates(t, fewer, got);
        nodeBefore.forEach((i, q) => {
          for (let k = 0; k < species; k++) expect(got[q * species + k]).toBe(expected[i * species + k]);
        });
      }),
      { seed: 3, numRuns: 150 },
    );
  });

  it('feeds those of its nodes that are fed, and nobody in place of one that is gone', () => {
    let fed = 0;
    fc.assert(
      fc.property(seeds, (seed) => {
        const { network, keep, keepLink } = draw(seed);
        const { network: smaller, nodeBefore } = subsetNetwork(network, keep, keepLink);
        const expected = network.feeds.filter(({ node }) => keep[node] === 1);
        expect(smaller.feeds.map((feed) => ({ ...feed, node: nodeBefore[feed.node] }))).toEqual(expected);
        fed += expected.length;
      }),
      { seed: 4, numRuns: 150 },
    );
    expect(fed).toBeGreaterThan(50);
  });

  it('leaves the whole one as it was, and is the whole one where all stays', () => {
    const { network } = draw(11);
    const all = subsetNetwork(
      network,
      new Uint8Array(network.nodes.count).fill(1),
      network.links.map(({ count }) => new Uint8Array(count).fill(1)),
    );
    expect(all.network).toEqual(network);
    expect(all.network.nodes.head).not.toBe(network.nodes.head);
  });
});

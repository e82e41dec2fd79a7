import { describe, it, expect } from 'vitest';
import fc from 'fast-check';
import { inverse, Matrix } from 'ml-matrix';
import { eliminateInterior } from '../../../core/stability/kron.ts';
import { generator } from './random-networks.ts';

type Link = readonly [number, number, number];

function reduce(size: number, links: readonly Link[], interior: readonly number[], largest?: number) {
  const flags = new Uint8Array(size);
  for (const node of interior) flags[node] = 1;
  return eliminateInterior(
    size,
    Int32Array.from(links, (link) => link[0]),
    Int32Array.from(links, (link) => link[1]),
    Float64Array.from(links, (link) => link[2]),
    flags,
    largest,
  );
}

/** A few additions and divisions: rounding only. */
const ROUNDING = 1e-14;

describe('elimination of cavities', () => {
  it('joins two tubes on a cavity in series', () => {
    const [cluster] = reduce(3, [[0, 2, 3], [1, 2, 6]], [2]); // prettier-ignore
    expect([...cluster!.from, ...cluster!.to]).toEqual([0, 1]);
    expect(cluster!.conductance[0]).toBeCloseTo(2, 14); // 3 * 6 / (3 + 6)
    expect(cluster!.interior).toEqual([2]);
  });

  it('joins a chain of cavities in series', () => {
    const links: Link[] = [[0, 1, 1], [1, 2, 2], [2, 3, 4], [3, 4, 8]]; // prettier-ignore
    const clusters = reduce(5, links, [1, 2, 3]);
    expect(clusters).toHaveLength(1);
    expect(clusters[0]!.conductance[0]! * (1 + 1 / 2 + 1 / 4 + 1 / 8)).toBeCloseTo(1, 14);
  });

  it('turns a star of three bubbles into a mesh', () => {
    const [cluster] = reduce(4, [[0, 3, 1], [1, 3, 2], [2, 3, 5]], [3]); // prettier-ignore
    // G_ij = G_i G_j / sum G
    expect([...cluster!.conductance].map((g) => g * 8)).toEqual([2, 5, 10]);
  });

  it('parts a manifold at a shut valve', () => {
    const links: Link[] = [[0, 2, 1], [1, 3, 1], [2, 3, 0]]; // prettier-ignore
    const clusters = reduce(4, links, [2, 3]);
    expect(clusters.map((cluster) => cluster.interior)).toEqual([[2], [3]]);
    expect(clusters.every((cluster) => cluster.conductance.length === 0)).toBe(true);
  });

  it('adds parallel tubes and passes by a dead end', () => {
    const links: Link[] = [[0, 2, 1], [0, 2, 2], [1, 2, 3], [2, 3, 7]]; // prettier-ignore
    const [cluster] = reduce(4, links, [2, 3]);
    expect(cluster!.conductance[0]).toBeCloseTo(1.5, 14); // 3 * 3 / 6: the dead end draws nothing
  });

  it('does not count links that pass the cavity by', () => {
    const [cluster] = reduce(3, [[0, 1, 100], [0, 2, 1], [1, 2, 1]], [2]); // prettier-ignore
    expect(cluster!.conductance[0]).toBeCloseTo(0.5, 14);
  });

  it('keeps every digit of a narrow tube beside wide ones', () => {
    const [cluster] = reduce(3, [[0, 2, 1e-12], [1, 2, 1e6]], [2]); // prettier-ignore
    expect(Math.abs(cluster!.conductance[0]! / (1e-12 / (1 + 1e-18)) - 1)).toBeLessThan(ROUNDING);
  });

  it('lists no pairs above 64 bubbles on one cavity, and all 2016 at 64', () => {
    const star = (bubbles: number) => Array.from({ length: bubbles }, (_, i): Link => [i, bubbles, 1]);
    const [full] = reduce(65, star(64), [64]);
    expect(full!.listed).toBe(true);
    expect(full!.conductance).toHaveLength((64 * 63) / 2);
    const [over] = reduce(66, star(65), [65]);
    expect(over!.listed).toBe(false);
    expect(over!.conductance).toHaveLength(0);
    expect(over!.exterior).toHaveLength(65);
  });

  it('equals the Schur complement of the Laplacian on random manifolds with loops', () => {
    fc.assert(
      fc.property(fc.integer({ min: 1, max: 1e6 }), (seed) => {
        const random = generator(seed);
        const outside = 2 + Math.floor(random() * 5);
        const inside = 1 + Math.floor(random() * 6);
        const size = outside + inside;
        const links: Link[] = [];
        // A tree of cavities, a few loops, and every bubble on some cavity: one cluster.
        for (let k = 1; k < inside; k++) links.push([outside + Math.floor(random() * k), outside + k, 0.1 + random()]);
        for (let k = 0; k < 3; k++) {
          const [i, j] = [outside + Math.floor(random() * inside), outside + Math.floor(random() * inside)];
          links.push([i, j, random()]);
        }
        for (let i = 0; i < outside; i++) links.push([i, outside + Math.floor(random() * inside), 0.1 + random()]);
        const interior = Array.from({ length: inside }, (_, k) => outside + k);
        const [cluster] = reduce(size, links, interior);
        const laplacian = Matrix.zeros(size, size);
        for (const [i, j, g] of links) {
          if (i === j) continue;
          laplacian.set(i, i, laplacian.get(i, i) + g);
          laplacian.set(j, j, laplacian.get(j, j) + g);
          laplacian.set(i, j, laplacian.get(i, j) - g);
          laplacian.set(j, i, laplacian.get(j, i) - g);
        }
        const last = size - 1;
        const across = laplacian.subMatrix(0, outside - 1, outside, last);
        const schur = laplacian
          .subMatrix(0, outside - 1, 0, outside - 1)
          .sub(across.mmul(inverse(laplacian.subMatrix(outside, last, outside, last))).mmul(across.transpose()));
        expect(cluster!.conductance).toHaveLength((outside * (outside - 1)) / 2);
        cluster!.from.forEach((i, e) => {
          // The reference inverts a matrix of condition up to some hundreds.
          expect(Math.abs(cluster!.conductance[e]! + schur.get(i, cluster!.to[e]!))).toBeLessThan(1e-12);
        });
      }),
      { seed: 1, numRuns: 300 },
    );
  });
});

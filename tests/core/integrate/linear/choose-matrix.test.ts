/** Which matrix a pattern gets: arrow over a pool or a cavity, dense where few meet, sparse in a bed. */
import { describe, expect, it } from 'vitest';
import { createMatrix, findHubs } from '../../../../core/integrate/linear/choose-matrix.ts';

const star = (leaves: number): [Int32Array, Int32Array] => [
  Int32Array.from({ length: leaves }, (_, i) => i),
  new Int32Array(leaves).fill(leaves),
];
const chain = (size: number): [Int32Array, Int32Array] => [
  Int32Array.from({ length: size - 1 }, (_, i) => i),
  Int32Array.from({ length: size - 1 }, (_, i) => i + 1),
];

describe('the hubs of a pattern', () => {
  it('are the pool that every bubble touches', () => {
    expect(findHubs(101, ...star(100))).toEqual([100]);
  });
  it('are none where nothing touches anything else', () => {
    expect(findHubs(3, Int32Array.of(0, 1, 2), Int32Array.of(0, 1, 2))).toEqual([]);
  });
  it('are not found in a long chain', () => {
    expect(findHubs(100, ...chain(100))).toBe(null);
  });
});

describe('the matrix of a network', () => {
  // An arrow has no place between two leaves, a dense one has every place, a sparse one only those of its links.
  const places = (size: number, [rows, columns]: [Int32Array, Int32Array], row: number, column: number): number =>
    createMatrix(size, rows, columns).slot(row, column);

  it('is an arrow over a pool', () => {
    expect(places(101, star(100), 3, 4)).toBe(-1);
    expect(places(101, star(100), 3, 100)).toBeGreaterThanOrEqual(0);
  });
  it('is dense for a chain of twenty', () => {
    expect(places(20, chain(20), 0, 19)).toBeGreaterThanOrEqual(0);
  });
  it('is sparse for a chain of a hundred', () => {
    expect(places(100, chain(100), 0, 99)).toBe(-1);
    expect(places(100, chain(100), 41, 40)).toBeGreaterThanOrEqual(0);
  });
});

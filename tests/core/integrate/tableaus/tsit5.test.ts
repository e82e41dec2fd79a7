import { describe, expect, it } from 'vitest';
import { TSIT5 } from '../../../../core/integrate/tableaus/tsit5.ts';

const { stages, nodes, rows, errorWeights, dense } = TSIT5;
/** The coefficients are given to 16 digits, of size up to 90. */
const ROUNDING = 1e-13;
const b = [...rows[6], 0];
const bHat = b.map((value, i) => value + errorWeights[i]!);

/** A rooted tree as the list of its root's branches. */
type Tree = readonly Tree[];
const leaf: Tree = [];
const order = (tree: Tree): number => 1 + tree.reduce((sum, branch) => sum + order(branch), 0);
const density = (tree: Tree): number => order(tree) * tree.reduce((product, branch) => product * density(branch), 1);

/** Elementary weights of a Runge-Kutta method, Solving ODEs I, section II.2. */
function vertex(tree: Tree): number[] {
  return Array.from({ length: stages }, (_, i) =>
    tree.reduce((product, branch) => {
      const values = vertex(branch);
      return product * (rows[i] as readonly number[]).reduce((sum, a, j) => sum + a * values[j]!, 0);
    }, 1),
  );
}

const elementaryWeight = (w: readonly number[], tree: Tree): number =>
  vertex(tree).reduce((sum, value, i) => sum + w[i]! * value, 0);

const chain2: Tree = [leaf];
const chain3: Tree = [chain2];
const fork: Tree = [leaf, leaf];
const trees: readonly Tree[] = [
  leaf,
  chain2,
  fork,
  chain3,
  [leaf, leaf, leaf],
  [leaf, chain2],
  [fork],
  [chain3],
  [leaf, leaf, leaf, leaf],
  [leaf, leaf, chain2],
  [leaf, fork],
  [leaf, chain3],
  [chain2, chain2],
  [[leaf, leaf, leaf]],
  [[leaf, chain2]],
  [[fork]],
  [[chain3]],
];

const denseWeights = (theta: number): number[] =>
  dense.map((row) => row.reduce<number>((sum, coefficient, power) => sum + coefficient * theta ** (power + 1), 0));

describe("the coefficients of Tsitouras' pair", () => {
  it('fulfil all 17 order conditions to order 5', () => {
    for (const tree of trees) expect(Math.abs(elementaryWeight(b, tree) - 1 / density(tree))).toBeLessThan(ROUNDING);
  });

  it('have an embedded method that fulfils the conditions to order 4, and not those of order 5', () => {
    for (const tree of trees.filter((t) => order(t) <= 4)) {
      expect(Math.abs(elementaryWeight(bHat, tree) - 1 / density(tree))).toBeLessThan(ROUNDING);
    }
    const faults = trees.filter((t) => order(t) === 5).map((t) => Math.abs(elementaryWeight(bHat, t) - 1 / density(t)));
    expect(Math.max(...faults)).toBeGreaterThan(1e-5);
  });

  it('have weights that add up to 1 and errors that add up to 0', () => {
    expect(Math.abs(b.reduce((sum, value) => sum + value, 0) - 1)).toBeLessThan(ROUNDING);
    expect(Math.abs(errorWeights.reduce((sum, value) => sum + value, 0))).toBeLessThan(ROUNDING);
  });

  it('have nodes that are their row sums', () => {
    rows.forEach((row, i) => {
      expect(Math.abs((row as readonly number[]).reduce((sum, a) => sum + a, 0) - nodes[i]!)).toBeLessThan(ROUNDING);
    });
  });

  it('have a dense output of order 4 at every instant of the step', () => {
    for (const theta of [0.1, 0.37, 0.5, 0.8]) {
      const w = denseWeights(theta);
      for (const tree of trees.filter((t) => order(t) <= 4)) {
        expect(Math.abs(elementaryWeight(w, tree) - theta ** order(tree) / density(tree))).toBeLessThan(ROUNDING);
      }
    }
  });

  it('have a dense output that is nothing at the start and the step at the end', () => {
    denseWeights(0).forEach((value) => expect(value).toBe(0));
    denseWeights(1).forEach((value, i) => expect(Math.abs(value - b[i]!)).toBeLessThan(ROUNDING));
  });

  it('are stable on the negative real axis as far as is said, and no farther', () => {
    const R = (z: number): number => {
      const values: number[] = [];
      for (let i = 0; i < stages; i++) {
        values.push(1 + z * (rows[i] as readonly number[]).reduce((sum, a, j) => sum + a * values[j]!, 0));
      }
      return 1 + z * b.reduce((sum, weight, i) => sum + weight * values[i]!, 0);
    };
    for (let z = 0.01; z < TSIT5.stabilityInterval - 0.001; z += 0.01) expect(Math.abs(R(-z))).toBeLessThanOrEqual(1);
    expect(Math.abs(R(-TSIT5.stabilityInterval - 0.001))).toBeGreaterThan(1);
  });
});

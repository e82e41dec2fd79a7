import { inverse, Matrix } from 'ml-matrix';
import { describe, expect, it } from 'vitest';
import { RODAS5P } from '../../../../core/integrate/tableaus/rodas5p.ts';

// Back from the transformed coefficients: Gamma^-1 = I/gamma - C, alpha = A Gamma, b = m Gamma (Solving ODEs II, (IV.7.25)).
const stages = 8;
const A = lower(RODAS5P.stages);
const C = lower(RODAS5P.couplings);
const Gamma = inverse(
  Matrix.eye(stages)
    .mul(1 / RODAS5P.gamma)
    .sub(C),
);
const alpha = A.mmul(Gamma);
const beta = alpha.clone().add(Gamma);
const m = [...RODAS5P.stages[7], 1];
const mHat = [...RODAS5P.stages[7], 0];

/** The coefficients are given to 16 digits, of size up to 170, and pass through a triangular inverse. */
const ROUNDING = 2e-11;

function lower(rows: readonly (readonly number[])[]): Matrix {
  const full = Matrix.zeros(stages, stages);
  rows.forEach((row, i) => row.forEach((value, j) => full.set(i, j, value)));
  return full;
}

function weights(transformed: readonly number[]): number[] {
  return Matrix.rowVector([...transformed])
    .mmul(Gamma)
    .to1DArray();
}

/** A rooted tree as the list of its root's branches. */
type Tree = readonly Tree[];
const leaf: Tree = [];
const order = (tree: Tree): number => 1 + tree.reduce((sum, branch) => sum + order(branch), 0);
const density = (tree: Tree): number => order(tree) * tree.reduce((product, branch) => product * density(branch), 1);

/**
 * Elementary weights of a Rosenbrock method (Solving ODEs II, section IV.7): at a vertex with one branch the coefficients are
 * alpha + gamma, with several they are alpha.
 */
function vertex(tree: Tree): number[] {
  const matrix = tree.length === 1 ? beta : alpha;
  return Array.from({ length: stages }, (_, i) =>
    tree.reduce((product, branch) => {
      const values = vertex(branch);
      return product * values.reduce((sum, value, j) => sum + matrix.get(i, j) * value, 0);
    }, 1),
  );
}

const elementaryWeight = (b: readonly number[], tree: Tree): number =>
  vertex(tree).reduce((sum, value, i) => sum + b[i]! * value, 0);

const chain2: Tree = [leaf];
const chain3: Tree = [chain2];
const fork: Tree = [leaf, leaf];
const ofOrder: Readonly<Record<number, readonly Tree[]>> = {
  1: [leaf],
  2: [chain2],
  3: [fork, chain3],
  4: [[leaf, leaf, leaf], [leaf, chain2], [fork], [chain3]],
  5: [
    [leaf, leaf, leaf, leaf],
    [leaf, leaf, chain2],
    [leaf, fork],
    [leaf, chain3],
    [chain2, chain2],
    [[leaf, leaf, leaf]],
    [[leaf, chain2]],
    [[fork]],
    [[chain3]],
  ],
};
const trees = (most: number): Tree[] =>
  Object.values(ofOrder)
    .flat()
    .filter((tree) => order(tree) <= most);

/** Dense weights b_i(theta) in the original form. */
function denseWeights(theta: number): number[] {
  const inside = m.map((end, j) => {
    const [h1, h2, h3] = RODAS5P.dense;
    return theta * (end + (1 - theta) * (h1[j]! + theta * (h2[j]! + theta * h3[j]!)));
  });
  return weights(inside);
}

describe('the coefficients of RODAS5P', () => {
  it('fulfil all 17 order conditions to order 5', () => {
    expect(trees(5)).toHaveLength(17);
    const b = weights(m);
    for (const tree of trees(5)) {
      expect(Math.abs(elementaryWeight(b, tree) - 1 / density(tree))).toBeLessThan(ROUNDING);
    }
  });

  it('have an embedded method that fulfils the 8 conditions to order 4, and not those of order 5', () => {
    expect(trees(4)).toHaveLength(8);
    const b = weights(mHat);
    for (const tree of trees(4)) {
      expect(Math.abs(elementaryWeight(b, tree) - 1 / density(tree))).toBeLessThan(ROUNDING);
    }
    const faults = ofOrder[5]!.map((tree) => Math.abs(elementaryWeight(b, tree) - 1 / density(tree)));
    expect(Math.max(...faults)).toBeGreaterThan(1e-4);
  });

  it('have weights that add up to 1, embedded ones too', () => {
    for (const w of [m, mHat]) {
      expect(Math.abs(weights(w).reduce((sum, value) => sum + value, 0) - 1)).toBeLessThan(ROUNDING);
    }
  });

  it('have nodes that are the row sums of alpha, and time weights that are those of gamma', () => {
    for (let i = 0; i < stages; i++) {
      expect(Math.abs(alpha.getRow(i).reduce((a, b) => a + b, 0) - RODAS5P.nodes[i]!)).toBeLessThan(ROUNDING);
      expect(Math.abs(Gamma.getRow(i).reduce((a, b) => a + b, 0) - RODAS5P.timeWeights[i]!)).toBeLessThan(ROUNDING);
    }
  });

  it('end every step in a stage that is the new state: stiffly accurate, main method and embedded one', () => {
    const last = beta.getRow(7);
    const lastButOne = beta.getRow(6);
    weights(m).forEach((b, i) => expect(Math.abs(b - last[i]!)).toBeLessThan(ROUNDING));
    weights(mHat).forEach((b, i) => expect(Math.abs(b - lastButOne[i]!)).toBeLessThan(ROUNDING));
  });

  it('damp what is infinitely fast to nothing and never amplify what decays', () => {
    // R(z) = 1 + z b (I - z beta)^-1 1
    for (const w of [m, mHat]) {
      const b = Matrix.rowVector(weights(w));
      const R = (z: number): number => {
        const ones = Matrix.ones(stages, 1);
        return (
          1 +
          z *
            b
              .mmul(inverse(Matrix.eye(stages).sub(beta.clone().mul(z))))
              .mmul(ones)
              .get(0, 0)
        );
      };
      for (const z of [-0.1, -1, -10, -100, -1e3, -1e4]) expect(Math.abs(R(z))).toBeLessThan(1);
      expect(Math.abs(R(-1e6))).toBeLessThan(1e-4);
    }
  });

  it('have a dense output of order 4 at every instant of the step', () => {
    for (const theta of [0.1, 0.37, 0.5, 0.8]) {
      const b = denseWeights(theta);
      for (const tree of trees(4)) {
        const expected = theta ** order(tree) / density(tree);
        expect(Math.abs(elementaryWeight(b, tree) - expected)).toBeLessThan(ROUNDING);
      }
    }
  });

  it('have a dense output that is nothing at the start and the step at the end', () => {
    denseWeights(0).forEach((b) => expect(Math.abs(b)).toBe(0));
    const b = weights(m);
    denseWeights(1).forEach((value, i) => expect(Math.abs(value - b[i]!)).toBeLessThan(ROUNDING));
  });
});

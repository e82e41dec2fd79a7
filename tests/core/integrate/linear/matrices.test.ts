/** The three matrices of the stiff stepper solve what a general dense solver solves, and say so where they cannot. */
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { createArrow } from '../../../../core/integrate/linear/arrow.ts';
import type { AssembledMatrix } from '../../../../core/integrate/linear/assembled.ts';
import { createDense } from '../../../../core/integrate/linear/dense.ts';
import { createSparse } from '../../../../core/integrate/linear/sparse.ts';
import { gaussian } from '../../../bench/problems.ts';
import { denseSolution, distance, fillRandomly, randomPattern, type Pattern } from './systems.ts';

/** Every unknown meets the two last. */
function arrowPattern(size: number): Pattern {
  const rows: number[] = [];
  const columns: number[] = [];
  for (let i = 0; i < size; i++) {
    for (const hub of [size - 2, size - 1]) {
      rows.push(i, hub, i);
      columns.push(hub, i, i);
    }
  }
  return { rows: Int32Array.from(rows), columns: Int32Array.from(columns) };
}

const kinds: Record<string, (size: number, seed: number) => { matrix: AssembledMatrix; pattern: Pattern }> = {
  dense: (size, seed) => ({ matrix: createDense(size), pattern: randomPattern(size, 3 * size, seed) }),
  sparse: (size, seed) => {
    const pattern = randomPattern(size, 2 * size, seed);
    return { matrix: createSparse(size, pattern.rows, pattern.columns), pattern };
  },
  arrow: (size) => ({ matrix: createArrow(size, [size - 2, size - 1]), pattern: arrowPattern(size) }),
};

const vector = (size: number, seed: number): Float64Array => {
  const g = gaussian(seed);
  return Float64Array.from({ length: size }, g);
};

describe.each(Object.entries(kinds))('a %s matrix', (_kind, make) => {
  it('solves (shift I - J) x = b as a dense solver does', () => {
    fc.assert(
      fc.property(fc.integer({ min: 3, max: 40 }), fc.integer({ min: 1, max: 1e6 }), (size, seed) => {
        const { matrix, pattern } = make(size, seed);
        const J = fillRandomly(matrix, pattern, seed + 1);
        // Steps short enough that the columns are dominated by their diagonals, as the step control sees to.
        const shift = 3 * Math.max(...J.clone().abs().sum('column'));
        const b = vector(size, seed + 2);
        const x = b.slice();
        expect(matrix.factor(shift)).toBe(true);
        matrix.solve(x);
        // Dominant columns: a condition below 2, so that only rounding is left, some units a row.
        expect(distance(x, denseSolution(J, shift, b))).toBeLessThan(1e-14 * size);
      }),
      { seed: 7, numRuns: 60 },
    );
  });

  it('solves again with the same factors, and anew with another shift', () => {
    const { matrix, pattern } = make(12, 3);
    const J = fillRandomly(matrix, pattern, 4);
    for (const shift of [200, 1000]) {
      expect(matrix.factor(shift)).toBe(true);
      for (const seed of [5, 6]) {
        const b = vector(12, seed);
        const x = b.slice();
        matrix.solve(x);
        expect(distance(x, denseSolution(J, shift, b))).toBeLessThan(1e-13);
      }
    }
  });

  it('has a place for every diagonal entry, and shares one among entries that repeat', () => {
    const { matrix, pattern } = make(9, 8);
    for (let i = 0; i < 9; i++) expect(matrix.slot(i, i)).toBeGreaterThanOrEqual(0);
    const places = new Map<string, number>();
    pattern.rows.forEach((row, e) => {
      const key = `${row} ${pattern.columns[e]!}`;
      const slot = matrix.slot(row, pattern.columns[e]!);
      expect(slot).toBe(places.get(key) ?? slot);
      places.set(key, slot);
    });
    expect(new Set(places.values()).size).toBe(places.size);
  });

  it('is zero after clear', () => {
    const { matrix, pattern } = make(6, 1);
    fillRandomly(matrix, pattern, 2);
    matrix.clear();
    const x = Float64Array.from([1, 2, 3, 4, 5, 6]);
    expect(matrix.factor(2)).toBe(true);
    matrix.solve(x);
    expect([...x]).toEqual([0.5, 1, 1.5, 2, 2.5, 3]);
  });

  it('refuses a shift that makes it singular', () => {
    const { matrix } = make(6, 1);
    matrix.clear();
    // J = 4 I: shift I - J vanishes at shift 4.
    for (let i = 0; i < 6; i++) matrix.values[matrix.slot(i, i)] = 4;
    expect(matrix.factor(4)).toBe(false);
    expect(matrix.factor(5)).toBe(true);
  });

  it('refuses entries that are no numbers', () => {
    const { matrix, pattern } = make(6, 1);
    fillRandomly(matrix, pattern, 2);
    matrix.values[matrix.slot(2, 2)] = NaN;
    expect(matrix.factor(100)).toBe(false);
  });
});

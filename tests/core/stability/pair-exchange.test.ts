import { describe, it, expect } from 'vitest';
import fc from 'fast-check';
import { EigenvalueDecomposition, Matrix } from 'ml-matrix';
import { diffusivePairRate, pairExchangeRate } from '../../../core/stability/pair-exchange.ts';

const positive = fc.double({ min: 0.05, max: 2, noNaN: true });

function stiffnessOf(diagonal: Float64Array, common: Float64Array): Float64Array {
  const size = diagonal.length;
  return Float64Array.from({ length: size * size }, (_, k) => {
    const row = Math.floor(k / size);
    return (row === k % size ? diagonal[row]! : 0) - common[row]!;
  });
}

describe('the rate of a pair with several gases', () => {
  it('is -G (u_i + u_j) for one gas', () => {
    expect(pairExchangeRate(Float64Array.of(-3), Float64Array.of(2), 1)).toBe(6);
    expect(diffusivePairRate(Float64Array.of(5), Float64Array.of(8), Float64Array.of(2), 1)).toBeCloseTo(6, 14);
  });

  it('leaves out a gas that does not cross', () => {
    const H = Float64Array.of(-3, 1, 1, 7);
    expect(pairExchangeRate(H, Float64Array.of(2, 0), 2)).toBe(6);
    const rate = diffusivePairRate(Float64Array.of(5, 5), Float64Array.of(8, 1), Float64Array.of(2, 0), 2);
    expect(rate).toBeCloseTo(6, 14);
    expect(pairExchangeRate(H, new Float64Array(2), 2)).toBeNaN();
    expect(diffusivePairRate(Float64Array.of(5, 5), Float64Array.of(8, 1), new Float64Array(2), 2)).toBeNaN();
  });

  it('is the same by both forms and by dense eigenvalues of -G H', () => {
    const gases = fc.integer({ min: 1, max: 8 }).chain((species) => {
      const list = fc.array(positive, { minLength: species, maxLength: species });
      return fc.tuple(list, list, list);
    });
    fc.assert(
      fc.property(gases, ([a, b, g]) => {
        const size = a.length;
        const [diagonal, common, conductance] = [Float64Array.from(a), Float64Array.from(b), Float64Array.from(g)];
        const stiffness = stiffnessOf(diagonal, common);
        const rows = Array.from({ length: size }, (_, k) =>
          Array.from({ length: size }, (_, l) => -conductance[k]! * stiffness[k * size + l]!),
        );
        const dense = new EigenvalueDecomposition(new Matrix(rows));
        // Both sides have rounding of a matrix of norm up to 40, the reference through the QR algorithm; where two
        // eigenvalues nearly meet it loses half of its digits.
        const expected = Math.max(...dense.realEigenvalues);
        expect(Math.abs(diffusivePairRate(diagonal, common, conductance, size) - expected)).toBeLessThan(1e-6);
        expect(Math.abs(pairExchangeRate(stiffness, conductance, size) - expected)).toBeLessThan(1e-6);
      }),
      { seed: 2, numRuns: 500 },
    );
  });

  it('keeps the digits of a slow gas beside one a million million times faster', () => {
    // The fast gas settles at once; what is left for the slow one is its own exchange with the fast one in balance:
    // a_2 g_2 (1 - (b_2/a_2)/(1 - b_1/a_1)) in the limit g_1 >> g_2.
    const [a, b1, b2] = [1, 0.5, 0.3];
    const slow = 1e-12;
    const limit = -slow * (a - b2 / (1 - b1 / a));
    const rate = diffusivePairRate(Float64Array.of(a, a), Float64Array.of(b1, b2), Float64Array.of(1, slow), 2);
    expect(Math.abs(rate / limit - 1)).toBeLessThan(1e-11); // the limit itself is good to g_2/g_1
    const general = pairExchangeRate(
      stiffnessOf(Float64Array.of(a, a), Float64Array.of(b1, b2)),
      Float64Array.of(1, slow),
      2,
    );
    expect(Math.abs(general / limit - 1)).toBeLessThan(1e-11);
  });

  it('is slow where a frozen gas holds the pair: it needs the slow gas to cross', () => {
    // Mobile gas alone would be pushed back at a rate of order 1; the whole gas runs away (sum of b exceeds a).
    const [diagonal, common] = [Float64Array.of(1, 1), Float64Array.of(0.9, 0.2)];
    const rate = diffusivePairRate(diagonal, common, Float64Array.of(1, 1e-9), 2);
    expect(rate).toBeGreaterThan(0);
    expect(rate).toBeLessThan(2e-9);
  });

  it('counts a gas that no volume answers to with its own relaxation', () => {
    const rate = diffusivePairRate(Float64Array.of(1, 1), Float64Array.of(0.5, 0), Float64Array.of(1, 0.01), 2);
    expect(rate).toBe(-0.01);
  });
});

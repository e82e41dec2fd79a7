/** The viscosity of a gas mixture by Wilke's rule, against the formula as published and a textbook's worked example. */
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { Network } from '../../../core/network/network.ts';
import { mixtureViscosity, mixtureViscositySlopes } from '../../../core/transfer/viscosity.ts';

/** As much of a network as the rule looks at. */
function gases(viscosity: readonly number[], molarMass: readonly number[]): Network {
  return { viscosity: Float64Array.from(viscosity), molarMass: Float64Array.from(molarMass) } as unknown as Network;
}

/**
 * Wilke (1950), J. Chem. Phys. 18, 517, equations 13 and 14, in their own form: the gas itself stands apart from the sum,
 *   mu = sum_i mu_i / (1 + (1/x_i) sum_{j != i} x_j phi_ij),
 *   phi_ij = [1 + (mu_i/mu_j)^(1/2) (M_j/M_i)^(1/4)]^2 / ((4/sqrt 2) [1 + M_i/M_j]^(1/2))
 */
function asPublished(x: readonly number[], mu: readonly number[], M: readonly number[]): number {
  let sum = 0;
  x.forEach((own, i) => {
    let others = 0;
    x.forEach((other, j) => {
      if (j === i) return;
      const top = 1 + (mu[i]! / mu[j]!) ** 0.5 * (M[j]! / M[i]!) ** 0.25;
      others += (other * top ** 2) / ((4 / Math.SQRT2) * (1 + M[i]! / M[j]!) ** 0.5);
    });
    sum += mu[i]! / (1 + others / own);
  });
  return sum;
}

const mixture = fc.integer({ min: 2, max: 5 }).chain((n) =>
  fc.record({
    x: fc
      .array(fc.double({ min: 1e-6, max: 1, noNaN: true }), { minLength: n, maxLength: n })
      .map((weights) => weights.map((w) => w / weights.reduce((a, b) => a + b, 0))),
    // Hydrogen's to argon's, and beyond.
    mu: fc.array(fc.double({ min: 5e-6, max: 4e-5, noNaN: true }), { minLength: n, maxLength: n }),
    M: fc.array(fc.double({ min: 2e-3, max: 0.2, noNaN: true }), { minLength: n, maxLength: n }),
  }),
);

describe('the viscosity of a gas mixture', () => {
  it('is that of the worked example of carbon dioxide, oxygen and nitrogen in the textbook', () => {
    // Bird, Stewart & Lightfoot, Transport Phenomena, 2nd edition, example 1.4-2: 1714e-7 g/(cm s), given to four digits.
    const network = gases([1462e-8, 2031e-8, 1754e-8], [44.01e-3, 32e-3, 28.02e-3]);
    const mu = mixtureViscosity(network, Float64Array.of(0.133, 0.039, 0.828));
    // Half of the last digit given, and as much again for the factors phi, which the example rounds to three decimals.
    expect(Math.abs(mu - 1714e-8)).toBeLessThan(1e-8);
  });

  it("is Wilke's formula in its published form, for any gases and fractions", () => {
    fc.assert(
      fc.property(mixture, ({ x, mu, M }) => {
        const ours = mixtureViscosity(gases(mu, M), Float64Array.from(x));
        // Two orders of summation of at most 5 x 5 positive terms: some tens of roundings of 1.1e-16.
        expect(Math.abs(ours / asPublished(x, mu, M) - 1)).toBeLessThan(5e-15);
      }),
      { seed: 1950, numRuns: 300 },
    );
  });

  it('is that of the pure gas where only one is there', () => {
    const network = gases([18.4e-6, 19.8e-6, 14e-6], [28.97e-3, 4e-3, 138e-3]);
    [18.4e-6, 19.8e-6, 14e-6].forEach((pure, k) => {
      const x = new Float64Array(3);
      x[k] = 1;
      // phi_kk is 1 to rounding: 2^2/sqrt(16).
      expect(Math.abs(mixtureViscosity(network, x) / pure - 1)).toBeLessThan(1e-15);
    });
    expect(mixtureViscosity(gases([18.4e-6], [28.97e-3]), Float64Array.of(1))).toBe(18.4e-6);
  });

  it('tends to the pure gas as a trace goes to nothing, in proportion to the trace', () => {
    const network = gases([18.4e-6, 19.8e-6], [28.97e-3, 4e-3]);
    const departure = (trace: number): number =>
      mixtureViscosity(network, Float64Array.of(1 - trace, trace)) / 18.4e-6 - 1;
    // First order in the trace; the second order left out is a few times the trace, 1e-5.
    expect(Math.abs(departure(1e-5) / departure(1e-6) / 10 - 1)).toBeLessThan(1e-4);
  });

  it('does not change where one gas is named twice', () => {
    const split = mixtureViscosity(gases([17e-6, 17e-6, 9e-6], [28e-3, 28e-3, 2e-3]), Float64Array.of(0.2, 0.5, 0.3));
    const whole = mixtureViscosity(gases([17e-6, 9e-6], [28e-3, 2e-3]), Float64Array.of(0.7, 0.3));
    expect(Math.abs(split / whole - 1)).toBeLessThan(1e-15);
  });

  it('of argon and helium is above both, as it is when measured', () => {
    // The maximum in mixtures of light and heavy gases of like viscosity is known from measurement (from memory).
    const network = gases([22.6e-6, 19.8e-6], [39.95e-3, 4.0026e-3]);
    expect(mixtureViscosity(network, Float64Array.of(0.5, 0.5))).toBeGreaterThan(22.6e-6);
  });

  it('has the slopes of its own differences', () => {
    fc.assert(
      fc.property(mixture, ({ x, mu, M }) => {
        const network = gases(mu, M);
        const slopes = new Float64Array(x.length);
        mixtureViscositySlopes(network, Float64Array.from(x), slopes);
        x.forEach((own, l) => {
          // Step as a share of its own fraction: central differences err by (step)^2/6 f''' and 2e-16 mu/step.
          const at = (h: number): number => {
            const moved = Float64Array.from(x);
            moved[l] = own + h;
            return mixtureViscosity(network, moved);
          };
          const central = (h: number): number => (at(h) - at(-h)) / (2 * h);
          const h = 1e-3 * own;
          const coarse = central(2 * h);
          const fine = central(h);
          // The error of the fine one is a third of what the two differ by; twice that, and the rounding of five-term sums.
          const allowed = Math.abs(coarse - fine) + (2e-15 * Math.max(...mu)) / h;
          expect(Math.abs(slopes[l]! - fine)).toBeLessThan(allowed);
          // So that the measure cannot become blind: where the gas is more than a trace, it must see a ten-thousandth.
          if (own > 1e-3) expect(allowed).toBeLessThan(1e-4 * Math.max(...mu));
        });
      }),
      { seed: 517, numRuns: 200 },
    );
  });
});

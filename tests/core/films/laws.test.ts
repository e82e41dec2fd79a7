/** The laws of state against Gibbs' equation, against their formulas as printed, and against each other. */
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import {
  concentrationSlope,
  coverageAt,
  coverageOf,
  freeOf,
  limitingElasticity,
  type TensionLaw,
} from '../../../core/films/law.ts';
import { createLaw } from '../../../core/films/loading.ts';
import { family, lawOf, ROOM, RT, slopeOf } from './samples.ts';

const saturation = 5e-6;
const szyszkowski = 0.05;

/** ln of theta/(1-theta) from coverage 1e-12 to 1 - 1e-12; Volmer's concentration overflows long before, at exp(400). */
function rangeOf(name: string): number[] {
  const top = name === 'volmer' ? 6 : 27.6;
  return Array.from({ length: 200 }, (_, i) => -27.6 + ((top + 27.6) * i) / 199);
}

function pressureAtLog(law: TensionLaw, z: number): number {
  const x = Math.exp(z);
  return law.surfacePressure(coverageOf(law, x), freeOf(law, x));
}

function logConcentration(law: TensionLaw, z: number): number {
  const x = Math.exp(z);
  return Math.log(law.concentration(coverageOf(law, x), freeOf(law, x)));
}

describe.each(family)('the law of %s', (name, tension) => {
  const law = createLaw(tension, ROOM)!;
  const n = tension.ions!;

  it("obeys Gibbs' adsorption equation d Pi/d ln c = n R T Gamma over the whole range", () => {
    for (const z of rangeOf(name)) {
      const gamma = coverageOf(law, Math.exp(z)) * saturation;
      const left = slopeOf((at) => pressureAtLog(law, at), z, 1e-2);
      const logSlope = slopeOf((at) => logConcentration(law, at), z, 1e-2);
      // Five-point differences at 1e-2: truncation about 1e-9 of the terms that make up either side.
      expect(Math.abs(left - n * RT * gamma * logSlope)).toBeLessThan(1e-7 * n * RT * gamma * (1 + Math.abs(logSlope)));
    }
  });

  it('has for its limiting elasticity the slope of surface pressure against ln Gamma', () => {
    for (const z of rangeOf(name)) {
      const x = Math.exp(z);
      const theta = coverageOf(law, x);
      const free = freeOf(law, x);
      // d ln Gamma/d ln x = 1 - theta, or 1 without saturation.
      const byDifference = slopeOf((at) => pressureAtLog(law, at), z, 1e-2) / free;
      const scale = n * RT * saturation * (theta / free) * (1 + Math.abs(tension.attraction!));
      expect(Math.abs(limitingElasticity(law, theta, free) - byDifference)).toBeLessThan(1e-7 * scale * (1 + 1 / free));
    }
  });

  it('has for dc/dGamma the slope of its isotherm', () => {
    for (const theta of [1e-6, 1e-3, 0.1, 0.3, 0.5, 0.7, 0.9]) {
      const byDifference = slopeOf((at) => law.concentration(at), theta, 1e-3 * theta * (1 - theta) ** 2) / saturation;
      const scale = law.concentration(theta) / (theta * (1 - theta) ** 2 * saturation);
      // Truncation (1e-3)^4 and rounding 1e-16/1e-3, times a few for the exponential.
      expect(Math.abs(concentrationSlope(law, theta) - byDifference)).toBeLessThan(1e-10 * scale);
    }
  });

  it('starts from an empty face with dc/dGamma = c_s/Gamma_inf', () => {
    expect(concentrationSlope(law, 0)).toBe(szyszkowski / saturation);
    // Within the first-order term of the isotherm at this coverage.
    expect(concentrationSlope(law, 1e-9) / (szyszkowski / saturation)).toBeCloseTo(1, 6);
  });

  it('gives back the coverage that a concentration came from, outside two phases', () => {
    for (const z of rangeOf(name)) {
      const x = Math.exp(z);
      const theta = coverageOf(law, x);
      if (law.twoPhase !== null && theta >= law.twoPhase.low && theta <= law.twoPhase.high) continue;
      const back = law.crowdingAt(law.concentration(theta, freeOf(law, x)));
      // The logarithm carries 30 * 1e-16; at the critical point the isotherm's slope vanishes and digits with it.
      const tolerance = name === 'frumkin, alpha 2' && Math.abs(z) < 1 ? 1e-6 : 1e-12;
      expect(Math.abs(back / x - 1)).toBeLessThan(tolerance);
    }
  });

  it('has no adsorption from pure liquid', () => {
    expect(coverageAt(law, 0)).toBe(0);
    expect(law.surfacePressure(0)).toBeCloseTo(0, 300);
  });
});

describe('the laws as printed', () => {
  const theta = fc.double({ min: 1e-6, max: 0.999, noNaN: true });
  const alpha = fc.double({ min: -5, max: 6, noNaN: true });

  it("Frumkin's reads as physics.md section 3 has it", () => {
    fc.assert(
      fc.property(theta, alpha, (t, a) => {
        const law = lawOf('frumkin', a);
        const scale = RT * saturation;
        const c = szyszkowski * (t / (1 - t)) * Math.exp(-2 * a * t);
        // Rounding only, of terms of the size given.
        expect(Math.abs(law.concentration(t) / c - 1)).toBeLessThan(1e-14);
        expect(Math.abs(law.surfacePressure(t) + scale * (Math.log(1 - t) + a * t * t))).toBeLessThan(
          1e-14 * scale * 10,
        );
        expect(Math.abs(limitingElasticity(law, t) - scale * t * (1 / (1 - t) - 2 * a * t))).toBeLessThan(
          (1e-14 * scale * 10) / (1 - t),
        );
        const slope = (c / saturation) * (1 / (t * (1 - t)) - 2 * a);
        expect(Math.abs(concentrationSlope(law, t) - slope)).toBeLessThan(
          (1e-14 * (c / saturation) * 20) / (t * (1 - t)),
        );
      }),
    );
  });

  it("Volmer's elasticity is n R T Gamma_inf theta/(1-theta)^2", () => {
    fc.assert(
      fc.property(theta, (t) => {
        expect(limitingElasticity(lawOf('volmer'), t) / ((RT * saturation * t) / (1 - t) ** 2)).toBeCloseTo(1, 13);
      }),
    );
  });

  it("Henry's elasticity, surface pressure and n R T Gamma are one number", () => {
    const law = lawOf('henry', 0, 2);
    const expected = 2 * RT * saturation * 1.7; // coverage may pass 1
    expect(law.surfacePressure(1.7)).toBeCloseTo(expected, 15);
    expect(limitingElasticity(law, 1.7)).toBeCloseTo(expected, 15);
  });

  it("Frumkin's without attraction is Langmuir's and Szyszkowski's", () => {
    fc.assert(
      fc.property(theta, (t) => {
        const frumkin = lawOf('frumkin', 0);
        const langmuir = lawOf('langmuir');
        expect(frumkin.surfacePressure(t)).toBe(langmuir.surfacePressure(t));
        expect(frumkin.concentration(t)).toBe(langmuir.concentration(t));
        expect(limitingElasticity(frumkin, t)).toBe(limitingElasticity(langmuir, t));
      }),
    );
  });

  it("Szyszkowski's tension against concentration is gamma_0 - n R T Gamma_inf ln(1 + c/c_s)", () => {
    const law = lawOf('langmuir', 0, 2);
    for (const c of [1e-4, 0.01, 0.05, 1, 30]) {
      expect(law.surfacePressure(coverageAt(law, c))).toBeCloseTo(
        2 * RT * saturation * Math.log(1 + c / szyszkowski),
        14,
      );
    }
  });

  it('every law is the ideal two-dimensional gas of Henry where the face is nearly empty', () => {
    const t = 1e-7;
    for (const [, tension] of family) {
      const law = createLaw(tension, ROOM)!;
      // First correction (1/2 - alpha) theta, at most 4 theta here.
      expect(Math.abs(law.surfacePressure(t) / (tension.ions! * RT * saturation * t) - 1)).toBeLessThan(5 * t);
      expect(Math.abs(law.concentration(t) / (szyszkowski * t) - 1)).toBeLessThan(10 * t);
    }
  });

  it('an ionic surfactant without salt presses and resists twice as hard at one adsorption', () => {
    for (const name of ['henry', 'langmuir', 'volmer'] as const) {
      expect(lawOf(name, 0, 2).surfacePressure(0.6)).toBe(2 * lawOf(name).surfacePressure(0.6));
      expect(limitingElasticity(lawOf(name, 0, 2), 0.6)).toBe(2 * limitingElasticity(lawOf(name), 0.6));
      expect(lawOf(name, 0, 2).concentration(0.6)).toBe(lawOf(name).concentration(0.6));
    }
  });
});

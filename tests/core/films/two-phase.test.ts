/** Two surface phases: where they begin, what they share, and what a film does that crosses them. */
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { createFilm } from '../../../core/films/create.ts';
import { limitingElasticity } from '../../../core/films/law.ts';
import { coexistingCoverages, equilibriumConcentration, equilibriumPressure } from '../../../core/films/two-phase.ts';
import { lawOf, ROOM, RT, stateOf, tensionOf } from './samples.ts';

describe('coexistence', () => {
  const attraction = fc.double({ min: 2.0001, max: 40, noNaN: true });

  it('begins above alpha = 2', () => {
    expect(coexistingCoverages(2)).toBeNull();
    expect(coexistingCoverages(-3)).toBeNull();
    expect(coexistingCoverages(2.000001)).not.toBeNull();
  });

  it('begins at half coverage, opening as the square root of 3 (alpha-2)/2', () => {
    // (theta_hi - theta_lo)/2 = w/4 and w^2/12 = (alpha-2)/alpha + higher order; the next term is of relative order alpha-2.
    const excess = 1e-6;
    const { low, high } = coexistingCoverages(2 + excess)!;
    expect((high - low) / Math.sqrt((3 * excess) / 2)).toBeCloseTo(1, 5);
    expect(low + high).toBeCloseTo(1, 15);
  });

  it('solves ln[theta/(1-theta)] = alpha (2 theta - 1)', () => {
    fc.assert(
      fc.property(attraction, (alpha) => {
        const { low } = coexistingCoverages(alpha)!;
        // Rounding of terms of size alpha.
        expect(Math.abs(Math.log(low / (1 - low)) - alpha * (2 * low - 1))).toBeLessThan(1e-14 * alpha);
      }),
    );
  });

  it('is of phases at equal surface pressure, equal concentration and positive elasticity', () => {
    fc.assert(
      fc.property(fc.double({ min: 2.01, max: 12, noNaN: true }), (alpha) => {
        const law = lawOf('frumkin', alpha);
        const { low, high, concentration, surfacePressure } = law.twoPhase!;
        const scale = RT * 5e-6;
        // theta_hi is 1 - theta_lo to rounding; 1 - theta_hi has lost digits in proportion to 1/theta_lo.
        const lost = (4e-16 * alpha) / low;
        expect(Math.abs(law.surfacePressure(high, low) - surfacePressure)).toBeLessThan(1e-14 * alpha * scale);
        expect(Math.abs(law.concentration(low) / concentration - 1)).toBeLessThan(1e-13);
        expect(Math.abs(law.concentration(high, low) / concentration - 1)).toBeLessThan(1e-13);
        expect(Math.abs(law.concentration(high) / concentration - 1)).toBeLessThan(1e-13 + lost);
        expect(limitingElasticity(law, low)).toBeGreaterThan(0);
        expect(limitingElasticity(law, high, low)).toBeGreaterThan(0);
      }),
    );
  });

  it('obeys the equal-area rule of Maxwell: the loop of Pi against ln c encloses nothing', () => {
    // Integral of (Pi - Pi_plateau) d(1/Gamma) over the loop is zero; midpoint rule, error of the order of its step squared.
    const law = lawOf('frumkin', 3);
    const { low, high, surfacePressure } = law.twoPhase!;
    const steps = 20000;
    let area = 0;
    let size = 0;
    for (let i = 0; i < steps; i++) {
      const theta = low + ((high - low) * (i + 0.5)) / steps;
      const piece = ((law.surfacePressure(theta) - surfacePressure) / (theta * theta)) * ((high - low) / steps);
      area += piece;
      size += Math.abs(piece);
    }
    expect(Math.abs(area)).toBeLessThan(1e-6 * size);
  });

  it('holds surface pressure and concentration on the plateau between the phases', () => {
    const law = lawOf('frumkin', 3);
    const { low, high, concentration, surfacePressure } = law.twoPhase!;
    for (const share of [0.001, 0.5, 0.999]) {
      const theta = low + share * (high - low);
      expect(equilibriumPressure(law, theta)).toBe(surfacePressure);
      expect(equilibriumConcentration(law, theta)).toBe(concentration);
    }
    expect(equilibriumPressure(law, 0.5 * low)).toBe(law.surfacePressure(0.5 * low));
    expect(equilibriumConcentration(law, 0.5 * low)).toBe(law.concentration(0.5 * low));
  });

  it('takes the dilute phase at exactly the plateau concentration and the dense one just above it', () => {
    const law = lawOf('frumkin', 4);
    const { low, high, concentration } = law.twoPhase!;
    expect(law.crowdingAt(concentration) / (low / high)).toBeCloseTo(1, 12);
    expect(law.crowdingAt(concentration * (1 + 1e-12)) / (high / low)).toBeCloseTo(1, 9);
  });
});

describe.each([
  ['insoluble', { kind: 'none' }],
  ['closed', { kind: 'closed-film', thickness: 1e-6 }],
] as const)('an %s film through two phases', (_, supply) => {
  const film = createFilm(
    { tension: tensionOf('frumkin', 4), loading: { coverage: 0.5 }, supply, micelles: null },
    ROOM,
  );
  const law = lawOf('frumkin', 4);
  const { low, high } = law.twoPhase!;
  const { surfactant, liquid } = film.load(1e-4);
  const plateau = law.clean - law.twoPhase!.surfacePressure;

  /** The area at which the film leaves the plateau, by halving: towards dense (small area) or dilute (large). */
  function end(from: number, to: number): number {
    let inside = from;
    let outside = to;
    for (let pass = 0; pass < 200; pass++) {
      const middle = 0.5 * (inside + outside);
      if (middle === inside || middle === outside) break;
      if (stateOf(film, surfactant, liquid, middle).twoPhase > 0) inside = middle;
      else outside = middle;
    }
    return inside;
  }

  it('is loaded in the gap, at the tension of the plateau, and gives no resistance there', () => {
    const state = stateOf(film, surfactant, liquid, 1e-4);
    expect(state.tension).toBe(plateau);
    expect(state.elasticity).toBe(0);
    expect(state.coverage).toBeCloseTo(0.5, 13);
    expect(state.twoPhase).toBeGreaterThan(0);
  });

  it('changes tension continuously and elasticity by a jump at both ends of the plateau', () => {
    for (const [far, ending] of [
      [5.01e-5, high],
      [1e-2, low],
    ] as const) {
      const edge = end(1e-4, far);
      const nudge = edge > 1e-4 ? 1 : -1;
      const outside = stateOf(film, surfactant, liquid, edge * (1 + nudge * 1e-9));
      const inside = stateOf(film, surfactant, liquid, edge * (1 - nudge * 1e-9));
      expect(inside.coverage / ending).toBeCloseTo(1, 7);
      expect(inside.twoPhase).toBeGreaterThan(0);
      expect(outside.twoPhase).toBeLessThan(0);
      expect(Math.abs(inside.twoPhase)).toBeLessThan(1e-7);
      expect(Math.abs(outside.twoPhase)).toBeLessThan(1e-7);
      expect(inside.tension).toBe(plateau);
      // A change of 1e-9 in area moves tension by 1e-9 of the elasticity, which is below 1 N/m here.
      expect(Math.abs(outside.tension - plateau)).toBeLessThan(2e-9);
      expect(inside.elasticity).toBe(0);
      expect(outside.elasticity).toBeGreaterThan(1e-6);
    }
  });
});

it('a film that must pass two phases keeps elasticity small but positive just below the critical attraction', () => {
  const film = createFilm(
    { tension: tensionOf('frumkin', 1.999), loading: { coverage: 0.5 }, supply: { kind: 'none' }, micelles: null },
    ROOM,
  );
  const { surfactant } = film.load(1e-4);
  const state = stateOf(film, surfactant, 0, 1e-4);
  // eps_0 = R T Gamma_inf theta [1/(1-theta) - 2 alpha theta] = R T Gamma_inf (2 - alpha)/2 at half coverage.
  expect(state.elasticity).toBeCloseTo(RT * 5e-6 * 0.0005, 15);
  expect(state.twoPhase).toBe(-1);
});

/** A film that shares its surfactant with its own liquid: the balance, the elasticity, the limits and the micelles. */
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { createFilm } from '../../../core/films/create.ts';
import { concentrationSlope, coverageAt, limitingElasticity } from '../../../core/films/law.ts';
import { createLaw } from '../../../core/films/loading.ts';
import type { FilmRecipe, TensionRecipe } from '../../../core/films/recipe.ts';
import { anyTension, decades, family, lawOf, ROOM, slopeOf, stateOf, tensionOf } from './samples.ts';

const area = 1e-4;

function closed(tension: TensionRecipe, thickness: number, loading: FilmRecipe['loading'], cmc?: number): FilmRecipe {
  return { tension, loading, supply: { kind: 'closed-film', thickness }, micelles: cmc === undefined ? null : { cmc } };
}

/** A film that may be at any state: the loading is small so that no recipe is at fault, the surfactant is chosen apart. */
function anyFilm(tension: TensionRecipe, cmc?: number) {
  return createFilm(closed(tension, 1e-6, { coverage: 0 }, cmc), ROOM);
}

/**
 * The random range: N from nearly nothing to hundreds of times what the face takes, delta over nine decades. Volmer's law
 * is kept below exp(60).
 */
const anyFace = fc.record({
  tension: anyTension,
  filling: decades(-12, 2.5),
  delta: decades(-10, -1),
  stretch: decades(-2, 2),
});

describe('the surfactant balance A Gamma + V c = N', () => {
  it('closes to 1e-14 from what the film reports, for any recipe, area and amount', () => {
    fc.assert(
      fc.property(
        anyFace,
        fc.option(decades(-4, 2), { nil: undefined }),
        ({ tension, filling, delta, stretch }, relativeCmc) => {
          const cmc = relativeCmc === undefined ? undefined : relativeCmc * tension.szyszkowski!;
          const film = anyFilm(tension, cmc);
          const surfactant = filling * tension.saturation! * area;
          const liquid = delta * area;
          const state = stateOf(film, surfactant, liquid, area * stretch);
          if (!(state.coverage < 1 || tension.law === 'henry')) return; // rounded to 1: tested in its own right below
          const monomer = area * stretch * tension.saturation! * state.coverage + liquid * state.concentration;
          if (state.micelles > 0) {
            // Above the cmc the rest is micellar.
            expect(monomer).toBeLessThanOrEqual(surfactant * (1 + 1e-14));
            expect(Math.abs(surfactant / monomer - 1 - state.micelles)).toBeLessThan(1e-14 * (1 + state.micelles));
          } else {
            expect(Math.abs(monomer / surfactant - 1)).toBeLessThan(1e-14);
          }
        },
      ),
      { numRuns: 20000 },
    );
  });

  it('is met by a state of the law itself: the concentration reported is that of the coverage reported', () => {
    fc.assert(
      fc.property(anyFace, ({ tension, filling, delta, stretch }) => {
        const law = createLaw(tension, ROOM)!;
        const state = stateOf(anyFilm(tension), filling * tension.saturation! * area, delta * area, area * stretch);
        if (state.twoPhase > 0) {
          expect(state.concentration).toBe(law.twoPhase!.concentration);
          return;
        }
        // 1 - theta has lost digits in proportion to 1/(1-theta); Volmer's exponent magnifies them once more.
        if (tension.law !== 'henry' && state.coverage > 0.99) return;
        expect(Math.abs(state.concentration / law.concentration(state.coverage) - 1)).toBeLessThan(1e-11);
        expect(state.tension).toBeCloseTo(law.clean - law.surfacePressure(state.coverage), 12);
      }),
      { numRuns: 5000 },
    );
  });

  it('is solved where coverage is so near 1 that only the liquid tells', () => {
    // Langmuir: x = c/c_s with A Gamma_inf x/(1+x) + V c_s x = N, a quadratic with the positive root below.
    const film = anyFilm(tensionOf('langmuir'));
    for (const dissolved of [1e2, 1e6, 1e12]) {
      const full = area * 5e-6;
      const liquid = 1e-12;
      const surfactant = full + liquid * 0.05 * dissolved;
      const q = full + liquid * 0.05 - surfactant;
      const x = (-q + Math.sqrt(q * q + 4 * liquid * 0.05 * surfactant)) / (2 * liquid * 0.05);
      const state = stateOf(film, surfactant, liquid, area);
      // The quadratic loses what N - A Gamma_inf has lost in N.
      const lost = 1e-14 + (1e-15 * surfactant) / (liquid * 0.05 * dissolved);
      expect(Math.abs(state.concentration / (0.05 * x) - 1)).toBeLessThan(lost);
    }
  });

  it("of Henry's law is the closed form N/(A Gamma_inf + V c_s)", () => {
    const film = anyFilm(tensionOf('henry'));
    for (const surfactant of [1e-20, 1e-10, 1e-6]) {
      const state = stateOf(film, surfactant, 1e-10, area);
      expect(state.coverage / (surfactant / (area * 5e-6 + 1e-10 * 0.05))).toBeCloseTo(1, 14);
    }
  });

  it('has no solution for a face without liquid beyond saturation', () => {
    const state = stateOf(anyFilm(tensionOf('langmuir')), 1.1 * area * 5e-6, 0, area);
    expect(state.tension).toBeNaN();
    expect(state.coverage).toBeNaN();
  });

  it('of an empty film is the clean liquid', () => {
    for (const [, tension] of family) {
      const state = stateOf(anyFilm(tension), 0, 1e-10, area);
      expect([state.tension, state.elasticity, state.coverage, state.concentration]).toEqual([0.072, 0, 0, 0]);
    }
  });
});

describe('the solved state', () => {
  it('does not depend on where the search started', () => {
    const anyGuess = fc.oneof(
      fc.constantFrom(NaN, 0, 1, -1, 1e-300, Infinity, 2, 1 - 1e-16),
      fc.double({ min: 0, max: 1, noNaN: true }),
      decades(-15, 0).map((free) => 1 - free),
    );
    fc.assert(
      fc.property(anyFace, anyGuess, ({ tension, filling, delta, stretch }, guess) => {
        const film = anyFilm(tension);
        const surfactant = filling * tension.saturation! * area;
        const free = stateOf(film, surfactant, delta * area, area * stretch);
        const guided = stateOf(film, surfactant, delta * area, area * stretch, guess);
        const scale = tension.clean + Math.abs(free.tension);
        expect(Math.abs(guided.tension - free.tension)).toBeLessThan(1e-13 * scale);
        expect(Math.abs(guided.coverage - free.coverage)).toBeLessThanOrEqual(1e-13 * free.coverage);
        expect(Math.abs(guided.concentration - free.concentration)).toBeLessThanOrEqual(1e-12 * free.concentration);
        expect(Math.abs(guided.elasticity - free.elasticity)).toBeLessThanOrEqual(
          1e-12 * scale + 1e-12 * free.elasticity,
        );
      }),
      { numRuns: 10000 },
    );
  });

  it('is found at the critical attraction too, where the isotherm is flat at half coverage', () => {
    const film = anyFilm(tensionOf('frumkin', 2));
    const law = lawOf('frumkin', 2);
    const liquid = 1e-4; // so much that the liquid alone decides
    const surfactant = area * 5e-6 * 0.5 + liquid * law.concentration(0.5);
    for (const guess of [NaN, 0.01, 0.5, 0.99]) {
      const state = stateOf(film, surfactant, liquid, area, guess);
      expect(state.tension).toBeCloseTo(law.clean - law.surfacePressure(0.5), 14);
      // The cube root of rounding: c - c_critical goes as the third power of theta - 1/2.
      expect(Math.abs(state.coverage - 0.5)).toBeLessThan(1e-4);
    }
  });
});

describe.each(family)('a closed film of %s', (_, tension) => {
  const law = createLaw(tension, ROOM)!;
  // 0.3 lies in the gap of two phases, 0.01 and 0.99 on either side of it.
  const coverages = law.twoPhase === null ? [0.01, 0.3, 0.6, 0.9] : [0.01, 0.02, 0.3, 0.99];

  it('has for its elasticity the slope of tension against ln A', () => {
    for (const coverage of coverages) {
      for (const thickness of [1e-9, 1e-7, 1e-6, 1e-4]) {
        const c = law.twoPhase !== null && coverage === 0.3 ? law.twoPhase.concentration : law.concentration(coverage);
        const liquid = 0.5 * thickness * area;
        const surfactant = coverage * 5e-6 * area + liquid * c;
        const film = anyFilm(tension);
        const step = 1e-3 * (1 - coverage);
        const slope = slopeOf((at) => stateOf(film, surfactant, liquid, area * Math.exp(at)).tension, 0, step);
        const { elasticity } = stateOf(film, surfactant, liquid, area);
        // Truncation (1e-3)^4 of eps_0, rounding of tension 1e-16 over the step.
        expect(Math.abs(elasticity - slope)).toBeLessThan(
          1e-9 * Math.abs(slope) + 1e-10 * limitingElasticity(law, coverage) * Math.sign(slope) + 1e-12,
        );
      }
    }
  });

  it("has Gibbs' elasticity eps_0/(1 + delta dc/dGamma)", () => {
    for (const coverage of coverages) {
      if (law.twoPhase !== null && coverage === 0.3) continue;
      const film = createFilm(closed({ ...tension, clean: 1 }, 1e-6, { coverage }), ROOM);
      const { surfactant, liquid } = film.load(area);
      const { elasticity } = stateOf(film, surfactant, liquid, area);
      const expected = limitingElasticity(law, coverage) / (1 + 0.5e-6 * concentrationSlope(law, coverage));
      // Coverage is recovered to rounding from N; steepest here at 0.99 and alpha 4, 1/(1-theta)^2.
      expect(Math.abs(elasticity / expected - 1)).toBeLessThan(1e-11);
    }
  });

  it('is loaded at the coverage asked for', () => {
    for (const coverage of coverages) {
      const film = createFilm(closed({ ...tension, clean: 1 }, 1e-6, { coverage }), ROOM);
      const { surfactant, liquid } = film.load(area);
      expect(liquid).toBeCloseTo(0.5e-6 * area, 25);
      // N carries a rounding of whichever share is larger; the face's is at least 1e-3 of it here.
      expect(stateOf(film, surfactant, liquid, area).coverage / coverage).toBeCloseTo(1, 11);
    }
  });

  it('becomes the insoluble film as its liquid vanishes', () => {
    const insoluble = createFilm(
      { tension, loading: { coverage: 0.3 }, supply: { kind: 'none' }, micelles: null },
      ROOM,
    );
    const film = anyFilm(tension);
    const { surfactant } = insoluble.load(area);
    for (const stretch of [0.5, 1, 4]) {
      const thin = stateOf(film, surfactant, 1e-22, area * stretch);
      const bare = stateOf(insoluble, surfactant, 0, area * stretch);
      // V c/N is below 1e-12 here.
      expect(Math.abs(thin.tension - bare.tension)).toBeLessThan(1e-11);
      expect(Math.abs(thin.elasticity - bare.elasticity)).toBeLessThan(1e-10);
    }
  });

  it('loses its elasticity as one over delta when its liquid grows without bound', () => {
    const coverage = coverages[3]!;
    const elasticityAt = (delta: number): number => {
      const surfactant = area * (coverage * 5e-6 + delta * law.concentration(coverage));
      return stateOf(anyFilm(tension), surfactant, delta * area, area).elasticity;
    };
    // eps delta -> eps_0/(dc/dGamma), reached within 1/(delta dc/dGamma).
    const limit = limitingElasticity(law, coverage) / concentrationSlope(law, coverage);
    for (const delta of [1e3, 1e5]) {
      expect(Math.abs((elasticityAt(delta) * delta) / limit - 1)).toBeLessThan(1e-5);
    }
    expect(elasticityAt(1e5)).toBeLessThan(1e-8);
  });
});

describe('beside the ends of the plateau and the cmc', () => {
  // alpha 4: plateau at c_s exp(-4); the cmc at twice that, on the dense branch.
  const law = lawOf('frumkin', 4);
  const cmc = 2 * law.twoPhase!.concentration;
  const film = anyFilm(tensionOf('frumkin', 4), cmc);
  const liquid = 1e-10;
  const surfactant = area * 5e-6 * 0.5 + liquid * law.twoPhase!.concentration;
  const dissolved = (c: number): number => surfactant - liquid * c;
  /** Areas at which the film changes kind: N = A Gamma + V c at each corner. */
  const corners = {
    'dilute end of the plateau': dissolved(law.twoPhase!.concentration) / (5e-6 * law.twoPhase!.low),
    'dense end of the plateau': dissolved(law.twoPhase!.concentration) / (5e-6 * law.twoPhase!.high),
    'critical micelle concentration': dissolved(cmc) / (5e-6 * coverageAt(law, cmc)),
  };

  it.each(Object.entries(corners))('tension is continuous at the %s', (_, corner) => {
    const below = stateOf(film, surfactant, liquid, corner * (1 - 1e-12));
    const above = stateOf(film, surfactant, liquid, corner * (1 + 1e-12));
    // 2e-12 of an elasticity below 1 N/m.
    expect(Math.abs(above.tension - below.tension)).toBeLessThan(2e-12);
    expect(Math.abs(above.coverage - below.coverage)).toBeLessThan(1e-11);
    expect(above.elasticity === 0).not.toBe(below.elasticity === 0);
    expect(Math.sign(above.twoPhase * above.micelles)).not.toBe(Math.sign(below.twoPhase * below.micelles));
  });

  it.each(Object.entries(corners))('elasticity is the slope of tension on both sides of the %s', (_, corner) => {
    const step = 1e-5;
    for (const side of [-1, 1]) {
      const start = Math.log(corner) + side * 2.01 * step;
      const slope = slopeOf((at) => stateOf(film, surfactant, liquid, Math.exp(at)).tension, start, step);
      // Rounding of tension over the step: 1e-17/1e-5.
      expect(Math.abs(stateOf(film, surfactant, liquid, Math.exp(start)).elasticity - slope)).toBeLessThan(1e-9);
    }
  });

  it('indicators cross zero with a finite slope', () => {
    const at = (corner: number, nudge: number) => stateOf(film, surfactant, liquid, corner * (1 + nudge));
    const cmcCorner = corners['critical micelle concentration'];
    expect(at(cmcCorner, -1e-6).micelles).toBeGreaterThan(1e-7);
    expect(at(cmcCorner, -1e-6).micelles).toBeLessThan(1e-5);
    expect(at(cmcCorner, 1e-6).micelles).toBeLessThan(-1e-7);
    expect(at(cmcCorner, 1e-6).micelles).toBeGreaterThan(-1e-5);
  });

  it('tension rises with area everywhere, whatever happens on the way', () => {
    fc.assert(
      fc.property(
        anyTension,
        decades(-3, 1.5),
        decades(-9, -4),
        decades(-3, 1),
        (tension, filling, delta, relativeCmc) => {
          const any = anyFilm(tension, relativeCmc * tension.szyszkowski!);
          let before = -Infinity;
          for (let k = 0; k <= 60; k++) {
            const state = stateOf(any, filling * 5e-6 * area, delta * area, area * 10 ** (-1 + k / 20));
            // Rounding of tension.
            expect(state.tension).toBeGreaterThanOrEqual(before - 1e-14 * (1 + Math.abs(state.tension)));
            expect(state.elasticity).toBeGreaterThanOrEqual(0);
            before = state.tension;
          }
        },
      ),
    );
  });
});

describe('micelles', () => {
  it('pin monomer, coverage and tension, and take the elasticity', () => {
    const film = createFilm(closed(tensionOf('langmuir'), 1e-6, { concentration: 5 }, 0.2), ROOM);
    const { surfactant, liquid } = film.load(area);
    // theta = 4/5 at c/c_s = 4; N = A Gamma + V c_total
    expect(surfactant).toBeCloseTo(area * 4e-6 + 0.5e-6 * area * 5, 22);
    for (const stretch of [0.5, 1, 1.4]) {
      const state = stateOf(film, surfactant, liquid, area * stretch);
      expect(state.concentration).toBe(0.2);
      expect(state.coverage).toBeCloseTo(0.8, 14);
      expect(state.elasticity).toBe(0);
      expect(state.micelles).toBeGreaterThan(0);
    }
  });

  it('are spent when the film is stretched far enough, and then it resists', () => {
    const film = createFilm(closed(tensionOf('langmuir'), 1e-6, { concentration: 5 }, 0.2), ROOM);
    const { surfactant, liquid } = film.load(area);
    const state = stateOf(film, surfactant, liquid, area * 2);
    expect(state.micelles).toBeLessThan(0);
    expect(state.concentration).toBeLessThan(0.2);
    expect(state.elasticity).toBeGreaterThan(0.001);
  });

  it('at or below the plateau concentration come before two phases, which such a film never reaches', () => {
    const law = lawOf('frumkin', 4);
    const { concentration, low } = law.twoPhase!;
    for (const cmc of [0.3 * concentration, concentration]) {
      const film = createFilm(closed(tensionOf('frumkin', 4), 1e-6, { concentration: 1 }, cmc), ROOM);
      const { surfactant, liquid } = film.load(area);
      const state = stateOf(film, surfactant, liquid, area);
      expect(state.concentration).toBe(cmc);
      expect(state.coverage).toBeLessThanOrEqual(low * (1 + 1e-12));
      for (let k = 0; k < 200; k++) {
        expect(stateOf(film, surfactant, liquid, area * 10 ** (-2 + k / 40)).twoPhase).toBeLessThanOrEqual(1e-12);
      }
    }
  });

  it('above the plateau concentration come after two phases and the dense phase', () => {
    const law = lawOf('frumkin', 4);
    const film = anyFilm(tensionOf('frumkin', 4), 2 * law.twoPhase!.concentration);
    const kinds: string[] = [];
    for (let k = 0; k <= 4000; k++) {
      const state = stateOf(film, area * 5e-6 * 10 ** (-3 + k / 1000), 1e-10, area);
      const kind = state.micelles >= 0 ? 'micelles' : state.twoPhase > 0 ? 'two phases' : 'one phase';
      if (kinds.at(-1) !== kind) kinds.push(kind);
    }
    expect(kinds).toEqual(['one phase', 'two phases', 'one phase', 'micelles']);
  });
});

/** A film whose surfactant stays on its face, and the pure liquid beside it. */
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { createFilm } from '../../../core/films/create.ts';
import { createLaw } from '../../../core/films/loading.ts';
import { equilibriumPressure } from '../../../core/films/two-phase.ts';
import { anyTension, family, ROOM, RT, slopeOf, stateOf, tensionOf } from './samples.ts';

const area = 1e-4;

describe.each(family)('an insoluble film of %s', (_, tension) => {
  const film = createFilm({ tension, loading: { coverage: 0.3 }, supply: { kind: 'none' }, micelles: null }, ROOM);
  const { surfactant, liquid } = film.load(area);

  it('is loaded at the coverage asked for, without a bulk', () => {
    const state = stateOf(film, surfactant, liquid, area);
    expect(state.coverage).toBeCloseTo(0.3, 15);
    expect(liquid).toBe(0);
    expect(state.concentration).toBe(0);
    expect(state.micelles).toBe(-1);
  });

  it('keeps Gamma A while its area changes', () => {
    for (const stretch of [0.4, 0.9, 1.7, 30]) {
      expect(stateOf(film, surfactant, liquid, area * stretch).coverage).toBeCloseTo(0.3 / stretch, 14);
    }
  });

  it('has for its elasticity the slope of tension against ln A', () => {
    const law = createLaw(tension, ROOM)!;
    for (const coverage of [1e-4, 0.01, 0.06, 0.2, 0.45, 0.55, 0.8, 0.95, 0.99, 0.999]) {
      const stretch = Math.log(0.3 / coverage);
      const step = 1e-3 * (1 - coverage);
      const two = law.twoPhase;
      if (two !== null && [two.low, two.high].some((end) => Math.abs(Math.log(coverage / end)) < 3 * step)) continue;
      const slope = slopeOf((at) => stateOf(film, surfactant, liquid, area * Math.exp(at)).tension, stretch, step);
      const state = stateOf(film, surfactant, liquid, area * Math.exp(stretch));
      // Truncation (1e-3)^4; rounding of tension 1e-17/(1e-3 (1-theta)).
      expect(Math.abs(state.elasticity - slope)).toBeLessThan(
        1e-9 * (0.1 + Math.abs(slope)) + 1e-13 / (1 - coverage) ** 2,
      );
    }
  });
});

describe('an insoluble film', () => {
  it('in its fast form is the law as written: clean tension less the surface pressure', () => {
    fc.assert(
      fc.property(anyTension, fc.double({ min: 1e-9, max: 0.9999, noNaN: true }), (tension, coverage) => {
        const film = createFilm(
          { tension, loading: { coverage: 1e-9 }, supply: { kind: 'none' }, micelles: null },
          ROOM,
        );
        const law = createLaw(tension, ROOM)!;
        const state = stateOf(film, coverage * tension.saturation! * area, 0, area);
        const pressure = equilibriumPressure(law, coverage);
        // Coverage carries two roundings, magnified by 1/(1-theta)^2 at most.
        expect(Math.abs(state.tension - (tension.clean - pressure))).toBeLessThan(
          1e-15 + (1e-15 * law.pressureScale) / (1 - coverage) ** 2,
        );
      }),
    );
  });

  it('has at 0.9362 of saturation the tension 37.9 mN/m and the elasticity 182 mN/m', () => {
    // Two independent solvers' starting state of the cycle benchmark: gamma_0 72 mN/m, Gamma_inf 5 umol/m^2, given to 3 digits.
    const film = createFilm(
      { tension: tensionOf('langmuir'), loading: { coverage: 0.9362 }, supply: { kind: 'none' }, micelles: null },
      ROOM,
    );
    const state = stateOf(film, film.load(area).surfactant, 0, area);
    expect(state.tension).toBeCloseTo(0.0379, 4);
    expect(state.elasticity).toBeCloseTo(0.182, 3);
  });

  it('presses without bound towards its saturation area and has no state at it or below', () => {
    const film = createFilm(
      { tension: tensionOf('langmuir'), loading: { coverage: 0.5 }, supply: { kind: 'none' }, micelles: null },
      ROOM,
    );
    const { surfactant } = film.load(area);
    const saturationArea = surfactant / 5e-6;
    let before = 1;
    for (let k = 1; k <= 50; k++) {
      const { tension } = stateOf(film, surfactant, 0, saturationArea * (1 + 2 ** -k));
      expect(tension).toBeLessThan(before);
      before = tension;
    }
    // ln(2^-50) R T Gamma_inf = -0.43 N/m, of a difference that has 2 bits left
    expect(before).toBeCloseTo(0.072 + RT * 5e-6 * Math.log(2 ** -50), 2);
    expect(stateOf(film, surfactant, 0, saturationArea * 0.999).tension).toBeNaN();
    expect(stateOf(film, surfactant, 0, saturationArea * (1 - 1e-12)).elasticity).toBeNaN();
  });

  it("of Henry's law passes coverage 1 and goes on", () => {
    const film = createFilm(
      { tension: tensionOf('henry'), loading: { coverage: 1.2 }, supply: { kind: 'none' }, micelles: null },
      ROOM,
    );
    const { surfactant } = film.load(area);
    const state = stateOf(film, surfactant, 0, area / 2);
    expect(state.coverage).toBeCloseTo(2.4, 14);
    expect(state.tension).toBeCloseTo(0.072 - 2.4 * RT * 5e-6, 15);
  });

  it('without surfactant is as the clean liquid, without elasticity', () => {
    for (const [, tension] of family) {
      const film = createFilm({ tension, loading: { coverage: 0 }, supply: { kind: 'none' }, micelles: null }, ROOM);
      const state = stateOf(film, film.load(area).surfactant, 0, area);
      expect(state.tension).toBe(0.072);
      expect(state.elasticity).toBe(0);
    }
  });

  it('taken from a solution has the coverage of its monomer, which the cmc caps', () => {
    const loading = { concentration: 0.4 };
    const open = createFilm(
      { tension: tensionOf('langmuir'), loading, supply: { kind: 'none' }, micelles: null },
      ROOM,
    );
    const capped = createFilm(
      { tension: tensionOf('langmuir'), loading, supply: { kind: 'none' }, micelles: { cmc: 0.1 } },
      ROOM,
    );
    // theta = (c/c_s)/(1 + c/c_s): 8/9 and 2/3
    expect(stateOf(open, open.load(area).surfactant, 0, area).coverage).toBeCloseTo(8 / 9, 14);
    expect(stateOf(capped, capped.load(area).surfactant, 0, area).coverage).toBeCloseTo(2 / 3, 14);
  });
});

describe('a pure liquid', () => {
  const film = createFilm(
    { tension: { law: 'constant', clean: 0.072 }, loading: null, supply: { kind: 'none' }, micelles: null },
    ROOM,
  );

  it('keeps its tension at any area and has no elasticity', () => {
    expect(film.constantTension).toBe(true);
    expect(film.load(area)).toEqual({ surfactant: 0, liquid: 0 });
    for (const stretched of [1e-12, 1e-4, 1]) {
      const state = stateOf(film, 0, 0, stretched);
      expect(state).toEqual({
        tension: 0.072,
        elasticity: 0,
        coverage: NaN,
        concentration: 0,
        twoPhase: -1,
        micelles: -1,
      });
    }
  });

  it('may have a film of liquid all the same', () => {
    const thick = createFilm(
      {
        tension: { law: 'constant', clean: 0.072 },
        loading: null,
        supply: { kind: 'closed-film', thickness: 2e-6 },
        micelles: null,
      },
      ROOM,
    );
    expect(thick.load(area).liquid).toBe(1e-10);
    expect(thick.constantTension).toBe(true);
  });
});

/** Films against the world outside: values of theory and of the handbook, the source beside each. */
import { describe, expect, it } from 'vitest';
import { createFilm } from '../../core/films/create.ts';
import { coverageAt } from '../../core/films/law.ts';
import { createLaw } from '../../core/films/loading.ts';
import type { TensionRecipe } from '../../core/films/recipe.ts';
import { coexistingCoverages } from '../../core/films/two-phase.ts';
import { stateOf } from '../core/films/samples.ts';

const ROOM = 298.15; // K, 25 degC

describe('two surface phases of a regular solution', () => {
  // Regular solution with Maxwell's construction: the binodal of ln[theta/(1-theta)] = alpha(2 theta - 1), to the digits given.
  it.each([
    [3, 0.07072],
    [4, 0.02125],
    [4.7, 0.00988],
    [5, 0.00719],
  ])('alpha %d leaves %d in the dilute phase', (alpha, low) => {
    expect(coexistingCoverages(alpha)!.low).toBeCloseTo(low, 5);
  });

  it('appear at alpha 2 and half coverage', () => {
    expect(coexistingCoverages(2)).toBeNull();
    expect(coexistingCoverages(2 + 1e-10)!.low).toBeCloseTo(0.5, 4);
  });
});

describe('sodium dodecyl sulfate at 25 degC without salt', () => {
  // Langmuir-Szyszkowski with n = 2. Its two numbers are set on tensions from memory (handbook values of purified material):
  // 51.5 mN/m at 4 mmol/L and 38 to 40 mN/m at the cmc, 8.2 mmol/L; clean water 71.97 mN/m (IAPWS R1-76).
  const tension: TensionRecipe = { law: 'langmuir', clean: 0.07197, saturation: 6.6e-6, szyszkowski: 4.6, ions: 2 };
  const law = createLaw(tension, ROOM)!;
  const cmc = 8.2; // mol/m^3

  it('has a tension of 38 to 40 mN/m at its cmc and keeps it above', () => {
    for (const concentration of [8.2, 12, 50]) {
      const film = createFilm(
        { tension, loading: { concentration }, supply: { kind: 'closed-film', thickness: 1e-5 }, micelles: { cmc } },
        ROOM,
      );
      const { surfactant, liquid } = film.load(1e-4);
      const state = stateOf(film, surfactant, liquid, 1e-4);
      expect(state.tension).toBeGreaterThan(0.038);
      expect(state.tension).toBeLessThan(0.04);
    }
  });

  it('has the adsorption at its cmc that neutron reflection counts, which only the ionic factor 2 gives', () => {
    // From memory: 0.42 nm^2 a molecule, 3.9 to 4.0 umol/m^2, within 10 %. The tension slope with n = 1 would read 8.5.
    const adsorbed = coverageAt(law, cmc) * 6.6e-6;
    expect(adsorbed).toBeGreaterThan(3.95e-6 * 0.9);
    expect(adsorbed).toBeLessThan(3.95e-6 * 1.1);
  });

  it('has at 2 mmol/L, which was not used, a tension of about 62 mN/m', () => {
    // From memory, and within the 3 mN/m by which a law of two numbers misses dilute ionic solutions.
    expect(Math.abs(0.07197 - law.surfacePressure(coverageAt(law, 2)) - 0.062)).toBeLessThan(0.003);
  });
});

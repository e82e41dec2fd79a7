/**
 * Films and laws that the tests of this room share: ordinary surfactants in SI, and generators of random ones.
 */
import fc from 'fast-check';
import { createLaw } from '../../../core/films/loading.ts';
import { FILM, FILM_SIZE, type Film } from '../../../core/films/film.ts';
import type { TensionLaw } from '../../../core/films/law.ts';
import type { TensionRecipe } from '../../../core/films/recipe.ts';
import type { TensionLawName } from '../../../core/films/register.ts';

export const ROOM = 298.15; // K
export const RT = 8.314462618 * ROOM; // J/mol, CODATA 2018

export type SurfactantLawName = Exclude<TensionLawName, 'constant'>;

/** A recipe's tension with ordinary numbers, or with those given. */
export function tensionOf(law: SurfactantLawName, attraction = 0, ions = 1): TensionRecipe {
  return { law, clean: 0.072, saturation: 5e-6, szyszkowski: 0.05, attraction, ions };
}

export function lawOf(law: SurfactantLawName, attraction = 0, ions = 1): TensionLaw {
  return createLaw(tensionOf(law, attraction, ions), ROOM)!;
}

/** The whole family: every law, Frumkin's with repulsion, at the critical point and with two phases, one ionic. */
export const family: readonly (readonly [string, TensionRecipe])[] = [
  ['henry', tensionOf('henry')],
  ['langmuir', tensionOf('langmuir')],
  ['langmuir, ionic', tensionOf('langmuir', 0, 2)],
  ['frumkin, alpha -2', tensionOf('frumkin', -2)],
  ['frumkin, alpha 1.5', tensionOf('frumkin', 1.5)],
  ['frumkin, alpha 1.5, ionic', tensionOf('frumkin', 1.5, 2)],
  ['frumkin, alpha 2', tensionOf('frumkin', 2)],
  ['frumkin, alpha 4', tensionOf('frumkin', 4)],
  ['volmer', tensionOf('volmer')],
];

/** Random tension recipes over the range of real surfactants and well past it, each law equally often. */
export const anyTension: fc.Arbitrary<TensionRecipe> = fc
  .record({
    law: fc.constantFrom<SurfactantLawName>('henry', 'langmuir', 'frumkin', 'volmer'),
    clean: fc.double({ min: 0.02, max: 0.08, noNaN: true }),
    saturation: decades(-6.5, -5),
    szyszkowski: decades(-6, 3),
    // Around 2 the two phases merge and everything but tension is ill-conditioned; those have tests of their own.
    attraction: fc.oneof(fc.double({ min: -4, max: 1.8, noNaN: true }), fc.double({ min: 2.2, max: 8, noNaN: true })),
    ions: fc.constantFrom(1, 2),
  })
  .map((tension) => (tension.law === 'frumkin' ? tension : { ...tension, attraction: 0 }));

/** A number between 10^low and 10^high, even in its logarithm. */
export function decades(low: number, high: number): fc.Arbitrary<number> {
  return fc.double({ min: low, max: high, noNaN: true }).map((exponent) => 10 ** exponent);
}

/** The state of a face as a record. */
export interface FaceState {
  readonly tension: number;
  readonly elasticity: number;
  readonly coverage: number;
  readonly concentration: number;
  readonly twoPhase: number;
  readonly micelles: number;
}

export function stateOf(film: Film, surfactant: number, liquid: number, area: number, guess = NaN): FaceState {
  const out = new Float64Array(FILM_SIZE);
  film.evaluate(surfactant, liquid, area, guess, out);
  return {
    tension: out[FILM.tension]!,
    elasticity: out[FILM.elasticity]!,
    coverage: out[FILM.coverage]!,
    concentration: out[FILM.concentration]!,
    twoPhase: out[FILM.twoPhase]!,
    micelles: out[FILM.micelles]!,
  };
}

/** Five-point slope of f at x: the error is of the fourth power of the step. */
export function slopeOf(f: (x: number) => number, x: number, step: number): number {
  return (8 * (f(x + step) - f(x - step)) - (f(x + 2 * step) - f(x - 2 * step))) / (12 * step);
}

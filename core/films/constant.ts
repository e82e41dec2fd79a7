/**
 * A pure liquid: its tension never changes and its elasticity is zero, so it cannot hold a foam.
 * The film of the law `constant`; the network gives such bubbles its fast kernel.
 */
import { FILM, type Film } from './film.ts';

/**
 * @param clean tension of one face, N/m
 * @param liquidPerArea film liquid that belongs to one face, m^3/m^2 (0 without a closed film)
 */
export function createConstantFilm(clean: number, liquidPerArea: number): Film {
  return {
    constantTension: true,
    cleanTension: clean,
    held: () => 0,
    load: (area) => ({ surfactant: 0, liquid: liquidPerArea * area }),
    evaluate(_surfactant, _liquid, _area, _guess, out) {
      out[FILM.tension] = clean;
      out[FILM.elasticity] = 0;
      out[FILM.coverage] = NaN;
      out[FILM.concentration] = 0;
      out[FILM.twoPhase] = -1;
      out[FILM.micelles] = -1;
    },
  };
}

/**
 * The supply `none`: the surfactant of a face stays on it, Gamma A is constant and eps = eps_0.
 * Where two surface phases share the face, tension stays on their plateau and eps = 0.
 */
import { FILM, type Film } from './film.ts';
import type { TensionLaw } from './law.ts';

/**
 * The film of a law without exchange.
 * @param law the law of state
 * @param surfactantPerArea Gamma at which a face is loaded, mol/m^2
 */
export function createInsolubleFilm(law: TensionLaw, surfactantPerArea: number): Film {
  const { clean, saturation, pressureScale, thetaMax } = law;
  const hasTwoPhase = law.twoPhase !== null;
  const low = law.twoPhase?.low ?? Infinity;
  const high = law.twoPhase?.high ?? Infinity;
  const plateau = clean - (law.twoPhase?.surfacePressure ?? 0);
  return {
    constantTension: false,
    cleanTension: clean,
    held: (_surfactant, _liquid, area, out) => area * saturation * out[FILM.coverage]!,
    load: (area) => ({ surfactant: surfactantPerArea * area, liquid: 0 }),
    evaluate(surfactant, _liquid, area, _guess, out) {
      // theta = N/(A Gamma_inf), free = 1 - theta; the difference is taken before the division, where it is exact.
      const full = area * saturation;
      const theta = surfactant / full;
      const free = (full - surfactant) / full;
      out[FILM.coverage] = theta;
      out[FILM.concentration] = 0;
      out[FILM.micelles] = -1;
      out[FILM.twoPhase] = hasTwoPhase ? (theta - low) * (high - theta) : -1;
      if (theta > low && theta < high) {
        out[FILM.tension] = plateau;
        out[FILM.elasticity] = 0;
      } else if (theta < thetaMax) {
        out[FILM.tension] = clean - law.surfacePressure(theta, free);
        out[FILM.elasticity] = pressureScale * theta * law.steepness(theta, free);
      } else {
        out[FILM.tension] = NaN;
        out[FILM.elasticity] = NaN;
      }
    },
  };
}

/**
 * The supply `closed-film` at equilibrium: face and film liquid share a fixed amount of surfactant, and the liquid does
 * not leave, so the film thins as the bubble grows. Tension below its micelles, on the plateau of two surface phases and
 * at the critical micelle concentration (cmc) all come from one balance:
 *
 *   A Gamma + V c = N,  delta = V/A,  eps = eps_0/(1 + delta dc/dGamma)                  (Gibbs; physics.md section 3)
 *
 * N rises with Gamma at given A and V, so the state is unique: one phase, then the plateau (c pinned, eps 0), then the
 * dense phase, then micelles (c and Gamma pinned, eps 0). A cmc at or below the plateau's concentration comes first:
 * such a film never reaches two phases.
 */
import { FILM, type Film } from './film.ts';
import { coverageOf, freeOf, type TensionLaw } from './law.ts';

/** What a face carries when it is loaded. */
export interface LoadPerArea {
  /** Surfactant of one face and its liquid, mol/m^2. */
  readonly surfactant: number;
  /** Liquid of one face, m^3/m^2: half the film's thickness. */
  readonly liquid: number;
}

/**
 * The film of a law in exchange with its own liquid.
 * @param law the law of state
 * @param perArea what a face is loaded with
 * @param cmc critical micelle concentration, mol/m^3, or null
 */
export function createClosedFilm(law: TensionLaw, perArea: LoadPerArea, cmc: number | null): Film {
  const { clean, saturation, pressureScale } = law;
  const pinned = cmc ?? Infinity;
  const pinnedCrowding = cmc === null ? NaN : law.crowdingAt(cmc);
  const pinnedCoverage = cmc === null ? NaN : coverageOf(law, pinnedCrowding);
  const pinnedTension = cmc === null ? NaN : clean - law.surfacePressure(pinnedCoverage, freeOf(law, pinnedCrowding));
  const hasTwoPhase = law.twoPhase !== null;
  const low = law.twoPhase?.low ?? NaN;
  const high = law.twoPhase?.high ?? NaN;
  const plateau = law.twoPhase?.concentration ?? NaN;
  const plateauTension = clean - (law.twoPhase?.surfacePressure ?? NaN);
  /** Written by `solve`: theta, free, c. */
  const root = new Float64Array(3);

  return {
    constantTension: false,
    cleanTension: clean,
    held(_surfactant, liquid, area, out) {
      const monomer = area * saturation * out[FILM.coverage]! + liquid * out[FILM.concentration]!;
      // Micelles are what the face and the monomer leave.
      return out[FILM.micelles]! > 0 ? monomer * (1 + out[FILM.micelles]!) : monomer;
    },
    load: (area) => ({ surfactant: perArea.surfactant * area, liquid: perArea.liquid * area }),
    evaluate(surfactant, liquid, area, guess, out) {
      const full = area * saturation;
      const excess = cmc === null ? -1 : surfactant / (full * pinnedCoverage + liquid * pinned) - 1;
      out[FILM.micelles] = excess;
      if (excess >= 0) {
        out[FILM.tension] = pinnedTension;
        out[FILM.elasticity] = 0;
        out[FILM.coverage] = pinnedCoverage;
        out[FILM.concentration] = pinned;
        out[FILM.twoPhase] = hasTwoPhase ? (pinnedCoverage - low) * (high - pinnedCoverage) : -1;
        return;
      }
      let smallest = 0;
      let largest = Infinity;
      if (hasTwoPhase) {
        // The lever rule: what the liquid does not hold at the plateau's concentration is on the face.
        const shared = (surfactant - liquid * plateau) / full;
        if (shared > low && shared < high) {
          out[FILM.tension] = plateauTension;
          out[FILM.elasticity] = 0;
          out[FILM.coverage] = shared;
          out[FILM.concentration] = plateau;
          out[FILM.twoPhase] = (shared - low) * (high - shared);
          return;
        }
        if (shared <= low) largest = low / high;
        else smallest = high / low;
      }
      solve(law, surfactant, liquid, full, guess, smallest, largest, root);
      const theta = root[0]!;
      const free = root[1]!;
      const concentration = root[2]!;
      out[FILM.coverage] = theta;
      out[FILM.concentration] = concentration;
      out[FILM.twoPhase] = hasTwoPhase ? (theta - low) * (high - theta) : -1;
      out[FILM.tension] = clean - law.surfacePressure(theta, free);
      // eps_0 = n R T Gamma s and delta dc/dGamma = V c s/(A Gamma), s = d ln c/d ln Gamma.
      const steepness = law.steepness(theta, free);
      const onFace = full * theta;
      out[FILM.elasticity] =
        theta === 0 ? 0 : (pressureScale * theta * steepness * onFace) / (onFace + liquid * concentration * steepness);
    },
  };
}

/** A step of ln x is cut to this: far from the root Newton's step is no guide. */
const LONGEST_STEP = 8;

/**
 * The coverage at which face and liquid together hold `surfactant`: Newton's method on ln[(A Gamma + V c)/N] in ln x,
 * x = theta/(1-theta), inside a shrinking bracket. In x no digit is lost where theta rounds to 1, and both A Gamma and V c
 * are near powers of x over most of their range, so the logarithms are near straight.
 *
 * @param full A Gamma_inf, mol
 * @param guess coverage to start from, or NaN
 * @param smallest least x allowed (0: none)
 * @param largest greatest x allowed (Infinity: none)
 * @param root theta, 1 - theta (1 for a law without saturation) and c, written here; NaN where the balance has no root
 */
function solve(
  law: TensionLaw,
  surfactant: number,
  liquid: number,
  full: number,
  guess: number,
  smallest: number,
  largest: number,
  root: Float64Array,
): void {
  if (surfactant === 0) {
    root[0] = 0;
    root[1] = 1;
    root[2] = 0;
    return;
  }
  const saturates = law.thetaMax === 1;
  let low = smallest;
  let high = largest;
  let x = saturates ? guess / (1 - guess) : guess;
  if (!(x > Math.max(low, 1e-6) && x < high)) {
    // No guess, or that of a nearly empty face: the balance of a dilute one, where c = c_s theta, kept inside the bracket.
    x = surfactant / (full + liquid * law.szyszkowski);
    if (!(x > low)) x = low * 1.0001;
    if (!(x < high)) x = high * 0.9999;
  }
  let settled = liquid === 0 && saturates && surfactant >= full; // no root: all of it would have to fit on the face
  if (settled) x = NaN;
  for (let pass = 0; pass < 400; pass++) {
    const free = saturates ? 1 / (1 + x) : 1;
    const theta = x * free;
    const concentration = law.concentration(theta, free);
    root[0] = theta;
    root[1] = free;
    root[2] = concentration;
    if (settled) return;
    const onFace = full * theta;
    const dissolved = liquid * concentration;
    // (A Gamma + V c - N)/N; past half coverage A Gamma_inf - N is taken first, exactly: A (Gamma_inf - Gamma) then counts.
    const excess =
      (saturates && theta > 0.5 ? full - surfactant - full * free + dissolved : onFace + dissolved - surfactant) /
      surfactant;
    // Beside the critical point of two phases the balance is flat in x: rounding then ends the search, not the step.
    if (pass > 60 && excess < 4e-16 && excess > -4e-16) return;
    if (excess > 0) high = x;
    else low = x;
    // d ln(A Gamma + V c)/d ln x = (A Gamma + V c s) free/(A Gamma + V c), s = d ln c/d ln Gamma
    const slope = ((onFace + dissolved * law.steepness(theta, free)) * free) / (onFace + dissolved);
    // step = ln(1 + excess)/slope and next = x exp(-step), by series where the cubes left out are below the step's own error.
    let step = (excess < 1e-3 && excess > -1e-3 ? excess * (1 - 0.5 * excess) : Math.log1p(excess)) / slope;
    if (!(step <= LONGEST_STEP && step >= -LONGEST_STEP)) step = excess > 0 ? LONGEST_STEP : -LONGEST_STEP;
    let next = x * (step < 1e-3 && step > -1e-3 ? 1 - step * (1 - 0.5 * step) : Math.exp(-step));
    if (step < 1e-8 && step > -1e-8) {
      // Newton's error after a step is of the order of the step's square: this one is the last. A bound is crossed by rounding only.
      settled = true;
      next = Math.min(Math.max(next, smallest), largest);
    } else if (!(next > low && next < high)) {
      // Outside the bracket: its geometric middle, or a long step while one side is open.
      if (low === 0) next = high * Math.exp(-LONGEST_STEP);
      else if (high === Infinity) next = low * Math.exp(LONGEST_STEP);
      else next = Math.sqrt(low) * Math.sqrt(high);
      if (!(next > low && next < high)) return;
    }
    x = next;
  }
}

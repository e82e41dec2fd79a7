/**
 * What a law of state is: how tension and the concentration beside the face depend on how full the face is.
 * The laws themselves stand one file each (henry.ts, langmuir.ts, frumkin.ts, volmer.ts); a supply turns a law into a film.
 *
 * Symbols: theta = Gamma/Gamma_inf, free = 1 - theta, Pi = gamma_0 - gamma. Where theta rounds to 1, `free` still carries
 * the digits, so every function of a law takes both; whoever has only theta leaves `free` out.
 */
import { GAS_CONSTANT } from '../quantities/constants.ts';

/** The numbers of a law, SI. */
export interface LawParameters {
  /** Tension without surfactant gamma_0, N/m. */
  readonly clean: number;
  /** Gamma_inf, mol/m^2; for a law without saturation the adsorption that counts as coverage 1. */
  readonly saturation: number;
  /** Szyszkowski's constant c_s, mol/m^3: the slope c/theta at small coverage. NaN where no concentration will be asked for. */
  readonly szyszkowski: number;
  /** Attraction alpha between adsorbed molecules (negative repels); read by Frumkin's law alone. */
  readonly attraction: number;
  /** n of Gibbs' equation: 1, or 2 for an ionic surfactant without added salt. */
  readonly ions: number;
}

/** Two surface phases side by side: everything on the plateau between them is one state, shared by the lever rule. */
export interface TwoPhase {
  /** Coverage of the dilute phase. */
  readonly low: number;
  /** Coverage of the dense phase. */
  readonly high: number;
  /** Monomer concentration on the plateau, mol/m^3. */
  readonly concentration: number;
  /** Pi on the plateau, N/m. */
  readonly surfacePressure: number;
}

/** A law of state at one temperature. Its functions hold for one surface phase; between the phases the plateau holds. */
export interface TensionLaw {
  readonly clean: number;
  readonly saturation: number;
  readonly szyszkowski: number;
  /** Coverage that cannot be reached: 1, or Infinity for a law without saturation. */
  readonly thetaMax: number;
  /** n R T Gamma_inf, N/m: the natural unit of Pi. */
  readonly pressureScale: number;
  /** The coexisting phases, or null where the law has one phase only. */
  readonly twoPhase: TwoPhase | null;
  /** Pi at a coverage, N/m. */
  surfacePressure(theta: number, free?: number): number;
  /** Monomer concentration in equilibrium with a coverage, mol/m^3. */
  concentration(theta: number, free?: number): number;
  /** d ln c/d ln Gamma at a coverage; 1 for a dilute face, above 1 for a crowded one, below where molecules attract. */
  steepness(theta: number, free?: number): number;
  /**
   * theta/(1 - theta) in equilibrium with a monomer concentration (theta itself for a law without saturation).
   * At the plateau concentration it is the dilute phase's.
   */
  crowdingAt(concentration: number): number;
}

/** Makes a law from its numbers at a temperature, K. */
export type CreateLaw = (parameters: LawParameters, temperature: number) => TensionLaw;

/** n R T Gamma_inf, N/m. */
export function pressureScaleOf(parameters: LawParameters, temperature: number): number {
  return parameters.ions * GAS_CONSTANT * temperature * parameters.saturation;
}

/** Coverage at a crowding theta/(1 - theta). */
export function coverageOf(law: TensionLaw, crowding: number): number {
  return law.thetaMax === 1 ? crowding / (1 + crowding) : crowding;
}

/** `free` at a crowding: 1 - theta without loss of digits; 1 for a law without saturation, which has no use for it. */
export function freeOf(law: TensionLaw, crowding: number): number {
  return law.thetaMax === 1 ? 1 / (1 + crowding) : 1;
}

/** Coverage in equilibrium with a monomer concentration, mol/m^3; the dilute phase's at the plateau concentration. */
export function coverageAt(law: TensionLaw, concentration: number): number {
  return coverageOf(law, law.crowdingAt(concentration));
}

/**
 * Limiting (Gibbs) elasticity eps_0 = d Pi/d ln Gamma of one phase, N/m.
 * Gibbs' adsorption equation d Pi/d ln c = n R T Gamma makes it n R T Gamma times d ln c/d ln Gamma.
 */
export function limitingElasticity(law: TensionLaw, theta: number, free = 1 - theta): number {
  return law.pressureScale * theta * law.steepness(theta, free);
}

/** dc/dGamma of one phase, 1/m: (c/Gamma) d ln c/d ln Gamma, and c_s/Gamma_inf on an empty face. */
export function concentrationSlope(law: TensionLaw, theta: number, free = 1 - theta): number {
  if (theta === 0) return law.szyszkowski / law.saturation;
  return (law.concentration(theta, free) * law.steepness(theta, free)) / (theta * law.saturation);
}

/** ln(1 - theta) to full accuracy at both ends. */
export function logFree(theta: number, free: number): number {
  return theta < 0.5 ? Math.log1p(-theta) : Math.log(free);
}

/**
 * Two surface phases above alpha = 2 in the regular-solution law of Frumkin, and the plateau between them.
 * Beside the laws: frumkin.ts asks it which coverages coexist, the supplies ask it for the state at a coverage.
 *
 * Coexistence (equal Pi and equal c, which is Maxwell's construction): theta_hi = 1 - theta_lo and
 *   ln[theta/(1-theta)] = alpha (2 theta - 1)
 */
import type { TensionLaw } from './law.ts';

/**
 * The coverages that coexist, or null for attraction alpha <= 2 (one phase).
 * With w = ln[theta_hi/theta_lo] the condition reads w = alpha tanh(w/2). Its difference is convex for w > 0 and Newton's
 * method from w = alpha, right of the root, comes down on it without straying.
 */
export function coexistingCoverages(attraction: number): { readonly low: number; readonly high: number } | null {
  if (!(attraction > 2)) return null;
  let w = attraction;
  for (let pass = 0; pass < 200; pass++) {
    const t = Math.tanh(0.5 * w);
    const next = w - (w - attraction * t) / (1 - 0.5 * attraction * (1 - t * t));
    // Rounding ends the descent; within rounding of alpha = 2 the phases are one.
    if (!(next < w)) break;
    if (!(next > 0)) return null;
    w = next;
  }
  const low = 1 / (1 + Math.exp(w));
  const high = 1 / (1 + Math.exp(-w));
  return low < high ? { low, high } : null;
}

/** Pi at a coverage, N/m: of the one phase there, or of the plateau between two. */
export function equilibriumPressure(law: TensionLaw, theta: number, free = 1 - theta): number {
  const { twoPhase } = law;
  if (twoPhase !== null && theta > twoPhase.low && theta < twoPhase.high) return twoPhase.surfacePressure;
  return law.surfacePressure(theta, free);
}

/** Monomer concentration at a coverage, mol/m^3: of the one phase there, or of the plateau between two. */
export function equilibriumConcentration(law: TensionLaw, theta: number, free = 1 - theta): number {
  const { twoPhase } = law;
  if (twoPhase !== null && theta > twoPhase.low && theta < twoPhase.high) return twoPhase.concentration;
  return law.concentration(theta, free);
}

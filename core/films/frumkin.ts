/**
 * Frumkin's law of state in its regular-solution form: Langmuir's sites with an attraction alpha between neighbours
 * (negative repels). Frumkin, Z. Phys. Chem. 116 (1925) 466. Above alpha = 2 two surface phases coexist.
 *
 *   c/c_s = theta/(1-theta) exp(-2 alpha theta),  Pi = -n R T Gamma_inf [ln(1-theta) + alpha theta^2]
 *   d ln c/d ln Gamma = 1/(1-theta) - 2 alpha theta
 */
import { logFree, pressureScaleOf, type LawParameters, type TensionLaw, type TwoPhase } from './law.ts';
import { coexistingCoverages } from './two-phase.ts';

export function createFrumkin(parameters: LawParameters, temperature: number): TensionLaw {
  const { clean, saturation, szyszkowski, attraction: alpha } = parameters;
  const pressureScale = pressureScaleOf(parameters, temperature);
  const pressure = (theta: number, free = 1 - theta): number =>
    -pressureScale * (logFree(theta, free) + alpha * theta * theta);
  const phases = coexistingCoverages(alpha);
  // On the plateau c = c_s exp(-alpha), Pi that of either phase; the dilute one has the digits.
  const twoPhase: TwoPhase | null =
    phases === null
      ? null
      : { ...phases, concentration: szyszkowski * Math.exp(-alpha), surfacePressure: pressure(phases.low) };
  return {
    clean,
    saturation,
    szyszkowski,
    thetaMax: 1,
    pressureScale,
    twoPhase,
    surfacePressure: pressure,
    concentration: (theta, free = 1 - theta) => ((szyszkowski * theta) / free) * Math.exp(-2 * alpha * theta),
    steepness: (theta, free = 1 - theta) => 1 / free - 2 * alpha * theta,
    crowdingAt: (concentration) => solveCrowding(concentration, szyszkowski, alpha, twoPhase),
  };
}

/**
 * x = theta/(1-theta) from c/c_s: the root of z - 2 alpha theta(z) = ln(c/c_s), z = ln x, on the branch of one phase.
 * Newton's method inside a shrinking bracket.
 */
function solveCrowding(concentration: number, szyszkowski: number, alpha: number, twoPhase: TwoPhase | null): number {
  if (concentration === 0) return 0;
  const target = Math.log(concentration / szyszkowski);
  let low = target + Math.min(0, 2 * alpha);
  let high = target + Math.max(0, 2 * alpha);
  if (twoPhase !== null) {
    if (concentration <= twoPhase.concentration) high = Math.min(high, Math.log(twoPhase.low / twoPhase.high));
    else low = Math.max(low, Math.log(twoPhase.high / twoPhase.low));
  }
  let z = 0.5 * (low + high);
  for (let pass = 0; pass < 200; pass++) {
    const theta = 1 / (1 + Math.exp(-z));
    const excess = z - 2 * alpha * theta - target;
    if (excess > 0) high = z;
    else low = z;
    let next = z - excess / (1 - 2 * alpha * theta * (1 - theta));
    const newton = next >= low && next <= high;
    if (!newton) next = 0.5 * (low + high);
    const step = Math.abs(next - z);
    z = next;
    if ((newton && step < 1e-9) || high - low <= 1e-16 * Math.abs(z)) break;
  }
  return Math.exp(z);
}

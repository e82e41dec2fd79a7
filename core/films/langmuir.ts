/**
 * The law of Langmuir (adsorption) and Szyszkowski (tension): molecules on sites, indifferent to each other.
 * Langmuir, J. Am. Chem. Soc. 40 (1918) 1361; Szyszkowski, Z. Phys. Chem. 64 (1908) 385. Frumkin's law without attraction.
 *
 *   c/c_s = theta/(1-theta),  Pi = -n R T Gamma_inf ln(1-theta) = n R T Gamma_inf ln(1 + c/c_s)
 */
import { logFree, pressureScaleOf, type LawParameters, type TensionLaw } from './law.ts';

export function createLangmuir(parameters: LawParameters, temperature: number): TensionLaw {
  const { clean, saturation, szyszkowski } = parameters;
  const pressureScale = pressureScaleOf(parameters, temperature);
  return {
    clean,
    saturation,
    szyszkowski,
    thetaMax: 1,
    pressureScale,
    twoPhase: null,
    surfacePressure: (theta, free = 1 - theta) => -pressureScale * logFree(theta, free),
    concentration: (theta, free = 1 - theta) => (szyszkowski * theta) / free,
    steepness: (theta, free = 1 - theta) => 1 / free,
    crowdingAt: (concentration) => concentration / szyszkowski,
  };
}

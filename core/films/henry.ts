/**
 * Henry's law of state: adsorption in proportion to concentration, a two-dimensional ideal gas.
 * For dilute faces; it knows no saturation, so coverage may pass 1.
 *
 *   c/c_s = theta,  Pi = n R T Gamma_inf theta = n R T Gamma
 */
import { pressureScaleOf, type LawParameters, type TensionLaw } from './law.ts';

export function createHenry(parameters: LawParameters, temperature: number): TensionLaw {
  const { clean, saturation, szyszkowski } = parameters;
  const pressureScale = pressureScaleOf(parameters, temperature);
  return {
    clean,
    saturation,
    szyszkowski,
    thetaMax: Infinity,
    pressureScale,
    twoPhase: null,
    surfacePressure: (theta) => pressureScale * theta,
    concentration: (theta) => szyszkowski * theta,
    steepness: () => 1,
    crowdingAt: (concentration) => concentration / szyszkowski,
  };
}

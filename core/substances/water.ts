/**
 * Water: the liquid of every scenario that does not say otherwise.
 */

const CRITICAL_TEMPERATURE = 647.096; // K

/** Between these temperatures, K, the formula below holds (it extrapolates well to -25 degC). */
export const WATER_TENSION_RANGE = { from: 248.15, below: CRITICAL_TEMPERATURE } as const;

/**
 * Surface tension of water against its vapour or air, N/m:
 * gamma = 0.2358 tau^1.256 (1 - 0.625 tau), tau = 1 - T/647.096 K. IAPWS R1-76(2014).
 * @param temperature K, inside WATER_TENSION_RANGE
 */
export function waterSurfaceTension(temperature: number): number {
  const tau = 1 - temperature / CRITICAL_TEMPERATURE;
  return 235.8e-3 * tau ** 1.256 * (1 - 0.625 * tau);
}

/** At 25 degC and 1 atm. Density: IAPWS-95, 997.047 kg/m^3; viscosity: IAPWS R12-08, 0.8900 mPa s. Both from memory. */
export const WATER = { density: 997, viscosity: 0.89e-3 } as const;

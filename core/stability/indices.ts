/**
 * The indices of stability of one bubble and of one pair, as pure formulas.
 * The network has its own optimised kernels for the stiffnesses; the tests hold them equal to the forms written here.
 * Sources: Young-Laplace for the pressures; Gibbs' elasticity criterion, Lucassen & van den Tempel 1972;
 * trapped species, Webster & Cates 1998.
 */

import { GAS_CONSTANT } from '../quantities/constants.ts';

const ROUNDING = 1e-14;

/**
 * Bubble index `2 eps / gamma` of a sphere: above 1 the bubble pushes back (Gibbs: eps > gamma/2 for one face).
 * @param elasticity eps = d gamma / d ln A of one face, N/m
 * @param tension gamma of one face, N/m
 */
export function bubbleIndex(elasticity: number, tension: number): number {
  return (2 * elasticity) / tension;
}

/**
 * Pair margin `M = 1 + (u_i + u_j) / (d_i + d_j)`, dimensionless, 1 at the boundary, below 1 unstable.
 * @param stiffnessI,stiffnessJ u = dp/dn of each side, Pa/mol (0 for a reservoir, 1/capacity for a pool)
 * @param capillaryI,capillaryJ d of each side, Pa/mol (see `capillaryStiffness`; 0 for a side without a surface)
 * @returns NaN where neither side has a surface: such a link is no pair
 */
export function pairMargin(stiffnessI: number, stiffnessJ: number, capillaryI: number, capillaryJ: number): number {
  const capillary = capillaryI + capillaryJ;
  if (!(capillary > 0)) return NaN;
  const margin = 1 + (stiffnessI + stiffnessJ) / capillary;
  // Pure liquids have a margin of nought: what rounding leaves of 1 - 1 would read like a number.
  return Math.abs(margin) < ROUNDING ? 0 : margin;
}

/**
 * Growth rate `lambda = -G (u_i + u_j)` of the exchange between the two alone, 1/s; above 0 the pair runs away.
 * @param conductance G = d(molar flow)/d(pressure), mol/(s Pa)
 */
export function pairRate(conductance: number, stiffnessI: number, stiffnessJ: number): number {
  return -conductance * (stiffnessI + stiffnessJ);
}

/**
 * dp/dR of a free sphere, `(2 f / R^2) (2 eps - gamma)`, Pa/m.
 * @param faces f, 1 or 2
 */
export function sphereStiffness(faces: number, tension: number, elasticity: number, radius: number): number {
  return ((2 * faces) / (radius * radius)) * (2 * elasticity - tension);
}

/** dp/dV of a free sphere, `(dp/dR) / (4 pi R^2)`, Pa/m^3. */
export function sphereVolumeStiffness(faces: number, tension: number, elasticity: number, radius: number): number {
  return sphereStiffness(faces, tension, elasticity, radius) / (4 * Math.PI * radius * radius);
}

/**
 * dp/dh of a spherical cap on a mouth, `4 f [gamma (a^2 - h^2) + 2 h^2 eps] / (a^2 + h^2)^2`, Pa/m.
 * @param mouth a, inner radius of the mouth, m
 * @param height h of the cap, m
 */
export function capStiffness(
  faces: number,
  tension: number,
  elasticity: number,
  mouth: number,
  height: number,
): number {
  const a2 = mouth * mouth;
  const h2 = height * height;
  return (4 * faces * (tension * (a2 - h2) + 2 * h2 * elasticity)) / ((a2 + h2) * (a2 + h2));
}

/** dp/dV of a spherical cap, `(dp/dh) / (dV/dh)` with `dV/dh = pi (a^2 + h^2) / 2`, Pa/m^3. */
export function capVolumeStiffness(
  faces: number,
  tension: number,
  elasticity: number,
  mouth: number,
  height: number,
): number {
  const slope = (Math.PI * (mouth * mouth + height * height)) / 2;
  return capStiffness(faces, tension, elasticity, mouth, height) / slope;
}

/**
 * dn/dV of an ideal gas whose pressure follows its volume, `(p + V dp/dV) / (R T)`, mol/m^3.
 * @param volumeStiffness dp/dV, Pa/m^3, wall recoil included
 */
export function amountPerVolume(
  pressure: number,
  volume: number,
  volumeStiffness: number,
  temperature: number,
): number {
  return (pressure + volume * volumeStiffness) / (GAS_CONSTANT * temperature);
}

/** Stiffness `u = dp/dn = (dp/dV) / (dn/dV)`, Pa/mol: above 0 the bubble pushes back, below 0 it runs away. */
export function amountStiffness(
  pressure: number,
  volume: number,
  volumeStiffness: number,
  temperature: number,
): number {
  return volumeStiffness / amountPerVolume(pressure, volume, volumeStiffness, temperature);
}

/**
 * The capillary destabilising part d of u, Pa/mol, above 0: the size of the u that a free sphere of radius R at this
 * pressure would have with eps = 0 and no wall. For a mounted bubble R is its radius of curvature.
 *
 * `dp/dV = -2 f gamma / (4 pi R^4)`, `V = 4/3 pi R^3`, so `d = R_gas T |dp/dV| / (p + V dp/dV)`,
 * and equal bubbles without a wall at high pressure have the margin `2 eps / gamma`.
 * @param pressure p of the whole gas in the bubble, Pa, also where some species are frozen (see `mobileStiffness`)
 */
export function capillaryStiffness(
  faces: number,
  tension: number,
  radius: number,
  pressure: number,
  temperature: number,
): number {
  const volume = (4 / 3) * Math.PI * radius ** 3;
  return -amountStiffness(pressure, volume, sphereVolumeStiffness(faces, tension, 0, radius), temperature);
}

/**
 * Stiffness u of the mobile gas where the other species are frozen in the bubble, Pa/mol.
 *
 * With `p_m = p - p_f`: `dp_m/dV = dp/dV + p_f/V` (the frozen gas is an ideal gas of fixed amount), `n_m = p_m V/(R T)`,
 * `u_m = (dp_m/dV) / (dn_m/dV)`. As `dn_m/dV = (p_m + p_f + V dp/dV)/(R T)`, the denominator is that of the whole gas,
 * and d of `capillaryStiffness` holds unchanged.
 * @param volumeStiffness dp/dV of the whole gas, Pa/m^3
 * @param frozenPressure p_f, sum of the frozen partial pressures, Pa
 * @param mobilePressure p_m, sum of the mobile partial pressures, Pa
 */
export function mobileStiffness(
  volumeStiffness: number,
  frozenPressure: number,
  volume: number,
  mobilePressure: number,
  temperature: number,
): number {
  const mobileVolumeStiffness = volumeStiffness + frozenPressure / volume;
  return mobileVolumeStiffness / amountPerVolume(mobilePressure, volume, mobileVolumeStiffness, temperature);
}

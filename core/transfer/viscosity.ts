/**
 * Viscosity of a gas mixture by Wilke's rule (Wilke 1950, J. Chem. Phys. 18, 517):
 *   mu = sum_i x_i mu_i / sum_j x_j phi_ij,
 *   phi_ij = [1 + (mu_i/mu_j)^(1/2) (M_j/M_i)^(1/4)]^2 / [8 (1 + M_i/M_j)]^(1/2)
 */
import type { Network } from '../network/network.ts';

const interactions = new WeakMap<Float64Array, Float64Array>();

/** phi_ij, row by row; computed once for each network's gases. */
function interaction(network: Network): Float64Array {
  const known = interactions.get(network.viscosity);
  if (known) return known;
  const { viscosity, molarMass } = network;
  const n = viscosity.length;
  const phi = new Float64Array(n * n);
  for (let i = 0; i < n; i++) {
    for (let j = 0; j < n; j++) {
      const root = 1 + Math.sqrt(viscosity[i]! / viscosity[j]!) * Math.pow(molarMass[j]! / molarMass[i]!, 0.25);
      phi[i * n + j] = (root * root) / Math.sqrt(8 * (1 + molarMass[i]! / molarMass[j]!));
    }
  }
  interactions.set(viscosity, phi);
  return phi;
}

/** Viscosity, Pa s, of the mixture with mole fractions x (one per species of the network). */
export function mixtureViscosity(network: Network, x: Float64Array): number {
  const { viscosity } = network;
  const n = viscosity.length;
  if (n === 1) return viscosity[0]!;
  const phi = interaction(network);
  let mu = 0;
  for (let i = 0; i < n; i++) {
    let share = 0;
    for (let j = 0; j < n; j++) share += x[j]! * phi[i * n + j]!;
    mu += (x[i]! * viscosity[i]!) / share;
  }
  return mu;
}

/** d mu/d x_l with each fraction varied alone, Pa s, into `out`. */
export function mixtureViscositySlopes(network: Network, x: Float64Array, out: Float64Array): void {
  const { viscosity } = network;
  const n = viscosity.length;
  const phi = interaction(network);
  for (let l = 0; l < n; l++) out[l] = 0;
  for (let i = 0; i < n; i++) {
    let share = 0;
    for (let j = 0; j < n; j++) share += x[j]! * phi[i * n + j]!;
    out[i] = out[i]! + viscosity[i]! / share;
    for (let l = 0; l < n; l++) out[l] = out[l]! - (x[i]! * viscosity[i]! * phi[i * n + l]!) / (share * share);
  }
}

/**
 * The rate of one pair that exchanges several species: the largest real eigenvalue of its exchange.
 * Two forms of one law: for any matrix, and without allocation for the diffusive pairs that a network meets at each frame.
 */

import { EigenvalueDecomposition, Matrix } from 'ml-matrix';

/**
 * Largest real part of the eigenvalues of `-G H`, 1/s: `dx/dt = -G (H_i + H_j) x`, x the amounts that crossed.
 * Species with zero conductance do not take part (their amounts are parameters, not modes).
 * @param stiffness H_i + H_j, row-major S x S: d(partial pressure k)/d(amount l), Pa/mol
 * @param conductance g_k of each species, mol/(s Pa), length S, >= 0
 * @returns NaN where no species is exchanged
 */
export function pairExchangeRate(stiffness: Float64Array, conductance: Float64Array, species: number): number {
  let moving = 0;
  let first = -1;
  let second = -1;
  for (let k = 0; k < species; k++) {
    if (!(conductance[k]! > 0)) continue;
    if (moving === 0) first = k;
    else if (moving === 1) second = k;
    moving++;
  }
  if (moving === 0) return NaN;
  if (moving === 1) return -conductance[first]! * stiffness[first * species + first]!;
  if (moving === 2) {
    const g = conductance[first]!;
    const h = conductance[second]!;
    const determinant =
      g *
      h *
      (stiffness[first * species + first]! * stiffness[second * species + second]! -
        stiffness[first * species + second]! * stiffness[second * species + first]!);
    const trace = -g * stiffness[first * species + first]! - h * stiffness[second * species + second]!;
    return largerRoot(trace, determinant);
  }
  const exchange: number[][] = [];
  for (let k = 0; k < species; k++) {
    if (!(conductance[k]! > 0)) continue;
    const row: number[] = [];
    for (let l = 0; l < species; l++) {
      // -G^(1/2) H G^(1/2) has the eigenvalues of -G H and is better scaled.
      if (conductance[l]! > 0) row.push(-Math.sqrt(conductance[k]! * conductance[l]!) * stiffness[k * species + l]!);
    }
    exchange.push(row);
  }
  return Math.max(...new EigenvalueDecomposition(new Matrix(exchange)).realEigenvalues);
}

/** The larger real part of the roots of `x^2 - trace x + determinant`, without cancellation. */
function largerRoot(trace: number, determinant: number): number {
  const half = trace / 2;
  const discriminant = half * half - determinant;
  if (discriminant <= 0) return half;
  const root = Math.sqrt(discriminant);
  return half >= 0 ? half + root : determinant / (half - root);
}

/**
 * The same rate for a diffusive pair, whose matrix is a diagonal less a matrix of rank one:
 * `H_i + H_j = diag(a) - b 1^T`. A bubble gives `a_k = R T/V`, `b_k = (p_k/V) dV/dn` with `dV/dn = 1/(dn/dV)`;
 * a cavity `a_k = R T/V`, b = 0; a pool `a_k = 1/(H_k V_l)`, b = 0; a reservoir zeros.
 *
 * As b >= 0 all eigenvalues are real, and the largest is the one root above `-min(a_k g_k)` of the secular equation
 * `sum_k g_k b_k / (a_k g_k + lambda) = 1` (Golub, Some modified matrix eigenvalue problems, 1973). A species with
 * `b_k = 0` is uncoupled and gives `-a_k g_k` itself.
 * @param diagonal a, Pa/mol, length >= species
 * @param common b, Pa/mol, >= 0, length >= species
 * @param conductance g_k, mol/(s Pa), length >= species
 * @returns 1/s; NaN where no species is exchanged. Relative accuracy is that of double precision while the sum does not
 *   cancel; a species far slower than the others keeps its own slow rate.
 */
export function diffusivePairRate(
  diagonal: Float64Array,
  common: Float64Array,
  conductance: Float64Array,
  species: number,
): number {
  // The coupled species with the smallest a g: the root is sought as a distance s > 0 from its pole, so that a slow
  // root beside fast species keeps its digits.
  let pole = Infinity;
  let uncoupled = -Infinity;
  let total = 0;
  for (let k = 0; k < species; k++) {
    const g = conductance[k]!;
    if (!(g > 0)) continue;
    if (common[k]! > 0) {
      pole = Math.min(pole, diagonal[k]! * g);
      total += g * common[k]!;
    } else uncoupled = Math.max(uncoupled, -diagonal[k]! * g);
  }
  if (pole === Infinity) return uncoupled === -Infinity ? NaN : uncoupled;
  // f(s) = sum g b / ((a g - pole) + s) - 1 falls from infinity to -1; f <= 0 at s = total.
  let low = 0;
  let high = total;
  let distance = high;
  for (let iteration = 0; iteration < 200; iteration++) {
    let value = -1;
    let slope = 0;
    for (let k = 0; k < species; k++) {
      const g = conductance[k]!;
      if (!(g > 0) || !(common[k]! > 0)) continue;
      const term = (g * common[k]!) / (diagonal[k]! * g - pole + distance);
      value += term;
      slope -= term / (diagonal[k]! * g - pole + distance);
    }
    if (value === 0) break;
    if (value > 0) low = distance;
    else high = distance;
    // Newton on 1/(f+1), which is nearly linear: s += f (f+1) / -f'.
    let next = distance - (value * (value + 1)) / slope;
    if (!(next > low && next < high)) next = low > 0 && high > 4 * low ? Math.sqrt(low * high) : (low + high) / 2;
    if (next === distance || high - low <= 4e-16 * high) break;
    const done = Math.abs(next - distance) <= 2e-16 * distance;
    distance = next;
    if (done) break;
  }
  return Math.max(distance - pole, uncoupled);
}

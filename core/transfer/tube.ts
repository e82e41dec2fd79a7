/**
 * Tubes: isothermal Hagen-Poiseuille flow of an ideal gas, `n_dot = pi a^4 (p_i^2 - p_j^2)/(16 mu L R_gas T)`,
 * with the composition, and so the viscosity, of the upstream node. Its switch at flow reversal is a kink.
 * Coefficients: C = pi a^4/(16 L R_gas T) (so that n_dot = C (p_i^2 - p_j^2)/mu), a, L, and a viscosity in place of the
 * gas's own (NaN: the gas's).
 */
import { RESERVOIR, type LinkTable, type Network } from '../network/network.ts';
import type { NodeState } from '../network/node-state.ts';
import type { LinkKernel } from './link-kernel.ts';
import { mixtureViscosity, mixtureViscositySlopes } from './viscosity.ts';

export const TUBE = { conductance: 0, radius: 1, length: 2, viscosity: 3 } as const;

/** Viscosity of the gas with the mole fractions in `fractions`, or the link's own. */
export function tubeViscosity(network: Network, table: LinkTable, link: number, x: Float64Array): number {
  const own = table.coefficients[link * table.stride + TUBE.viscosity]!;
  return Number.isNaN(own) ? mixtureViscosity(network, x) : own;
}

/** Mole fractions of the gas that enters a tube, by node. */
function composition(state: NodeState, node: number, out: Float64Array): void {
  const { species, pressure, partial } = state;
  const p = pressure[node]!;
  for (let k = 0; k < species; k++) out[k] = partial[node * species + k]! / p;
}

let fractions = new Float64Array(8);
let slopes = new Float64Array(8);

function reserve(network: Network): void {
  if (fractions.length < network.species.length) {
    fractions = new Float64Array(network.species.length);
    slopes = new Float64Array(network.species.length);
  }
}

export const tube: LinkKernel = {
  diffusive: false,

  addRates(group, state, _t, out) {
    const { active, activeCount, table } = group;
    const { from, to, stride, coefficients } = table;
    const { species, pressure } = state;
    reserve(state.network);
    for (let q = 0; q < activeCount; q++) {
      const l = active[q]!;
      const i = from[l]!;
      const j = to[l]!;
      const pi = pressure[i]!;
      const pj = pressure[j]!;
      const drive = coefficients[l * stride]! * (pi - pj) * (pi + pj);
      if (species === 1) {
        const own = coefficients[l * stride + TUBE.viscosity]!;
        const flow = drive / (own > 0 ? own : state.network.viscosity[0]!);
        out[i] = out[i]! - flow;
        out[j] = out[j]! + flow;
        continue;
      }
      composition(state, drive >= 0 ? i : j, fractions);
      const whole = drive / tubeViscosity(state.network, table, l, fractions);
      for (let k = 0; k < species; k++) {
        const flow = whole * fractions[k]!;
        out[i * species + k] = out[i * species + k]! - flow;
        out[j * species + k] = out[j * species + k]! + flow;
      }
    }
  },

  addSlopes(group, state, _t, values, timeDerivative) {
    const { active, activeCount, table, slots } = group;
    const { from, to, stride, coefficients } = table;
    const { species, pressure, partialSlope, pressureDrift, network } = state;
    const block = species * species;
    reserve(network);
    for (let q = 0; q < activeCount; q++) {
      const l = active[q]!;
      const i = from[l]!;
      const j = to[l]!;
      const pi = pressure[i]!;
      const pj = pressure[j]!;
      const C = coefficients[l * stride]!;
      const drive = C * (pi - pj) * (pi + pj);
      const up = drive >= 0 ? i : j;
      if (species > 1) composition(state, up, fractions);
      else fractions[0] = 1;
      const mu = tubeViscosity(network, table, l, fractions);
      if (Number.isNaN(coefficients[l * stride + TUBE.viscosity]!)) mixtureViscositySlopes(network, fractions, slopes);
      else slopes.fill(0);
      const whole = drive / mu;
      const Gi = (2 * C * pi) / mu;
      const Gj = (2 * C * pj) / mu;
      for (let k = 0; k < species; k++) {
        const x = fractions[k]!;
        for (let m = 0; m < species; m++) {
          // Total pressure's slope against n_m is the sum over species of the partial ones.
          let ui = 0;
          let uj = 0;
          for (let s = 0; s < species; s++) {
            ui += partialSlope[(i * species + s) * species + m]!;
            uj += partialSlope[(j * species + s) * species + m]!;
          }
          let dI = x * Gi * ui;
          let dJ = -x * Gj * uj;
          if (species > 1) {
            const through = whole * upstreamSlope(state, up, k, m, mu);
            if (up === i) dI += through;
            else dJ += through;
          }
          const at = 4 * block * l + k * species + m;
          values[slots[at]!]! -= dI;
          values[slots[at + block]!]! += dI;
          values[slots[at + 2 * block]!]! -= dJ;
          values[slots[at + 3 * block]!]! += dJ;
        }
        const drift = x * (Gi * pressureDrift[i]! - Gj * pressureDrift[j]!);
        timeDerivative[i * species + k]! -= drift;
        timeDerivative[j * species + k]! += drift;
      }
    }
  },

  flow(group, link, state, _t, out) {
    const { table } = group;
    reserve(state.network);
    const pi = state.pressure[table.from[link]!]!;
    const pj = state.pressure[table.to[link]!]!;
    const drive = table.coefficients[link * table.stride]! * (pi - pj) * (pi + pj);
    composition(state, drive >= 0 ? table.from[link]! : table.to[link]!, fractions);
    const whole = drive / tubeViscosity(state.network, table, link, fractions);
    for (let k = 0; k < state.species; k++) out[k] = whole * fractions[k]!;
  },

  conductance(group, link, state, _t, out) {
    const { table } = group;
    reserve(state.network);
    const pi = state.pressure[table.from[link]!]!;
    const pj = state.pressure[table.to[link]!]!;
    composition(state, pi >= pj ? table.from[link]! : table.to[link]!, fractions);
    out[0] =
      (table.coefficients[link * table.stride]! * (pi + pj)) / tubeViscosity(state.network, table, link, fractions);
  },
};

/**
 * d(x_k/mu)/d n_m of the upstream gas, times mu: (delta_km - x_k)/n - x_k (d ln mu/d n_m), with fractions and viscosity
 * slopes of that gas in the module's arrays. A reservoir's composition is fixed.
 */
function upstreamSlope(state: NodeState, up: number, k: number, m: number, mu: number): number {
  const { species, pressure, partialSlope } = state;
  let total = 0;
  for (let s = 0; s < species; s++) total += partialSlope[(up * species + s) * species + m]!;
  if (state.network.nodes.kind[up] === RESERVOIR) return 0;
  // d x_s/d n_m = (d p_s/d n_m - x_s d p/d n_m)/p
  const p = pressure[up]!;
  let own = 0;
  let dmu = 0;
  for (let s = 0; s < species; s++) {
    const dx = (partialSlope[(up * species + s) * species + m]! - fractions[s]! * total) / p;
    if (s === k) own = dx;
    dmu += slopes[s]! * dx;
  }
  return own - (fractions[k]! * dmu) / mu;
}

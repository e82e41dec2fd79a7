/**
 * Shared contact films: `n_dot_k = K_k A_c (p_i,k - p_j,k)`, `K_k = D_k H_k/(h + 2 D_k/k_ml,k)` (Princen & Mason 1965),
 * with a fixed area, or an area that is a share of the smaller bubble's section, `A_c = phi pi min(R_i,R_j)^2`.
 * Coefficients: K_k A_c (mol/(s Pa)) of a fixed area; K_k phi pi (mol/(s Pa m^2)) of a share; stride = species.
 */
import { diffusiveKernel } from './diffusive.ts';
import type { LinkKernel } from './link-kernel.ts';

export const fixedAreaFilm: LinkKernel = diffusiveKernel((_table, _link, _k, _state, _t, out) => {
  out[0] = 1;
  out[1] = 0;
  out[2] = 0;
  out[3] = 0;
});

const general = diffusiveKernel((table, link, _k, state, _t, out) => {
  const Ri = state.radius[table.from[link]!]!;
  const Rj = state.radius[table.to[link]!]!;
  const R = Ri < Rj ? Ri : Rj;
  out[0] = R * R;
  out[1] = Ri < Rj ? 2 * R : 0;
  out[2] = Ri < Rj ? 0 : 2 * R;
  out[3] = 0;
});

/** Share films carry foams of 10^5 bubbles: with one species the loops of `general` are written out, to the same result. */
export const sharedAreaFilm: LinkKernel = {
  ...general,

  addRates(group, state, t, out) {
    if (state.species !== 1) {
      general.addRates(group, state, t, out);
      return;
    }
    const { active, activeCount } = group;
    const { from, to, coefficients } = group.table;
    const { pressure, radius } = state;
    // flow = g min(R_i,R_j)^2 (p_i - p_j)
    for (let q = 0; q < activeCount; q++) {
      const l = active[q]!;
      const i = from[l]!;
      const j = to[l]!;
      const Ri = radius[i]!;
      const Rj = radius[j]!;
      const R = Ri < Rj ? Ri : Rj;
      const flow = coefficients[l]! * R * R * (pressure[i]! - pressure[j]!);
      out[i] = out[i]! - flow;
      out[j] = out[j]! + flow;
    }
  },

  flow(group, link, state, t, out) {
    if (state.species !== 1) {
      general.flow(group, link, state, t, out);
      return;
    }
    const { from, to, coefficients } = group.table;
    const { pressure, radius } = state;
    const i = from[link]!;
    const j = to[link]!;
    const R = Math.min(radius[i]!, radius[j]!);
    out[0] = coefficients[link]! * R * R * (pressure[i]! - pressure[j]!);
  },

  addSlopes(group, state, t, values, timeDerivative) {
    if (state.species !== 1) {
      general.addSlopes(group, state, t, values, timeDerivative);
      return;
    }
    const { active, activeCount, slots } = group;
    const { from, to, coefficients } = group.table;
    const { pressure, radius, stiffness, radiusSlope, pressureDrift, radiusDrift } = state;
    for (let q = 0; q < activeCount; q++) {
      const l = active[q]!;
      const i = from[l]!;
      const j = to[l]!;
      const Ri = radius[i]!;
      const Rj = radius[j]!;
      const smaller = Ri < Rj ? i : j;
      const R = Ri < Rj ? Ri : Rj;
      const g = coefficients[l]!;
      const gS = g * R * R;
      const widening = 2 * g * R * (pressure[i]! - pressure[j]!);
      const through = widening * radiusSlope[smaller]!;
      const dI = gS * stiffness[i]! + (smaller === i ? through : 0);
      const dJ = -gS * stiffness[j]! + (smaller === j ? through : 0);
      const at = 4 * l;
      values[slots[at]!]! -= dI;
      values[slots[at + 1]!]! += dI;
      values[slots[at + 2]!]! -= dJ;
      values[slots[at + 3]!]! += dJ;
      const drift = gS * (pressureDrift[i]! - pressureDrift[j]!) + widening * radiusDrift[smaller]!;
      if (drift !== 0) {
        timeDerivative[i] = timeDerivative[i]! - drift;
        timeDerivative[j] = timeDerivative[j]! + drift;
      }
    }
  },
};

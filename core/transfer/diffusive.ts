/**
 * Links that gas diffuses through: per species `n_dot_k = g_k S (p_i,k - p_j,k)`, with a conductance g_k of the link's own and
 * a geometry S of the two radii. The kinds differ in S alone: each is a file that gives its geometry to `diffusiveKernel`.
 */
import type { LinkTable } from '../network/network.ts';
import type { NodeState } from '../network/node-state.ts';
import type { LinkGroup, LinkKernel } from './link-kernel.ts';

/** S and its slopes: out = [S, dS/dR_from, dS/dR_to, dS/dt at constant radii]. `k` is the species (some S depend on its diffusivity). */
export type Geometry = (
  table: LinkTable,
  link: number,
  k: number,
  state: NodeState,
  t: number,
  out: Float64Array,
) => void;

const shape = new Float64Array(4);

/**
 * The kernel of a diffusive kind.
 * Coefficients: the first `species` numbers of each link are g_k; what follows is the geometry's.
 */
export function diffusiveKernel(geometry: Geometry): LinkKernel {
  return {
    diffusive: true,

    addRates(group, state, t, out) {
      const { active, activeCount, table } = group;
      const { from, to, stride, coefficients } = table;
      const { species, partial } = state;
      for (let q = 0; q < activeCount; q++) {
        const l = active[q]!;
        const i = from[l]! * species;
        const j = to[l]! * species;
        for (let k = 0; k < species; k++) {
          geometry(table, l, k, state, t, shape);
          const flow = coefficients[l * stride + k]! * shape[0]! * (partial[i + k]! - partial[j + k]!);
          out[i + k] = out[i + k]! - flow;
          out[j + k] = out[j + k]! + flow;
        }
      }
    },

    addSlopes(group, state, t, values, timeDerivative) {
      const { active, activeCount, table, slots } = group;
      const { from, to, stride, coefficients } = table;
      const { species, partial, partialSlope, radiusSlope, radiusDrift, pressure, pressureDrift } = state;
      const block = species * species;
      for (let q = 0; q < activeCount; q++) {
        const l = active[q]!;
        const a = from[l]!;
        const b = to[l]!;
        const base = 4 * block * l;
        for (let k = 0; k < species; k++) {
          geometry(table, l, k, state, t, shape);
          const g = coefficients[l * stride + k]!;
          const difference = partial[a * species + k]! - partial[b * species + k]!;
          const gS = g * shape[0]!;
          // Through the radii: the whole amount n_i moves R_i, so every species' column gets the same.
          const throughA = g * shape[1]! * radiusSlope[a]! * difference;
          const throughB = g * shape[2]! * radiusSlope[b]! * difference;
          const rowA = (a * species + k) * species;
          const rowB = (b * species + k) * species;
          for (let m = 0; m < species; m++) {
            const dA = gS * partialSlope[rowA + m]! + throughA; // d flow/d n_a,m
            const dB = -gS * partialSlope[rowB + m]! + throughB; // d flow/d n_b,m
            const at = base + k * species + m;
            values[slots[at]!]! -= dA;
            values[slots[at + block]!]! += dA;
            values[slots[at + 2 * block]!]! -= dB;
            values[slots[at + 3 * block]!]! += dB;
          }
          // Composition does not drift at constant amounts: partial pressures move in proportion.
          const driftA = pressure[a] === 0 ? 0 : (partial[a * species + k]! / pressure[a]!) * pressureDrift[a]!;
          const driftB = pressure[b] === 0 ? 0 : (partial[b * species + k]! / pressure[b]!) * pressureDrift[b]!;
          const drift =
            gS * (driftA - driftB) +
            g * (shape[1]! * radiusDrift[a]! + shape[2]! * radiusDrift[b]! + shape[3]!) * difference;
          timeDerivative[a * species + k]! -= drift;
          timeDerivative[b * species + k]! += drift;
        }
      }
    },

    flow(group, link, state, t, out) {
      const { table } = group;
      for (let k = 0; k < state.species; k++) {
        geometry(table, link, k, state, t, shape);
        const difference =
          state.partial[table.from[link]! * state.species + k]! - state.partial[table.to[link]! * state.species + k]!;
        out[k] = table.coefficients[link * table.stride + k]! * shape[0]! * difference;
      }
    },

    conductance(group: LinkGroup, link, state, t, out) {
      const { table } = group;
      for (let k = 0; k < state.species; k++) {
        geometry(table, link, k, state, t, shape);
        out[k] = table.coefficients[link * table.stride + k]! * shape[0]!;
      }
    },
  };
}

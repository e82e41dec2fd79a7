/**
 * Diffusion through liquid: between two separated bubbles, and from a bubble to a pool.
 *
 * Two bubbles at centre distance d: conduction shape factor between two spheres in an unbounded medium,
 * `S = 4 pi/(1/R_i + 1/R_j - 2/d)`, for d large against R (Incropera & DeWitt, tables of conduction shape factors; from memory).
 * To a pool: `S = 4 pi R`, and with the transient term `4 pi R^2 (1/R + 1/sqrt(pi D t))` (Epstein & Plesset 1950), t from the run's start.
 * Coefficients: g_k = D_k H_k (mol/(s Pa m)), then d (m), or 1 where the transient term is wanted and 0 where not.
 */
import { diffusiveKernel } from './diffusive.ts';
import type { LinkKernel } from './link-kernel.ts';

export const betweenBubbles: LinkKernel = diffusiveKernel((table, link, _k, state, _t, out) => {
  const Ri = state.radius[table.from[link]!]!;
  const Rj = state.radius[table.to[link]!]!;
  const d = table.coefficients[link * table.stride + state.species]!;
  // Spheres that have grown into one another have no liquid between them: no number may come of it.
  const resistance = Ri + Rj < d ? 1 / Ri + 1 / Rj - 2 / d : NaN;
  out[0] = (4 * Math.PI) / resistance;
  out[1] = out[0] / (resistance * Ri * Ri);
  out[2] = out[0] / (resistance * Rj * Rj);
  out[3] = 0;
});

/**
 * The transient term is infinite at t = 0, though what passes is finite (it goes as sqrt(t)). Time is held above this share of the
 * bubble's own diffusion time R^2/D: what is left out is 1e-6 of the amount dissolved in a shell one radius thick.
 */
const EARLIEST = 1e-12;

export const toPool: LinkKernel = diffusiveKernel((table, link, k, state, t, out) => {
  const fromPool = state.radius[table.from[link]!] === Infinity;
  const R = state.radius[(fromPool ? table.to : table.from)[link]!]!;
  const own = fromPool ? 2 : 1;
  out[0] = 4 * Math.PI * R;
  out[own] = 4 * Math.PI;
  out[3 - own] = 0;
  out[3] = 0;
  if (table.coefficients[link * table.stride + state.species] === 0) return;
  const D = state.network.diffusivity[k]!;
  const earliest = (EARLIEST * R * R) / D;
  const time = t > earliest ? t : earliest;
  const depth = Math.sqrt(Math.PI * D * time);
  out[0] += (4 * Math.PI * R * R) / depth;
  // Where time is held, the depth goes with R.
  out[own] += ((t > earliest ? 8 : 4) * Math.PI * R) / depth;
  out[3] = t > earliest ? (-2 * Math.PI * R * R) / (depth * time) : 0;
});

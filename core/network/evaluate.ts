/**
 * Fills a node state at (t, y): every active bubble by its kernel, cavities, pools and reservoirs by their own laws,
 * partial pressures where there are several species.
 */
import { GAS_CONSTANT } from '../quantities/constants.ts';
import { CAVITY, POOL, RESERVOIR } from './network.ts';
import { fail, type NodeState } from './node-state.ts';
import { evaluateShaped } from './shaped.ts';
import { differentiateSpheres, evaluateSpheres } from './sphere.ts';
import { waveformSlope, waveformValue } from './waveform.ts';

/**
 * A share of its gas, or a pressure in Pa, by which a species may fall below zero before that counts: integration errs by less, and
 * what falls further is gas that is not there.
 */
const BELOW_ZERO = -1e-5;

/**
 * @param side which value an edge of a waveform has: after it (1) or before it (-1)
 * @param withSlopes fill stiffness, slopes and drifts too
 * @returns false where a bubble holds no gas or has no balance: the state is outside what the laws allow
 */
export function evaluateNodes(
  state: NodeState,
  t: number,
  y: Float64Array,
  side: 1 | -1,
  withSlopes: boolean,
): boolean {
  const { network, species, pressure, partial } = state;
  const ambient = waveformValue(network.ambient, t, side);
  const ambientDrift = withSlopes ? waveformSlope(network.ambient, t, side) : 0;
  if (!evaluateSpheres(state, ambient, y)) return false;
  if (!evaluateShaped(state, ambient, ambientDrift, y, withSlopes)) return false;
  if (withSlopes) differentiateSpheres(state, ambient, ambientDrift);

  const { nodes } = network;
  const RT = GAS_CONSTANT * network.temperature;
  for (let q = 0; q < state.rigid.length; q++) {
    const i = state.rigid[q]!;
    const kind = nodes.kind[i];
    let total = 0;
    if (kind === CAVITY) {
      const perMole = RT / nodes.volume[i]!;
      for (let k = 0; k < species; k++) total += partial[i * species + k] = y[i * species + k]! * perMole;
      state.stiffness[i] = perMole;
    } else if (kind === POOL) {
      for (let k = 0; k < species; k++)
        total += partial[i * species + k] = y[i * species + k]! / nodes.capacity[i * species + k]!;
      state.stiffness[i] = 1 / nodes.capacity[i * species]!;
    } else if (kind === RESERVOIR) {
      total = waveformValue(nodes.drive[i]!, t, side);
      for (let k = 0; k < species; k++) partial[i * species + k] = total * nodes.fraction[i * species + k]!;
      state.stiffness[i] = 0;
      if (withSlopes) state.pressureDrift[i] = waveformSlope(nodes.drive[i]!, t, side);
    }
    for (let k = 0; k < species; k++) {
      if (!(partial[i * species + k]! >= BELOW_ZERO * Math.max(1, total))) return fail(state, i);
    }
    pressure[i] = total;
  }
  return species === 1 || spread(state, y, withSlopes);
}

/** Partial pressures of bubbles, p_k = p n_k/n, and for every node d p_k/d n_l; false where a bubble holds less than nothing. */
function spread(state: NodeState, y: Float64Array, withSlopes: boolean): boolean {
  const { species, pressure, partial, partialSlope, stiffness } = state;
  const { nodes, temperature } = state.network;
  for (let list = 0; list < 2; list++) {
    const index = list === 0 ? state.spheres : state.shaped;
    const count = list === 0 ? state.sphereCount : state.shapedCount;
    for (let q = 0; q < count; q++) {
      const i = index[q]!;
      let n = 0;
      for (let k = 0; k < species; k++) n += y[i * species + k]!;
      const p = pressure[i]!;
      for (let k = 0; k < species; k++) {
        const x = y[i * species + k]! / n;
        if (!(x >= BELOW_ZERO)) return fail(state, i);
        partial[i * species + k] = p * x;
        if (!withSlopes) continue;
        // d p_k/d n_l = x_k u + (p/n)(delta_kl - x_k)
        const row = (i * species + k) * species;
        for (let l = 0; l < species; l++) partialSlope[row + l] = x * stiffness[i]! + (p / n) * ((k === l ? 1 : 0) - x);
      }
    }
  }
  if (!withSlopes) return true;
  for (let q = 0; q < state.rigid.length; q++) {
    const i = state.rigid[q]!;
    for (let k = 0; k < species; k++) {
      const own =
        nodes.kind[i] === CAVITY
          ? (GAS_CONSTANT * temperature) / nodes.volume[i]!
          : nodes.kind[i] === POOL
            ? 1 / nodes.capacity[i * species + k]!
            : 0;
      partialSlope[(i * species + k) * species + k] = own;
    }
  }
  return true;
}

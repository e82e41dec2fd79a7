/**
 * The fast kernel: free spheres of constant tension. From the amount of gas to radius and pressure.
 *
 *   p = P + g/R,  p (4/3) pi R^3 = n R_gas T,  g = 2 f gamma     (Young-Laplace; ideal gas; physics.md section 2)
 *   => F(R) = (P R + g) R^2 - c n = 0,  c = 3 R_gas T/(4 pi)
 *
 * Solved by Halley's method from the last radius: two steps reach rounding for any change that a time step makes.
 */
import { GAS_CONSTANT } from '../quantities/constants.ts';
import { fail, type NodeState } from './node-state.ts';

/**
 * Radius and pressure of the active plain spheres.
 * @param ambient vessel pressure, Pa
 * @param y amounts, mol, node * species + k
 * @returns false where an amount is not positive
 */
export function evaluateSpheres(state: NodeState, ambient: number, y: Float64Array): boolean {
  const { spheres, sphereCount, size, radius, pressure, tension, species } = state;
  const { faces, head } = state.network.nodes;
  const c = (3 * GAS_CONSTANT * state.network.temperature) / (4 * Math.PI);
  for (let q = 0; q < sphereCount; q++) {
    const i = spheres[q]!;
    let n = y[i * species]!;
    for (let k = 1; k < species; k++) n += y[i * species + k]!;
    if (!(n > 0)) return fail(state, i);
    const P = ambient + head[i]!;
    const g = 2 * faces[i]! * tension[i]!;
    const target = c * n;
    let R = size[i]!;
    if (!(R > 0)) R = Math.cbrt(target / P);
    // Halley: R <- R - 2 F F'/(2 F'^2 - F F''),  F' = R (3 P R + 2 g),  F'' = 6 P R + 2 g.
    let change = 1;
    for (let pass = 0; pass < 60; pass++) {
      const F = (P * R + g) * R * R - target;
      const slope = R * (3 * P * R + 2 * g);
      change = (2 * F * slope) / (2 * slope * slope - F * (6 * P * R + 2 * g));
      R = change < 0.9 * R ? R - change : 0.1 * R;
      // The error left is of the order of the cube of the relative change.
      if (change < 1e-5 * R && change > -1e-5 * R) break;
    }
    if (!(Math.abs(change) <= 1e-5 * R)) return fail(state, i);
    size[i] = R;
    radius[i] = R;
    pressure[i] = P + g / R;
  }
  return true;
}

/**
 * Slopes of the active plain spheres, after `evaluateSpheres`:
 *   dR/dn = c/(R (3 P R + 2 g)),  dp/dn = -(g/R^2) dR/dn,
 *   and at constant n, with dP/dt: dR/dt = -R^3/(R (3 P R + 2 g)) dP/dt,  dp/dt = dP/dt - (g/R^2) dR/dt.
 */
export function differentiateSpheres(state: NodeState, ambient: number, ambientDrift: number): void {
  const { spheres, sphereCount, radius, tension, stiffness, radiusSlope, pressureDrift, radiusDrift } = state;
  const { faces, head } = state.network.nodes;
  const c = (3 * GAS_CONSTANT * state.network.temperature) / (4 * Math.PI);
  for (let q = 0; q < sphereCount; q++) {
    const i = spheres[q]!;
    const R = radius[i]!;
    const P = ambient + head[i]!;
    const g = 2 * faces[i]! * tension[i]!;
    const inverse = 1 / (R * (3 * P * R + 2 * g));
    const dRdn = c * inverse;
    radiusSlope[i] = dRdn;
    stiffness[i] = -(g / (R * R)) * dRdn;
    const drift = -R * R * R * inverse * ambientDrift;
    radiusDrift[i] = drift;
    pressureDrift[i] = ambientDrift - (g / (R * R)) * drift;
  }
}

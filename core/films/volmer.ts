/**
 * Volmer's law of state: a two-dimensional gas of molecules that move freely and only exclude each other's area.
 * Volmer, Z. Phys. Chem. 115 (1925) 253. With x = theta/(1-theta):
 *
 *   c/c_s = x exp(x),  Pi = n R T Gamma_inf x,  d ln c/d ln Gamma = 1/(1-theta)^2
 *
 * Gibbs' equation holds: d Pi/dx = n R T Gamma_inf and d ln c/dx = 1/x + 1 = 1/theta.
 */
import { pressureScaleOf, type LawParameters, type TensionLaw } from './law.ts';

export function createVolmer(parameters: LawParameters, temperature: number): TensionLaw {
  const { clean, saturation, szyszkowski } = parameters;
  const pressureScale = pressureScaleOf(parameters, temperature);
  return {
    clean,
    saturation,
    szyszkowski,
    thetaMax: 1,
    pressureScale,
    twoPhase: null,
    surfacePressure: (theta, free = 1 - theta) => (pressureScale * theta) / free,
    concentration: (theta, free = 1 - theta) => {
      const x = theta / free;
      return szyszkowski * x * Math.exp(x);
    },
    steepness: (theta, free = 1 - theta) => 1 / (free * free),
    crowdingAt: (concentration) => solveCrowding(concentration / szyszkowski),
  };
}

/**
 * x from x exp(x) = c/c_s. Newton's method on z + exp(z) = ln(c/c_s), z = ln x: the left side is convex and rising,
 * and the start lies right of the root, so every step stays right of it and none can stray.
 */
function solveCrowding(relative: number): number {
  if (relative === 0) return 0;
  const target = Math.log(relative);
  let z = target <= 1 ? target : Math.log(target);
  for (let pass = 0; pass < 100; pass++) {
    const x = Math.exp(z);
    const step = (z + x - target) / (1 + x);
    z -= step;
    if (Math.abs(step) < 1e-9) break;
  }
  return Math.exp(z);
}

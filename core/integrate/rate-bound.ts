/** How fast the fastest mode of a system can be: what decides whether an explicit method may have it. */
import type { System } from './system.ts';

/**
 * An upper bound on the rate of every mode of the Jacobian at (t, y), 1/s: its 1-norm (Gershgorin). A bound from above cannot
 * overlook a fast mode, as an iteration from a chosen start can; for exchange between nodes it is at most twice the truth.
 * NaN where the state has no Jacobian.
 */
export function rateBound(system: System, t: number, y: Float64Array): number {
  const rates = new Float64Array(system.size);
  system.linearise(t, y, rates, new Float64Array(system.size));
  return system.matrix.rateBound();
}

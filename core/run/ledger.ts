/** The balance: that no gas and no surfactant is lost or made. Relative to what there was at the start. */
import type { Network } from '../network/network.ts';

export interface Ledger {
  /** Gas that left with a vanished bubble that had no neighbour, mol per species; counted as still there. */
  readonly dropped: Float64Array;
  /**
   * Gas balance of state y, worst species, relative to the gas there was at the start or to all that has moved since, whichever is
   * more: a supply may bring in a million times what there was. Remembers the worst ever.
   * @param inTransit gas on its way that is in no node, species by species in turn; its length a multiple of their number
   */
  gasBalance(y: Float64Array, inTransit: Float64Array): number;
  readonly worst: number;
}

/**
 * @param species number of gas species
 * @param y the state at the start: amounts of every node, accounts of reservoirs and feeds at zero
 */
export function createLedger(species: number, y: Float64Array): Ledger {
  const dropped = new Float64Array(species);
  const initial = new Float64Array(species);
  const sizes = new Float64Array(species);
  sumSpecies(species, y, initial, sizes);
  const now = new Float64Array(species);
  const whole = initial.reduce((a, b) => a + b, 0);
  let worst = 0;
  return {
    dropped,
    gasBalance(state, inTransit) {
      sumSpecies(species, state, now, sizes);
      for (let q = 0; q < inTransit.length; q++) now[q % species]! += inTransit[q]!;
      let error = 0;
      for (let k = 0; k < species; k++) {
        // A species that is absent at the start is measured against all the gas.
        const against = Math.max(initial[k]! > 0 ? initial[k]! : whole, sizes[k]!);
        error = Math.max(error, Math.abs(now[k]! + dropped[k]! - initial[k]!) / against);
      }
      if (error > worst) worst = error;
      return error;
    },
    get worst() {
      return worst;
    },
  };
}

/**
 * Sums per species, and the sums of the sizes, accounts of reservoirs and feeds among them. With Neumaier's compensation: the balance
 * must show the run's rounding, not the sum's.
 */
function sumSpecies(species: number, y: Float64Array, out: Float64Array, sizes: Float64Array): void {
  for (let k = 0; k < species; k++) {
    let sum = 0;
    let carry = 0;
    let size = 0;
    for (let u = k; u < y.length; u += species) {
      const v = y[u]!;
      const next = sum + v;
      carry += Math.abs(sum) >= Math.abs(v) ? sum - next + v : v - next + sum;
      sum = next;
      size += Math.abs(v);
    }
    out[k] = sum + carry;
    sizes[k] = size;
  }
}

/** Surfactant of every bubble's faces, mol: what the run must still hold at its end, with what vanished bubbles left. */
export function surfactantOf(network: Network): number {
  let sum = 0;
  for (let i = 0; i < network.nodes.bubbleCount; i++) sum += network.nodes.faces[i]! * network.nodes.surfactant[i]!;
  return sum;
}

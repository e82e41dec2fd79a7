/** A matrix that its owner fills by places: what the three shapes of this room have in common. */
import type { ShiftedMatrix } from '../system.ts';

export interface AssembledMatrix extends ShiftedMatrix {
  readonly size: number;
  /** The entries of J; owners do `clear()` and then `values[slot] += x`. */
  readonly values: Float64Array;
  /** Place of an entry in `values`; -1 where the structure has none. The diagonal is always there. */
  slot(row: number, column: number): number;
  clear(): void;
}

/** A pivot below this share of the largest entry of its column is not to be trusted. */
export const SMALLEST_PIVOT = 1e-10;

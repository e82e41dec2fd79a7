/**
 * What the bench runs and what is wanted of it: for each problem the tolerance that ours and the peers need to come within the
 * accuracy asked for, and the ratios to reach.
 */

export interface Entry {
  readonly name: string;
  readonly kind: 'pool' | 'contacts' | 'cycle';
  readonly size: number;
  /** End time and R_21 (cycle: both radii) must come this near the check value, relative. */
  readonly accuracy: number;
  /** Our run tolerance. */
  readonly tolerance: number;
  /**
   * Relative and absolute tolerance of each peer: the loosest of 1e-5, 1e-6, 1e-7, 1e-8, 1e-9 that reached the accuracy
   * (pool-100000: that of pool-10000).
   */
  readonly peers: { readonly scipy: string; readonly cvode: string };
  readonly targets: { readonly timesFasterThanScipy: number; readonly timeOverCvode: number };
}

const entry = (
  kind: Entry['kind'],
  size: number,
  tolerance: number,
  peers: Entry['peers'],
  timesFasterThanScipy: number,
  timeOverCvode: number,
): Entry => ({
  name: `${kind}-${size}`,
  kind,
  size,
  accuracy: kind === 'cycle' ? 1e-6 : 1e-5,
  tolerance,
  peers,
  targets: { timesFasterThanScipy, timeOverCvode },
});

export const ENTRIES: readonly Entry[] = [
  entry('pool', 1000, 4e-6, { scipy: '1e-7', cvode: '1e-7' }, 15, 1),
  entry('pool', 10000, 1e-5, { scipy: '1e-7', cvode: '1e-6' }, 30, 0.25),
  entry('pool', 100000, 1e-5, { scipy: '1e-7', cvode: '1e-6' }, 45, 0.15),
  entry('contacts', 10, 4e-6, { scipy: '1e-6', cvode: '1e-7' }, 4, 1),
  entry('contacts', 20, 3e-5, { scipy: '1e-7', cvode: '1e-7' }, 5, 0.5),
  entry('contacts', 30, 3e-5, { scipy: '1e-7', cvode: '1e-7' }, 6, 0.4),
  entry('cycle', 8, 1e-4, { scipy: '1e-5', cvode: '1e-6' }, 12, 3),
  entry('cycle', 32, 1e-4, { scipy: '1e-5', cvode: '1e-7' }, 6, 3),
];

/** The command on a file of two bubbles, from start to files written, s. */
export const TWO_BUBBLES = { name: 'two-bubbles', within: 0.5 };
/** Peak memory of pool-100000, MB. */
export const MOST_MEMORY = { name: 'pool-100000', within: 150 };

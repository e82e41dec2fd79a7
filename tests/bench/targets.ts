/**
 * What the bench runs and what is wanted of it: for each problem the tolerance at which each program reaches the accuracy asked for,
 * and the ratios to reach.
 */

export type PeerName = 'scipy' | 'cvode';

export interface Target {
  readonly name: string;
  readonly kind: 'pool' | 'contacts' | 'cycle';
  readonly size: number;
  /** End time and R_21 (cycle: both radii) must come this near the check value, relative. */
  readonly accuracy: number;
  /** Our run tolerance. */
  readonly tolerance: number;
  /** Relative and absolute tolerance of each peer. */
  readonly peers: Readonly<Record<PeerName, number>>;
  readonly timesFasterThanScipy: number;
  readonly timeOverCvode: number;
}

const target = (
  kind: Target['kind'],
  size: number,
  tolerance: number,
  scipy: number,
  cvode: number,
  timesFasterThanScipy: number,
  timeOverCvode: number,
): Target => ({
  name: `${kind}-${size}`,
  kind,
  size,
  accuracy: kind === 'cycle' ? 1e-6 : 1e-5,
  tolerance,
  peers: { scipy, cvode },
  timesFasterThanScipy,
  timeOverCvode,
});

/**
 * The peers' tolerances are what `--calibrate` found. The distance from the check value that belongs to each tolerance stands at the
 * end of the line: ours, scipy's, cvode's.
 */
export const TARGETS: readonly Target[] = [
  //                   ours   scipy   cvode  wanted
  target('pool', 1000, 4e-6, 1e-7, 1e-7, 15, 1),
  target('pool', 10000, 1e-5, 1e-7, 1e-6, 30, 0.25),
  target('pool', 100000, 1e-5, 1e-7, 1e-6, 45, 0.15),
  target('contacts', 10, 2e-6, 1e-6, 1e-7, 4, 1),
  target('contacts', 20, 3e-5, 1e-7, 1e-7, 5, 0.5),
  target('contacts', 30, 3e-5, 1e-7, 1e-7, 6, 0.4),
  target('cycle', 8, 1e-4, 1e-5, 1e-6, 12, 3),
  target('cycle', 32, 1e-4, 1e-5, 1e-7, 6, 3),
];

/** The command on a file of two bubbles, from start to files written, s. */
export const TWO_BUBBLES = { name: 'two-bubble', within_s: 0.5 };

/** Peak memory of one problem, MB. */
export const MEMORY = { name: 'pool-100000', within_mb: 150 };

export const NAMES: readonly string[] = [...TARGETS.map(({ name }) => name), TWO_BUBBLES.name];

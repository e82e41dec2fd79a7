/**
 * What one process says of one problem, in the words that the peers' programs use too, and how far that is from the check values.
 */

/** One line of JSON on standard output, from our child and from the peers alike; a peer may say more. */
export interface Measurement {
  readonly wall_s: number;
  /** The first run of the process, compiling included; ours alone tells it. */
  readonly first_s?: number;
  readonly cpu_s: number;
  readonly steps: number;
  readonly t_end: number;
  readonly R21_end: number;
  readonly left: number;
  /** Least and greatest radius over the last cycle, m; of cycles alone. */
  readonly r_min?: number;
  readonly r_max?: number;
  readonly peak_rss_mb: number;
  /** The problem's check values; our child alone knows and tells them. */
  readonly check?: Check;
}

export interface Check {
  readonly endTime: number;
  readonly R21: number;
  readonly left: number;
  readonly radii?: readonly [least: number, greatest: number];
}

export interface Failure {
  readonly failed: string;
}

/**
 * Worst relative distance from the check values: end time and R_21, of a cycle the two radii. A wrong number of bubbles left counts
 * by its share, and so is never let through. A value that is missing makes NaN, which no comparison lets through either.
 */
export function distance(said: Measurement, check: Check): number {
  const pairs: (readonly [number | undefined, number])[] =
    check.radii === undefined
      ? [
          [said.t_end, check.endTime],
          [said.R21_end, check.R21],
        ]
      : [
          [said.r_min, check.radii[0]],
          [said.r_max, check.radii[1]],
        ];
  pairs.push([said.left, check.left]);
  return Math.max(...pairs.map(([value, wanted]) => Math.abs((value ?? NaN) / wanted - 1)));
}

export function median(values: readonly number[]): number {
  const sorted = [...values].sort((a, b) => a - b);
  const middle = Math.floor(sorted.length / 2);
  return sorted.length % 2 === 1 ? sorted[middle]! : (sorted[middle - 1]! + sorted[middle]!) / 2;
}

/** What all rounds of one program on one problem come to: medians, and the worst of what is not a matter of the machine's mood. */
export interface Summary extends Measurement {
  /** Least and greatest wall time, s. */
  readonly spread_s: readonly [number, number];
  readonly tolerance: number;
  readonly accuracy: number;
}

export function summarise(rounds: readonly Measurement[], check: Check, tolerance: number): Summary {
  const { steps, t_end, R21_end, left } = rounds[0]!;
  const walls = rounds.map((round) => round.wall_s);
  return {
    wall_s: median(walls),
    ...(rounds[0]!.first_s === undefined ? {} : { first_s: median(rounds.map((round) => round.first_s ?? NaN)) }),
    cpu_s: median(rounds.map((round) => round.cpu_s)),
    steps,
    t_end,
    R21_end,
    left,
    accuracy: Math.max(...rounds.map((round) => distance(round, check))),
    peak_rss_mb: Math.max(...rounds.map((round) => round.peak_rss_mb)),
    spread_s: [Math.min(...walls), Math.max(...walls)],
    tolerance,
  };
}

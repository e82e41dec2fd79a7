/**
 * The loosest tolerance of a ladder, three rungs a decade, at which a program reaches the accuracy asked for. A peer may reach it by
 * luck; ours must reach it on the tighter rungs that follow too.
 */
import { distance, type Check, type Failure, type Measurement } from './measurement.ts';

/** Rungs in succession that must reach the accuracy. */
export const HOLD = { ours: 3, scipy: 1, cvode: 1 } as const;
const LOOSEST = 1e-3;
const TIGHTEST = 1e-11;

/** From 1e-3, or from the loosest that is asked for, down to 1e-11: 1, 4.6, 2.2, 1 times the powers of ten. */
export function ladder(loosest: number | null): number[] {
  const rungs: number[] = [];
  for (let third = 0; ; third++) {
    const rung = Number((10 ** (-third / 3)).toPrecision(2));
    if (rung < TIGHTEST) return rungs;
    if (rung <= (loosest ?? LOOSEST)) rungs.push(rung);
  }
}

export interface Rung {
  readonly tolerance: number;
  readonly outcome: Failure | { readonly accuracy: number; readonly steps: number; readonly wall_s: number };
}

/**
 * Goes down the ladder until `hold` rungs in succession reach `wanted`, and gives the first of these; null where none do. A program
 * that fails on a rung goes on with the next, but one that ran out of time would only take longer.
 */
export function loosest(
  rungs: readonly number[],
  hold: number,
  wanted: number,
  check: Check,
  run: (tolerance: number) => Measurement | Failure,
  tell: (rung: Rung) => void,
): number | null {
  let held: number[] = [];
  for (const tolerance of rungs) {
    const said = run(tolerance);
    if ('failed' in said) {
      tell({ tolerance, outcome: said });
      if (said.failed.startsWith('not done')) return null;
      held = [];
      continue;
    }
    const accuracy = distance(said, check);
    tell({ tolerance, outcome: { accuracy, steps: said.steps, wall_s: said.wall_s } });
    held = accuracy <= wanted ? [...held, tolerance] : [];
    if (held.length === hold) return held[0]!;
  }
  return null;
}

/** How the tolerance of a program is found. */
import { describe, expect, it } from 'vitest';
import { ladder, loosest } from './calibrate.ts';
import type { Failure, Measurement } from './measurement.ts';

const check = { endTime: 1, R21: 1, left: 1 };
const endingAt = (t_end: number): Measurement => ({
  ...{ wall_s: 1, cpu_s: 1, steps: 1, peak_rss_mb: 1 },
  ...{ t_end, R21_end: 1, left: 1 },
});
const find = (hold: number, outcomes: readonly (number | Failure)[]): { found: number | null; tried: number } => {
  let tried = 0;
  const run = (): Measurement | Failure => {
    const outcome = outcomes[tried++]!;
    return typeof outcome === 'number' ? endingAt(1 + outcome) : outcome;
  };
  const rungs = outcomes.map((_, r) => 10 ** -r);
  return { found: loosest(rungs, hold, 1e-5, check, run, () => undefined), tried };
};

describe('the ladder of tolerances', () => {
  it('has three rungs a decade from the loosest that is asked for', () => {
    expect(ladder(1e-5).slice(0, 5)).toEqual([1e-5, 4.6e-6, 2.2e-6, 1e-6, 4.6e-7]);
  });

  it('ends at 1e-11', () => {
    expect(ladder(null).at(-1)).toBe(1e-11);
  });
});

describe('the loosest tolerance', () => {
  it('of a peer is the first that reaches the accuracy, though the next would not', () => {
    expect(find(1, [1e-3, 1e-6, 1e-4])).toEqual({ found: 0.1, tried: 2 });
  });

  it('of ours is the first from which the accuracy holds', () => {
    expect(find(2, [1e-6, 1e-4, 1e-6, 1e-7, 1e-8])).toEqual({ found: 0.01, tried: 4 });
  });

  it('is none where no rung reaches the accuracy', () => {
    expect(find(1, [1e-3, 1e-4]).found).toBeNull();
  });

  it('is looked for beyond a rung on which the program failed', () => {
    expect(find(1, [{ failed: 'singular' }, 1e-6]).found).toBe(0.1);
  });

  it('is not looked for further once the time ran out', () => {
    expect(find(1, [{ failed: 'not done after 600 s' }, 1e-6])).toEqual({ found: null, tried: 1 });
  });
});

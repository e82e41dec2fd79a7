/** How near a run comes to its check values, and what several rounds come to. */
import { describe, expect, it } from 'vitest';
import { distance, median, summarise, type Measurement } from './measurement.ts';

const said: Measurement = { wall_s: 1, cpu_s: 1, steps: 10, t_end: 200, R21_end: 4, left: 100, peak_rss_mb: 60 };
const check = { endTime: 200, R21: 4, left: 100 };

describe('the distance from the check values', () => {
  it('is the worse of end time and R_21, whichever way they are off', () => {
    // 202 is 1/100 above 200, 3.9 is 1/40 below 4; the tolerance is that of a double.
    expect(distance({ ...said, t_end: 202, R21_end: 3.9 }, check)).toBeCloseTo(0.025, 14);
  });

  it('of a cycle is that of its radii, and its end time is no merit', () => {
    const cycle = { ...check, radii: [2, 3] as const };
    expect(distance({ ...said, t_end: 1, r_min: 2, r_max: 3.3 }, cycle)).toBeCloseTo(0.1, 14);
  });

  it('of a run that leaves one bubble too many counts that bubble', () => {
    expect(distance({ ...said, left: 101 }, check)).toBeCloseTo(0.01, 14);
  });

  it('of a cycle without radii passes for no accuracy at all', () => {
    expect(distance(said, { ...check, radii: [2, 3] }) <= 1).toBe(false);
  });
});

describe('several rounds', () => {
  it('have the middle one as their median, or the mean of the middle two', () => {
    expect(median([30, 1, 2])).toBe(2);
    expect(median([4, 1, 2, 30])).toBe(3);
  });

  it('come to the median time, the spread, and the worst accuracy and memory', () => {
    const rounds = [said, { ...said, wall_s: 5, t_end: 202 }, { ...said, wall_s: 2, peak_rss_mb: 90 }];
    const summary = summarise(rounds, check, 1e-6);
    expect(summary).toMatchObject({ wall_s: 2, spread_s: [1, 5], peak_rss_mb: 90, steps: 10, tolerance: 1e-6 });
    expect(summary.accuracy).toBeCloseTo(0.01, 14);
  });
});

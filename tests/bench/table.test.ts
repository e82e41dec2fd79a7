/** What the table says of a problem, its peers and its targets. */
import { describe, expect, it } from 'vitest';
import type { Summary } from './measurement.ts';
import { tableText, type Row } from './table.ts';
import type { Target } from './targets.ts';

const target: Target = {
  ...{ name: 'pool-1000', kind: 'pool', size: 1000, accuracy: 1e-5, tolerance: 1e-6 },
  ...{ peers: { scipy: 1e-6, cvode: 1e-7 }, timesFasterThanScipy: 15, timeOverCvode: 1 },
};
const summary = (wall_s: number, accuracy = 1e-6, tolerance = 1e-6): Summary => ({
  ...{ wall_s, cpu_s: wall_s, spread_s: [wall_s, wall_s], steps: 116, tolerance, accuracy },
  ...{ t_end: 1, R21_end: 1, left: 1, peak_rss_mb: 64 },
});
const text = (row: Partial<Row>, withPeers = true): string =>
  tableText({
    rows: [{ target, ours: summary(0.2), peers: {}, ...row }],
    command: null,
    withPeers,
    memoryOfNothing: 44,
  });

describe('the table', () => {
  it('gives a problem one line with its time, steps, accuracy and memory', () => {
    expect(text({}, false)).toMatch(/^pool-1000 +200 ms +200 ms to 200 ms +116 +1\.0e-6 +64 MB$/m);
  });

  it('says how many times faster than the one peer and how long over the other, and that this is enough', () => {
    expect(text({ peers: { scipy: summary(4), cvode: summary(0.4) } })).toMatch(
      /4\.00 s +20\.0 +15 met +400 ms +0\.500 +1 met$/m,
    );
  });

  it('says by what factor a ratio is missed', () => {
    expect(text({ peers: { scipy: summary(2), cvode: summary(0.1) } })).toMatch(
      /2\.00 s +10\.0 +15 missed by 1\.50 +100 ms +2\.00 +1 missed by 2\.00$/m,
    );
  });

  it('has no verdict on a peer that is absent', () => {
    expect(text({ peers: { scipy: summary(4) } })).toMatch(/15 met +absent +1$/m);
  });

  it('marks a peer that does not reach the accuracy, with how far it is off', () => {
    const table = text({ peers: { scipy: summary(4, 3e-5), cvode: summary(0.4) } });
    expect(table).toMatch(/4\.00 s\*/);
    expect(table).toContain('* scipy on pool-1000 is off by 3.0e-5 at 0.000001; 0.00001 is wanted.');
  });

  it('says why a peer failed', () => {
    const table = text({ peers: { scipy: { failed: 'not done after 600 s' }, cvode: summary(0.4) } });
    expect(table).toContain('scipy on pool-1000: not done after 600 s');
  });

  it('marks our own time when it is not accurate enough', () => {
    expect(text({ ours: summary(0.2, 2e-5) })).toContain('2.0e-5 FAILS');
  });

  it('keeps a problem of ours that failed, with its sentence', () => {
    const table = text({ ours: { failed: 'the step became too small' }, peers: { scipy: summary(4) } });
    expect(table).toMatch(/^pool-1000 +failed/m);
    expect(table).toContain('pool-1000 failed: the step became too small');
  });

  it('judges the memory of the largest pool', () => {
    const largest = { ...target, name: 'pool-100000' };
    expect(text({ target: largest, ours: { ...summary(4), peak_rss_mb: 300 } })).toContain(
      'MB: 300; wanted 150 missed by 2.00',
    );
  });

  it('judges the time of the command alone when no problem is asked for', () => {
    const command = { wall_s: 0.16, spread_s: [0.15, 0.17] as const, steps: 216, t_end: 15 };
    expect(tableText({ rows: [], command, withPeers: false, memoryOfNothing: 44 })).toBe(
      'two-bubble, the command from start to files, s: 160 ms (150 ms to 170 ms); wanted 0.5 met.\n',
    );
  });
});

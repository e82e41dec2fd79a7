/** The closing words of a run: what happened, in words that name it. */
import { describe, expect, it } from 'vitest';
import type { RunEvent } from '../../../core/run/record.ts';
import type { Highlights, RunSummary } from '../../../electron/command/run-summary.ts';
import { closingWords, noteHighlight } from '../../../electron/command/run-summary.ts';

const SUMMARY: RunSummary = {
  program: 'frothwright',
  version: '0.1.0',
  scenario: { title: 'A bank of three', file: 'three.froth.json', sha256: '' },
  endTime_s: 7200,
  stop: { kind: 'done' },
  method: 'stiff',
  steps: 120,
  rejected: 3,
  rateEvaluations: 800,
  wallTime_s: 0.2,
  bubblesLeft: 1,
  events: { 'pair-unstable': 1, 'bubble-vanished': 2, 'run-ended': 1 },
  gasBalance: 0,
  surfactantBalance: 0,
  warnings: [],
  criteria: [],
  tables: { 'events.csv': 4, 'pairs.csv': 'not written: not asked for by --tables' },
};

function event(name: RunEvent['event'], time: number, subject: string, partner = '', link = ''): RunEvent {
  return { time, event: name, subject, partner, link, value: Number.NaN, unit: '', detail: '' };
}

function after(...events: RunEvent[]): Highlights {
  const highlights: Highlights = { firstUnstable: null, firstVanished: null, lastVanished: null };
  for (const one of events) noteHighlight(highlights, one);
  return highlights;
}

describe('the closing words', () => {
  const story = after(
    event('pair-unstable', 0.5, 'A', 'B', 't1'),
    event('pair-unstable', 0.7, 'A', 'C', 't2'),
    event('bubble-vanished', 90, 'B'),
    event('bubble-vanished', 3600, 'C'),
  );
  const text = closingWords(SUMMARY, story, 'results/three');

  it('say how far the run came and how many bubbles are left', () => {
    expect(text).toMatch(/^A bank of three\n {2}Ran to 2 h \(120 steps, stiff\); 1 bubble is left\.\n/);
  });
  it('count the events, the end of the run not among them', () => {
    expect(text).toContain('\n  1 pair turned unstable\n  2 bubbles vanished\n');
    expect(text).not.toContain('run ended');
  });
  it('name the first pair that turned unstable, and the first and the last bubble that vanished', () => {
    expect(text).toContain('First unstable pair: A and B (t1) at 500 ms\n');
    expect(text).toContain('First to vanish: B at 1.5 min, last: C at 1 h\n');
  });
  it('say where the files are', () => {
    expect(text.endsWith('Files are in results/three\n')).toBe(true);
  });
  it('name a table that is missing for its length, not one that was not asked for', () => {
    expect(text).not.toContain('pairs.csv');
    const long = { ...SUMMARY, tables: { 'pairs.csv': 'not written: it would have had about 9000000 rows' } };
    expect(closingWords(long, story, 'r')).toContain('pairs.csv not written: it would have had about 9000000 rows');
  });
  it('say that the solver could not go on', () => {
    const failed = { ...SUMMARY, stop: { kind: 'failed', sentence: '', node: 'B', time: 3 } } as const;
    expect(closingWords(failed, story, 'r')).toContain('The solver could not go on at 2 h; 1 bubble is left.');
  });
  it('say that a person stopped it', () => {
    const stopped = { ...SUMMARY, stop: { kind: 'interrupted' } } as const;
    expect(closingWords(stopped, after(), 'r')).toContain('Stopped by you at 2 h; 1 bubble is left.');
  });
});

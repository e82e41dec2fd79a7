/** What an engineer reads after a check: the answer first, the worst next, and no more lines than can be read. */
import { describe, expect, it } from 'vitest';
import type { CheckReport } from '../../../electron/command/check-report.ts';
import { checkWords } from '../../../electron/command/check-words.ts';

const BUBBLE = {
  bubble: 'A',
  radius_m: 5e-3,
  pressure_Pa: 101353.8,
  overpressure_Pa: 28.8,
  tension_N_per_m: 0.072,
  elasticity_N_per_m: 0,
  coverage: Number.NaN,
  index: 0,
  state: 'cap-above-mouth',
};

const PAIR = { link: 't1', from: 'A', to: 'B', flow_mol_per_s: 1e-9, margin: 0.25, rate_per_s: 4 };

const REPORT: CheckReport = {
  ok: true,
  scenario: { title: 'A bank of two', file: 'two.froth.json', sha256: '' },
  temperature_K: 298.15,
  until_s: 60,
  nodes: { bubble: 2, cavity: 1 },
  links: { tube: 1 },
  species: ['air', 'tracer'],
  warnings: [],
  bubbles: [BUBBLE, { ...BUBBLE, bubble: 'B', radius_m: 4.9e-3 }],
  pairs: [PAIR],
  growing: { count: 1, fastestRate: 4, feeds: ['A'], starves: ['B'], caveat: '' },
  limits: [],
  shut: [],
  method: 'stiff',
  fastestRelaxation_per_s: 1e5,
};

const words = (change: Partial<CheckReport>): string => checkWords({ ...REPORT, ...change });

describe('a check in words', () => {
  it('counts what the network consists of', () => {
    expect(words({})).toMatch(/^A bank of two\n {2}2 bubbles, 1 cavity; 1 tube\n {2}Gas: air, tracer\. 25 °C\.\n/);
  });

  it('says that a network with a growing mode does not hold, how fast, and at whose cost', () => {
    expect(words({})).toContain('DOES NOT HOLD: one disturbance grows, the fastest e-fold in 250 ms.');
    expect(words({})).toContain('It feeds A and starves B.');
  });

  it('says that a network without growing modes holds', () => {
    const growing = { count: 0, fastestRate: 0, feeds: [], starves: [], caveat: '' };
    const text = words({ growing, pairs: [{ ...PAIR, margin: 1.5, rate_per_s: -4 }] });
    expect(text).toContain('HOLDS: no disturbance grows.');
    expect(text).toMatch(/t1 +A +B +1\.5 +evens out +250 ms/);
  });

  it('tells of a pair that only the rest of the network holds', () => {
    const growing = { count: 0, fastestRate: 0, feeds: [], starves: [], caveat: '' };
    expect(words({ growing })).toContain('1 pair would run away if alone; the rest of the network holds it');
  });

  it('says what a verdict rests on: valves that are shut, and modes that were counted for the whole gas', () => {
    const growing = { count: 0, fastestRate: 0, feeds: [], starves: [], caveat: 'counted for the whole gas' };
    const text = words({ growing, shut: ['tap'], pairs: [] });
    expect(text).toContain('HOLDS: no disturbance grows.\n  Judged with shut what is shut at the start: tap.\n');
    expect(text).toContain('  Mind: counted for the whole gas.');
  });

  it('calls a pair that a trapped gas holds, but that leaks, neither safe nor a runaway', () => {
    expect(words({ pairs: [{ ...PAIR, margin: 1.2, rate_per_s: 1e-7 }] })).toMatch(/1\.2 +creeps apart +115\.7 days/);
  });

  it('gives each bubble its overpressure to the hundredth of a pascal', () => {
    expect(words({})).toMatch(/A +past hemisphere +5 mm +28\.8 Pa +72 mN\/m +0 N\/m +- +0/);
  });

  it('shows twenty bubbles at most, those with the lowest index', () => {
    const bubbles = Array.from({ length: 300 }, (_, k) => ({ ...BUBBLE, bubble: `b${k}`, index: (300 - k) / 100 }));
    const text = words({ bubbles });
    expect(text).toContain('the 20 of 300 with the lowest index');
    expect(text.match(/^ {2}b\d+ /gm)).toHaveLength(20);
    expect(text).toMatch(/^ {2}b299 /m);
  });

  it('shows ten pairs at most, the worst', () => {
    const pairs = Array.from({ length: 40 }, (_, k) => ({ ...PAIR, link: `t${k}`, margin: k }));
    const text = words({ pairs });
    expect(text).toContain('Pairs: the worst 10 of 40');
    expect(text.match(/^ {2}t\d+ /gm)).toHaveLength(10);
  });

  it('names six bubbles of a mode and counts the rest', () => {
    const feeds = Array.from({ length: 9 }, (_, k) => `b${k}`);
    const text = words({ growing: { count: 3, fastestRate: 1, feeds, starves: ['z'], caveat: '' } });
    expect(text).toContain('3 independent disturbances grow');
    expect(text).toContain('It feeds b0, b1, b2, b3, b4, b5 and 3 more and starves z.');
  });

  it('lists every warning with its place, and every limit that is passed with its value', () => {
    const text = words({
      warnings: [
        { path: 'criteria', code: 'not-yet', message: 'not judged', actual: null, expected: '', severity: 'warning' },
      ],
      limits: [{ detail: 'Reynolds number above 2300', subject: 'A', link: 't1', value: 4321.5, unit: '1' }],
    });
    expect(text).toContain('\nWarnings\n  criteria: not judged\n');
    expect(text).toContain('  A, t1: Reynolds number above 2300 (4322)\n');
  });

  it('ends with the method and how stiff the network is', () => {
    expect(words({})).toMatch(
      /A run would use the stiff method: the fastest part of the network adjusts in 10 µs, the run lasts 1 min\.\n$/,
    );
  });
});

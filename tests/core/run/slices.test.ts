/** Pausing changes nothing: a run that is advanced step by step tells the same as one that is advanced at a stroke. Stopping keeps. */
import { describe, expect, it } from 'vitest';
import { startRun, type Run } from '../../../core/run/drive.ts';
import type { Frame, RunEvent } from '../../../core/run/record.ts';
import { scenarioOf } from '../../run-scenario.ts';

const recipes = {
  bare: { tension: { law: 'constant', clean: '30 mN/m' } },
  soap: {
    tension: { law: 'langmuir', clean: '72 mN/m', saturation: '5 umol/m^2', szyszkowski: '1 mol/m^3' },
    loading: { coverage: 0.9 },
    supply: { kind: 'none' },
  },
};
const ring = Array.from({ length: 40 }, (_, i) => i);
const film = (from: string, to: string): object => ({ id: `${from}${to}`, kind: 'film', from, to, area: { share: 0.3 }, thickness: '10 um' }); // prettier-ignore

/** Networks that take every way through the driver: carried bubbles and none, stops, valves, waves, joints, a change of method. */
const documents: Readonly<Record<string, object>> = {
  'dying bubbles carried apart, a valve, and a network made smaller': {
    recipes,
    nodes: [
      ...Array.from({ length: 70 }, (_, i) => ({ id: `b${i}`, kind: 'bubble', radius: (40 + (i % 17)) * 1e-6, recipe: 'bare' })), // prettier-ignore
      { id: 'W', kind: 'pool', volume: '1 L', saturation: 0.5 },
      { id: 'C', kind: 'cavity', volume: '1 mL', pressure: '1.1 bar' },
      { id: 'S', kind: 'reservoir', pressure: '1 bar' },
    ],
    links: [
      ...Array.from({ length: 70 }, (_, i) => film(`b${i}`, 'W')),
      { id: 'v', kind: 'tube', from: 'C', to: 'S', bore: '0.1 mm', length: '50 mm', open: [[7, 200]] },
    ],
    run: { until: 400, frames: 7 },
  },
  'contacts of bubbles, explicit': {
    recipes,
    nodes: ring.map((i) => ({ id: `b${i}`, kind: 'bubble', radius: (40 + ((i * 37) % 29)) * 1e-6, recipe: 'bare' })),
    links: ring.map((i) => film(`b${i}`, `b${(i + 1) % ring.length}`)),
    run: { until: '3 h', frames: 5 },
  },
  'a few bubbles whose neighbours are joined, and a change of method': {
    recipes,
    nodes: ring.slice(0, 12).map((i) => ({ id: `b${i}`, kind: 'bubble', radius: (30 + ((i * 37) % 29)) * 1e-6, recipe: 'bare' })), // prettier-ignore
    links: ring.slice(0, 12).map((i) => film(`b${i}`, `b${(i + 1) % 12}`)),
    run: { until: '3 h', frames: 5, onVanish: 'join-neighbours' },
  },
  'a manifold with pulses and a valve': {
    recipes,
    nodes: [
      ...['A', 'B'].map((id, q) => ({ id, kind: 'bubble', radius: 3e-3 + 1e-4 * q, faces: 2, mouth: '2 mm', recipe: 'soap' })), // prettier-ignore
      { id: 'M', kind: 'cavity', volume: '1 mL', pressure: '101375 Pa' },
      {
        id: 'S',
        kind: 'reservoir',
        pressure: { wave: 'pulses', base: 101375, height: 5, width: '0.1 s', period: '1 s' },
      },
    ],
    links: [
      { id: 'a', kind: 'tube', from: 'A', to: 'M', bore: '1 mm', length: '50 mm' },
      { id: 'b', kind: 'tube', from: 'B', to: 'M', bore: '1 mm', length: '50 mm', open: [[0, 2.5]] },
      { id: 's', kind: 'tube', from: 'S', to: 'M', bore: '0.5 mm', length: '50 mm' },
    ],
    run: { until: 5, frames: 20 },
  },
};

/** Everything that is told, as text that keeps every bit of every number. */
function begin(document: object): { run: Run; told: string[] } {
  const told: string[] = [];
  const exact = (_key: string, value: unknown): unknown =>
    ArrayBuffer.isView(value)
      ? Array.from(value as Float64Array, String)
      : typeof value === 'number'
        ? String(value)
        : value;
  const run = startRun(scenarioOf(document), {
    event: (event: RunEvent) => void told.push(JSON.stringify(event, exact)),
    frame: (frame: Frame) => void told.push(JSON.stringify(frame, exact)),
  });
  return { run, told };
}

function carry(document: object, slice: number): string[] {
  const { run, told } = begin(document);
  while (!run.finished) run.advance(slice);
  return [...told, JSON.stringify(run.result())];
}

describe('a run in slices', () => {
  for (const [name, document] of Object.entries(documents)) {
    it(`tells every event, frame and count as at a stroke: ${name}`, () => {
      const whole = carry(document, 1e6);
      expect(whole.length).toBeGreaterThan(6);
      expect(carry(document, 1)).toEqual(whole);
      expect(carry(document, 7)).toEqual(whole);
    });

    it(`tells the same however often its progress is asked for: ${name}`, () => {
      const { run, told } = begin(document);
      while (!run.finished) {
        run.advance(1);
        expect(run.time).toBeLessThanOrEqual(run.until);
        expect(run.progress).toBeLessThanOrEqual(1);
      }
      expect([...told, JSON.stringify(run.result())]).toEqual(carry(document, 1e6));
    });
  }
});

describe('a run that is interrupted', () => {
  for (const [name, document] of Object.entries(documents)) {
    it(`has told what the whole run tells up to there, and ends with a frame of its last instant: ${name}`, () => {
      const whole = carry(document, 1e6);
      const { run, told } = begin(document);
      run.advance(25);
      expect(run.finished).toBe(false);
      const before = told.length;
      const time = run.time;
      expect(told).toEqual(whole.slice(0, before));
      run.interrupt();
      expect(run.finished).toBe(true);
      const { stop, endTime, worstGasBalance } = run.result();
      expect(stop.kind).toBe('interrupted');
      expect(endTime).toBe(time);
      expect(worstGasBalance).toBeLessThan(1e-12);
      expect(told.slice(before).map((text) => (JSON.parse(text) as { time: string }).time)).toEqual([String(time), String(time)]); // prettier-ignore
      expect(told.at(-1)).toContain('"run-ended"');
    });

    it(`does nothing more: ${name}`, () => {
      const { run, told } = begin(document);
      run.advance(25);
      run.interrupt();
      const after = told.length;
      run.advance(10);
      run.interrupt();
      expect(told).toHaveLength(after);
    });
  }
});

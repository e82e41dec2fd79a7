/** What comes and goes within one step of the integrator is told all the same: both ways, at both instants. */
import { describe, expect, it } from 'vitest';
import { carryThrough } from '../../run-scenario.ts';

const AMBIENT = 101325;
const gamma = 0.03;
const mouth = 1e-3;
const height = 1.1 * mouth;
const period = 1;

const cap = (h: number): number => (Math.PI * h * (3 * mouth * mouth + h * h)) / 6;
const excess = (h: number): number => (4 * gamma * h) / (mouth * mouth + h * h);
/** The vessel's pressure at which a lone mounted bubble that began at `height` has sunk to its hemisphere: p V is kept. */
const hemisphere = ((AMBIENT + excess(height)) * cap(height)) / cap(mouth) - excess(mouth);

describe('a mounted bubble that a swinging vessel just presses below its hemisphere', () => {
  for (const over of [1.1, 1.01, 1.001]) {
    it(`passes it and comes out again in every cycle, at the instants of the sine, by ${over} of what is needed`, () => {
      const amplitude = over * (hemisphere - AMBIENT);
      const { events } = carryThrough({
        ambient: { pressure: { wave: 'sine', mean: AMBIENT, amplitude, period } },
        recipes: { bare: { tension: { law: 'constant', clean: gamma } } },
        nodes: [{ id: 'A', kind: 'bubble', height, mouth: 2 * mouth, recipe: 'bare' }],
        links: [],
        run: { until: 3 * period, frames: 1 },
      });
      const down = (period / (2 * Math.PI)) * Math.asin(1 / over);
      const expected = [0, 1, 2].flatMap((cycle) => [
        { event: 'mouth-passed', time: cycle + down },
        { event: 'mouth-regained', time: cycle + 0.5 - down },
      ]);
      const told = events.filter(({ event }) => event.startsWith('mouth'));
      expect(told.map(({ event }) => event)).toEqual(expected.map(({ event }) => event));
      // The run's tolerance of 1e-6 in size; the sine is flat here, by the root of twice what it is over.
      told.forEach(({ time }, q) =>
        expect(Math.abs(time - expected[q]!.time)).toBeLessThan(1e-5 / Math.sqrt(over - 1)),
      );
    });
  }
});

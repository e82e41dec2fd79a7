/** What must make no difference to a run: how it is written down, in which order, in which units, and how it is driven. */
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { startRun } from '../../../core/run/drive.ts';
import { saveScenario } from '../../../core/scenario/save.ts';
import { carryThrough, scenarioOf, type Carried } from '../../run-scenario.ts';

interface Sample {
  readonly radii: readonly number[]; // um
  readonly links: readonly (readonly [number, number])[];
}

const sample = fc
  .record({
    radii: fc.array(fc.double({ min: 15, max: 60, noNaN: true }), { minLength: 3, maxLength: 7 }),
    links: fc.array(fc.tuple(fc.nat(6), fc.nat(6)), { minLength: 3, maxLength: 8 }),
  })
  .map(({ radii, links }): Sample => ({
    radii,
    links: links.map(([a, b]) => [a % radii.length, b % radii.length] as const).filter(([a, b]) => a !== b),
  }));

const nodesOf = ({ radii }: Sample) =>
  radii.map((radius, i) => ({ id: `b${i}`, kind: 'bubble', radius: `${radius} um` }));
const linksOf = ({ links }: Sample) =>
  links.map(([a, b], l) => ({
    id: `f${l}`,
    kind: 'film',
    from: `b${a}`,
    to: `b${b}`,
    area: { share: 0.2 },
    thickness: '1 um',
  }));
const RUN = { until: '600 s', frames: 4 };
const documentOf = (drawn: Sample) => ({ nodes: nodesOf(drawn), links: linksOf(drawn), run: RUN });

const vanishings = ({ events }: Carried) =>
  Object.fromEntries(
    events.filter(({ event }) => event === 'bubble-vanished').map(({ subject, time }) => [subject, time]),
  );

const text = (carried: Carried): string => JSON.stringify(carried);

describe('a run', () => {
  it('does not depend on the order of nodes and links', () => {
    fc.assert(
      fc.property(sample, fc.infiniteStream(fc.nat(1000)), (drawn, numbers) => {
        const shuffled = <T>(list: readonly T[]): T[] =>
          list
            .map((item) => ({ item, at: numbers.next().value as number }))
            .sort((a, b) => a.at - b.at)
            .map(({ item }) => item);
        const plain = carryThrough(documentOf(drawn));
        const mixed = carryThrough({ nodes: shuffled(nodesOf(drawn)), links: shuffled(linksOf(drawn)), run: RUN });
        // Sums in another order differ by rounding, and steps with it by little more: far below the tolerance of 1e-6.
        const [first, second] = [vanishings(plain), vanishings(mixed)];
        expect(Object.keys(second).sort()).toEqual(Object.keys(first).sort());
        for (const [id, time] of Object.entries(first)) expect(Math.abs(second[id]! / time - 1)).toBeLessThan(1e-7);
        for (const [id, radius] of Object.entries(plain.frames.at(-1)!.radius)) {
          expect(Math.abs(mixed.frames.at(-1)!.radius[id]! - radius)).toBeLessThan(1e-7 * radius + 1e-30);
        }
      }),
      { seed: 5, numRuns: 25 },
    );
  });

  it('does not depend on the units it is written in', () => {
    const base = carryThrough({
      temperature: '25 degC',
      nodes: [
        { id: 'A', kind: 'bubble', radius: '40 um' },
        { id: 'B', kind: 'bubble', radius: '50 um' },
      ],
      links: [{ id: 'f', kind: 'film', from: 'A', to: 'B', area: '1000 um^2', thickness: '2 um' }],
      run: { until: '10 min', frames: 5 },
    });
    const spelt = carryThrough({
      temperature: 298.15,
      nodes: [
        { id: 'A', kind: 'bubble', diameter: '0.08 mm' },
        { id: 'B', kind: 'bubble', radius: '5e-5 m' },
      ],
      links: [{ id: 'f', kind: 'film', from: 'A', to: 'B', area: '1e-3 mm^2', thickness: '2000 nm' }],
      run: { until: '600 s', frames: 5 },
    });
    // Units are read exactly: the same numbers, and so the same bytes.
    expect(text(spelt)).toBe(text(base));
  });

  it('does not depend on how it is driven: step by step, in slices, at one go', () => {
    fc.assert(
      fc.property(sample, (drawn) => {
        const document = documentOf(drawn);
        const whole = text(carryThrough(document, 1_000_000));
        for (const slice of [1, 7]) expect(text(carryThrough(document, slice))).toBe(whole);
      }),
      { seed: 6, numRuns: 10 },
    );
  });

  it('is the same again after its scenario was saved and loaded', () => {
    fc.assert(
      fc.property(sample, (drawn) => {
        const document = documentOf(drawn);
        const saved = JSON.parse(saveScenario(scenarioOf(document))) as object;
        expect(text(carryThrough(saved))).toBe(text(carryThrough(document)));
      }),
      { seed: 8, numRuns: 10 },
    );
  });

  it('keeps what was computed when it is interrupted', () => {
    const drawn = {
      radii: [30, 40, 50],
      links: [
        [0, 1],
        [1, 2],
      ],
    } as const;
    const events: string[] = [];
    const times: number[] = [];
    const run = startRun(scenarioOf({ ...documentOf(drawn), run: { until: '600 s', frames: 600 } }), {
      event: ({ event }) => void events.push(event),
      frame: ({ time }) => void times.push(time),
    });
    run.advance(5);
    run.interrupt();
    expect(run.finished).toBe(true);
    expect(run.result().stop).toEqual({ kind: 'interrupted' });
    expect(events.at(-1)).toBe('run-ended');
    // The last frame is that of the instant it stopped at.
    expect(times.at(-1)).toBe(run.time);
    expect(times.length).toBeGreaterThan(1);
    run.advance(5);
    expect(run.result().endTime).toBe(run.time);
  });
});

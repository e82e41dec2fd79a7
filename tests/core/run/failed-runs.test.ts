/**
 * What cannot go on ends in a sentence that names the node and the instant, with everything before it kept; and what has no meaning
 * in the laws is never carried on with in silence.
 */
import { describe, expect, it } from 'vitest';
import { carryThrough, type Carried } from '../../run-scenario.ts';

const recipes = {
  bare: { tension: { law: 'constant', clean: '30 mN/m' } },
  full: {
    tension: { law: 'langmuir', clean: '72 mN/m', saturation: '5 umol/m^2', szyszkowski: '1 mol/m^3' },
    loading: { coverage: 0.9 },
    supply: { kind: 'none' },
  },
};
const gases = {
  air: {},
  slow: { molarMass: '138 g/mol', viscosity: '14 uPa*s', diffusivity: '1e-9 m^2/s', solubility: '1e-8 mol/m^3/Pa' },
};

/** That the run stopped at this node, says so, and kept what was before. */
function expectStoppedAt({ result, events, frames }: Carried, node: string): number {
  const { stop } = result;
  if (stop.kind !== 'failed') throw new Error(`the run ended ${stop.kind}`);
  expect(stop.node).toBe(node);
  expect(stop.sentence).toContain(node);
  expect(stop.sentence).toContain(`${Number(stop.time.toPrecision(6))} s`);
  expect(result.endTime).toBe(stop.time);
  const end = events.at(-1)!;
  expect(end).toMatchObject({ event: 'run-ended', subject: node, time: stop.time, detail: stop.sentence });
  expect(frames[0]!.time).toBe(0);
  expect(frames.at(-1)!.time).toBe(stop.time);
  expect(result.worstGasBalance).toBeLessThan(1e-12);
  return stop.time;
}

describe('a run stops, and says where and when,', () => {
  it('at a mounted bubble that is drawn flat into its mouth', () => {
    const carried = carryThrough({
      recipes,
      nodes: [
        { id: 'other', kind: 'bubble', radius: '3 mm', mouth: '2 mm', recipe: 'bare' },
        { id: 'A', kind: 'bubble', radius: '3 mm', mouth: '2 mm', faces: 2, recipe: 'bare' },
        { id: 'S', kind: 'reservoir', pressure: '101300 Pa' },
      ],
      links: [{ id: 't', kind: 'tube', from: 'A', to: 'S', bore: '1 mm', length: '50 mm' }],
      run: { until: '1 h', frames: 100_000 },
    });
    expect(expectStoppedAt(carried, 'A')).toBeLessThan(1);
    expect(carried.result.stop).toMatchObject({ sentence: expect.stringContaining('flat') as string });
    expect(carried.frames.length).toBeGreaterThan(1);
  });

  it('at a bubble whose film is pressed together further than any film can be', () => {
    const carried = carryThrough({
      ambient: { pressure: { wave: 'ramp', from: '1 bar', to: '100 bar', start: 0, over: '10 s' } },
      recipes,
      nodes: [
        { id: 'B', kind: 'bubble', radius: '2 mm', recipe: 'bare' },
        { id: 'A', kind: 'bubble', radius: '3 mm', recipe: 'full' },
      ],
      links: [{ id: 'f', kind: 'film', from: 'A', to: 'B', area: '1 mm^2', thickness: '1 um' }],
      run: { until: '10 s', frames: 1000 },
    });
    // Coverage 1 is at p V = n R T with V (0.9)^(3/2) of the first: 1.17 bar, and some more for a tension below zero.
    const time = expectStoppedAt(carried, 'A');
    expect(time).toBeGreaterThan(0.017);
    expect(time).toBeLessThan(0.03);
  });

  it('at the same bubble when a pool or a reservoir stands after it in the file', () => {
    const carried = carryThrough({
      recipes,
      nodes: [
        { id: 'B', kind: 'bubble', radius: '2 mm', recipe: 'bare' },
        { id: 'A', kind: 'bubble', radius: '3 mm', recipe: 'full' },
        { id: 'W', kind: 'pool', volume: '1 L', saturation: 0.2 },
      ],
      links: [
        { id: 'a', kind: 'liquid', from: 'A', to: 'W' },
        { id: 'b', kind: 'liquid', from: 'B', to: 'W' },
      ],
      run: { until: '10 h', frames: 10 },
    });
    expectStoppedAt(carried, 'A');
  });
});

describe('a feed that takes more than there is', () => {
  const feed = (rate: number, gas: object): object => ({ feed: { rate, gas } });
  const bubble = (rest: object): object => ({ kind: 'bubble', radius: '3 mm', recipe: 'bare', ...rest });
  const tube = { id: 't', kind: 'tube', from: 'M', to: 'B', bore: '1 mm', length: '50 mm' };
  const film = { id: 'f', kind: 'film', from: 'M', to: 'B', area: '1 mm^2', thickness: '1 um' };
  const run = { until: '100 s', frames: 10 };

  it('of one gas stops the run at a cavity', () => {
    const carried = carryThrough({
      gases,
      recipes,
      nodes: [
        { id: 'M', kind: 'cavity', volume: '1 mL', pressure: '101335 Pa', gas: { air: 1, slow: 0.01 }, ...feed(-1e-8, { slow: 1 }) }, // prettier-ignore
        bubble({ id: 'B', faces: 2, mouth: '2 mm', gas: { air: 1 } }),
      ],
      links: [tube],
      run,
    });
    expectStoppedAt(carried, 'M');
  });

  it('stops the run at a cavity that it empties', () => {
    const carried = carryThrough({
      recipes,
      nodes: [
        { id: 'M', kind: 'cavity', volume: '1 mL', pressure: '1 bar', ...feed(-1e-6, { air: 1 }) },
        { id: 'N', kind: 'cavity', volume: '1 mL', pressure: '1 bar' },
      ],
      links: [{ id: 't', kind: 'tube', from: 'M', to: 'N', bore: '0.01 mm', length: '50 mm' }],
      run,
    });
    // 1 bar of 1 mL is 40 umol: gone after 40 s, what flows in from N apart.
    const time = expectStoppedAt(carried, 'M');
    expect(time).toBeGreaterThan(40);
    expect(time).toBeLessThan(45);
  });

  it('stops the run at a pool that it empties', () => {
    const carried = carryThrough({
      recipes,
      nodes: [{ id: 'M', kind: 'pool', volume: '1 mL', ...feed(-1e-7, { air: 1 }) }, bubble({ id: 'B' })],
      links: [film],
      run,
    });
    expectStoppedAt(carried, 'M');
  });

  it('of one gas stops the run at a bubble, by name', () => {
    const carried = carryThrough({
      gases,
      recipes,
      nodes: [
        bubble({ id: 'B', gas: { air: 1 } }),
        bubble({ id: 'M', gas: { air: 1, slow: 0.01 }, ...feed(-1e-8, { slow: 1 }) }),
      ],
      links: [film],
      run,
    });
    // A hundredth of 4.62 umol, and no more, is taken at 10 nmol/s.
    const time = expectStoppedAt(carried, 'M');
    expect(Math.abs(time - 4.6)).toBeLessThan(0.1);
  });
});

describe('the explicit method on a network that turns stiff on the way', () => {
  // Two bubbles trade through a film in minutes; after a minute a valve opens a tube that settles in microseconds.
  const document = {
    recipes: { ...recipes, held: { ...recipes.full, loading: { coverage: 0.93 } } },
    nodes: [
      ...['A', 'B'].map((id, q) => ({ id, kind: 'bubble', radius: 3e-3 + 2e-4 * q, faces: 2, mouth: '2 mm', recipe: 'held' })), // prettier-ignore
      { id: 'M', kind: 'cavity', volume: '0.1 mL', pressure: '101375 Pa' },
    ],
    links: [
      { id: 'f', kind: 'film', from: 'A', to: 'B', area: '1 mm^2', thickness: '10 um' },
      { id: 'm', kind: 'tube', from: 'A', to: 'M', bore: '2 mm', length: '10 mm', open: [['1 min', '1 h']] },
    ],
  };
  const carry = (method: string): Carried =>
    carryThrough({ ...document, run: { until: '10 min', frames: 10, method, tolerance: 1e-8 } });
  const stiff = carry('stiff');

  it('is refused in words where it was asked for, with the minute before kept', () => {
    const { result, frames } = carry('explicit');
    expect(result.stop).toMatchObject({ kind: 'failed', sentence: expect.stringContaining('stiff') as string });
    expect(result.endTime).toBeGreaterThanOrEqual(60);
    expect(Math.abs(frames[1]!.radius.A! / stiff.frames[1]!.radius.A! - 1)).toBeLessThan(1e-7);
  });

  it('is never wrong in silence where the choice is free: it is not taken, or left, and the radii are those of the stiff method', () => {
    const { result, frames } = carry('auto');
    expect(result.stop.kind).toBe('done');
    expect(result.method).toBe('stiff');
    frames.forEach(({ radius }, q) => {
      // Ten run tolerances.
      for (const id of ['A', 'B']) expect(Math.abs(radius[id]! / stiff.frames[q]!.radius[id]! - 1)).toBeLessThan(1e-7);
    });
  });
});

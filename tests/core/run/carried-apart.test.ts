/**
 * Dying bubbles that are carried apart against the same bubbles in the main system. A wall too soft to matter keeps a bubble in: each
 * vanishing is then a stop of the whole network, found by root search in the dense output.
 */
import { describe, expect, it } from 'vitest';
import { carryThrough, type Carried } from '../../run-scenario.ts';

interface Bed {
  readonly gases: object;
  readonly nodes: readonly Record<string, unknown>[];
  readonly links: readonly object[];
  readonly until: string;
}

/** A cube of 125 bubbles with contact films. */
const lattice: Bed = {
  gases: { air: {} },
  nodes: Array.from({ length: 125 }, (_, i) => ({ id: `b${i}`, kind: 'bubble', radius: `${30 + ((i * 37) % 17)} um` })),
  links: Array.from({ length: 125 }, (_, i) =>
    [...(i % 5 < 4 ? [i + 1] : []), ...(Math.floor(i / 5) % 5 < 4 ? [i + 5] : []), ...(i < 100 ? [i + 25] : [])].map(
      (j) => ({ id: `f${i}-${j}`, kind: 'film', from: `b${i}`, to: `b${j}`, area: { share: 0.2 }, thickness: '1 um' }),
    ),
  ).flat(),
  until: '30 min',
};

/** Forty bubbles of three gases in a row, each also on a pool. */
const mixture: Bed = {
  gases: { air: {}, helium: {}, 'carbon-dioxide': {} },
  nodes: [
    ...Array.from({ length: 30 }, (_, i) => ({
      id: `b${i}`,
      kind: 'bubble',
      radius: `${30 + i} um`,
      gas: { air: 0.5, helium: 0.3, 'carbon-dioxide': 0.2 },
    })),
    {
      id: 'W',
      kind: 'pool',
      volume: '1 uL',
      saturation: 1,
      gas: { air: 0.5, helium: 0.3, 'carbon-dioxide': 0.2 },
    },
  ],
  links: [
    ...Array.from({ length: 30 }, (_, i) => ({ id: `l${i}`, kind: 'liquid', from: `b${i}`, to: 'W' })),
    ...Array.from({ length: 29 }, (_, i) => ({
      id: `f${i}`,
      kind: 'film',
      from: `b${i}`,
      to: `b${i + 1}`,
      area: { share: 0.3 },
      thickness: '500 nm',
    })),
  ],
  until: '700 s',
};

function solve({ gases, nodes, links, until }: Bed, tolerance: number, apart: boolean): Carried {
  const held = nodes.map((node) =>
    node.kind === 'bubble' && !apart ? { ...node, wall: { stiffness: '1e-9 Pa', restRadius: node.radius } } : node,
  );
  return carryThrough({ gases, nodes: held, links, run: { until, frames: 30, tolerance, vanishRadius: '2 um' } });
}

const vanishings = ({ events }: Carried): Map<string, number> =>
  new Map(events.filter(({ event }) => event === 'bubble-vanished').map(({ subject, time }) => [subject, time]));

describe.each([
  ['a lattice of contacts', lattice],
  ['a mixture of gases over a pool', mixture],
])('%s', (_name, bed) => {
  const reference = vanishings(solve(bed, 1e-8, false));
  const carried = solve(bed, 1e-6, true);

  it('loses the same bubbles', () => {
    expect(reference.size).toBeGreaterThan(12);
    expect([...vanishings(carried).keys()].sort()).toEqual([...reference.keys()].sort());
  });

  it('loses each at the same instant', () => {
    // A run tolerance of 1e-6 a step; by its end a bubble between equal neighbours has magnified what it erred by, some tenfold.
    for (const [id, time] of vanishings(carried)) expect(Math.abs(time / reference.get(id)! - 1)).toBeLessThan(2e-5);
  });

  it('comes nearer with the tolerance', () => {
    const worst = (run: Carried): number =>
      Math.max(...[...vanishings(run)].map(([id, time]) => Math.abs(time / reference.get(id)! - 1)));
    expect(worst(carried)).toBeLessThan(0.2 * worst(solve(bed, 1e-4, true)));
  });

  it('shows in its frames who is gone and who is not', () => {
    const gone = vanishings(carried);
    for (const { time, radius, bubbles } of carried.frames) {
      const living = Object.entries(radius).filter(([, R]) => R > 0);
      expect(living.length).toBe(bubbles);
      for (const [id, R] of living) {
        expect(gone.get(id) ?? Infinity).toBeGreaterThan(time);
        expect(R).toBeGreaterThanOrEqual(2e-6 * (1 - 1e-9));
      }
    }
  });
});

describe('pairs of dying bubbles', () => {
  it('turn unstable before they vanish, in the order of the log', () => {
    // On a pool so small that it pushes back, large bubbles hold with it and small ones do not.
    const { events } = carryThrough({
      nodes: [
        ...Array.from({ length: 40 }, (_, i) => ({ id: `b${i}`, kind: 'bubble', radius: `${20 + i} um` })),
        { id: 'W', kind: 'pool', volume: '300 nL', saturation: 1 },
      ],
      links: Array.from({ length: 40 }, (_, i) => ({ id: `l${i}`, kind: 'liquid', from: `b${i}`, to: 'W' })),
      run: { until: '1 h', frames: 0 },
    });
    const turned = new Map(
      events.filter(({ event }) => event === 'pair-unstable').map(({ subject, time }) => [subject, time]),
    );
    const gone = events.filter(({ event }) => event === 'bubble-vanished');
    expect(gone.length).toBeGreaterThan(20);
    expect([...turned.values()].filter((time) => time > 0).length).toBeGreaterThan(10);
    for (const { subject, time } of gone) expect(turned.get(subject)).toBeLessThan(time);
    expect(events.map(({ time }) => time)).toEqual(events.map(({ time }) => time).sort((a, b) => a - b));
  });
});

/**
 * Dying bubbles that are carried apart, in networks with many of them: the same bubbles vanish, at the same instants, as when every
 * vanishing is a stop of the whole network; and what the run was asked to do at a vanishing or meanwhile is done all the same.
 */
import { describe, expect, it } from 'vitest';
import { carryThrough, type Carried } from '../../run-scenario.ts';

const AMBIENT = 101325;
/** The vessel that lets dying bubbles be carried apart, and one of the same pressure that does not: its pressure is a wave. */
const apart = { pressure: AMBIENT };
const whole = { pressure: { wave: 'ramp', from: AMBIENT, to: AMBIENT, start: 0, over: '1 ms' } };

const soap = {
  tension: { law: 'langmuir', clean: '72 mN/m', saturation: '5 umol/m^2', szyszkowski: '0.05 mol/m^3' },
  loading: { coverage: 0.3 },
  supply: { kind: 'none' },
};
const gases = {
  air: {},
  slow: { molarMass: '138 g/mol', viscosity: '14 uPa*s', diffusivity: '1e-9 m^2/s', solubility: '1e-8 mol/m^3/Pa' },
};

/** A ring of bubbles, each with a film to the next and to one opposite, and a pool that takes gas from every third. */
function ring(count: number, twoGases: boolean, films: boolean): object {
  const id = (i: number): string => `b${i % count}`;
  const every = Array.from({ length: count }, (_, i) => i);
  return {
    gases: twoGases ? gases : { air: {} },
    recipes: { bare: { tension: { law: 'constant', clean: '30 mN/m' } }, soap },
    nodes: [
      ...every.map((i) => ({
        id: id(i),
        kind: 'bubble',
        radius: (30 + ((i * 37) % 41)) * 1e-6,
        recipe: films && i % 4 === 0 ? 'soap' : 'bare',
        ...(twoGases ? { gas: { air: 1, slow: 0.01 * (i % 3) } } : {}),
      })),
      {
        id: 'W',
        kind: 'pool',
        volume: '10 mL',
        saturation: 1.002,
        ...(twoGases ? { gas: { air: 1, slow: 0.01 } } : {}),
      },
    ],
    links: [
      ...every.map((i) => ({ id: `n${i}`, kind: 'film', from: id(i), to: id(i + 1), area: { share: 0.3 }, thickness: '10 um' })), // prettier-ignore
      ...every
        .filter((i) => i % 2 === 0)
        .map((i) => ({ id: `o${i}`, kind: 'film', from: id(i), to: id(i + 7), area: '1e-10 m^2', thickness: '10 um' })),
      ...every.filter((i) => i % 3 === 0).map((i) => ({ id: `w${i}`, kind: 'liquid', from: id(i), to: 'W' })),
    ],
  };
}

const vanished = ({ events }: Carried): Map<string, number> =>
  new Map(events.filter(({ event }) => event === 'bubble-vanished').map(({ subject, time }) => [subject, time]));

describe('a network that carries its dying bubbles apart', () => {
  for (const [name, twoGases, films] of [
    ['one gas', false, false],
    ['films that stiffen', false, true],
    ['two gases, one of them slow', true, false],
  ] as const) {
    const run = { until: '2 h', frames: 4, tolerance: 1e-7 };
    const document = ring(32, twoGases, films);
    const carried = carryThrough({ ...document, ambient: apart, run });
    const stopped = carryThrough({ ...document, ambient: whole, run: { ...run, method: 'stiff' } });
    // Errors of single steps add up, and bubbles that run apart make them grow: a hundred tolerances.
    const bar = 100 * run.tolerance;

    it(`loses the same bubbles at the same instants as one that stops at each: ${name}`, () => {
      const [one, two] = [vanished(carried), vanished(stopped)];
      expect(one.size).toBeGreaterThan(5);
      expect([...one.keys()].sort()).toEqual([...two.keys()].sort());
      for (const [bubble, time] of one) expect(Math.abs(time / two.get(bubble)! - 1)).toBeLessThan(bar);
    });

    it(`has the same radii left: ${name}`, () => {
      const [one, two] = [carried.frames.at(-1)!.radius, stopped.frames.at(-1)!.radius];
      for (const bubble of Object.keys(one)) expect(Math.abs(one[bubble]! - two[bubble]!)).toBeLessThan(bar * 50e-6);
    });

    it(`loses neither gas nor surfactant: ${name}`, () => {
      for (const { result } of [carried, stopped]) {
        expect(result.worstGasBalance).toBeLessThan(1e-12);
        expect(result.worstSurfactantBalance).toBeLessThan(1e-12);
      }
    });
  }

  it('joins the neighbours of what vanishes, where that is asked for, as a smaller network does', () => {
    const asked = { until: '2 h', frames: 1, onVanish: 'join-neighbours' };
    const joined = (ambient: object): string[] =>
      Object.keys(carryThrough({ ...ring(32, false, false), ambient, run: asked }).frames.at(-1)!.flow)
        .filter((link) => link.includes('+'))
        .sort();
    expect(joined(whole).length).toBeGreaterThan(0);
    expect(joined(apart)).toEqual(joined(whole));
  });

  it('tells of a valve that moves in the step that makes the network smaller', () => {
    const count = 100;
    const every = Array.from({ length: count }, (_, i) => i);
    const document = (open: object): object => ({
      recipes: { bare: { tension: { law: 'constant', clean: '30 mN/m' } } },
      nodes: [
        ...every.map((i) => ({ id: `b${i}`, kind: 'bubble', radius: (40 + (i % 17)) * 1e-6, recipe: 'bare' })),
        { id: 'W', kind: 'pool', volume: '1 L', saturation: 0.5 },
        { id: 'C', kind: 'cavity', volume: '1 mL', pressure: '1.1 bar' },
        { id: 'S', kind: 'reservoir', pressure: '1 bar' },
      ],
      links: [
        ...every.map((i) => ({ id: `l${i}`, kind: 'film', from: `b${i}`, to: 'W', area: { share: 0.3 }, thickness: '10 um' })), // prettier-ignore
        { id: 'v', kind: 'tube', from: 'C', to: 'S', bore: '0.1 mm', length: '50 mm', ...open },
      ],
      run: { until: 400, frames: 0 },
    });
    const instants = [...vanished(carryThrough(document({}))).values()];
    // Half are gone at the fiftieth: whatever step that falls into, the valve moves soon after.
    for (const later of [1e-3, 1e-2, 1e-1, 1]) {
      const opens = instants[50]! + later;
      const { events } = carryThrough(document({ open: [[opens, 1e9]] }));
      expect(events.filter(({ event }) => event === 'valve-opened').map(({ time }) => time)).toEqual([opens]);
    }
  });
});

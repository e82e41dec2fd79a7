/** Gas through a shared contact film: permeance of its liquid and of two monolayers, and the area that two bubbles share. */
import { describe, expect, it } from 'vitest';
import { linearised, sample, type Sample } from './sample-networks.ts';

// Air in water, core/substances/gases.ts.
const D = 2.1e-9;
const H = 7.8e-6;
const h = 1e-6;
const TRACER = { air: {}, tracer: { molarMass: 0.138, viscosity: 14e-6, diffusivity: 1e-9, solubility: 5e-7 } };

function pair(
  film: Readonly<Record<string, unknown>>,
  radii: readonly [number, number] = [1e-3, 0.4e-3],
  gases: readonly [unknown, unknown] = [{ air: 1 }, { air: 1 }],
  spectator?: unknown,
): Sample {
  return sample({
    gases: TRACER,
    nodes: [
      { id: 'A', kind: 'bubble', radius: radii[0], gas: gases[0] },
      { id: 'B', kind: 'bubble', radius: radii[1], gas: gases[1] },
      ...(spectator === undefined
        ? []
        : [{ id: 'C', kind: 'cavity', volume: '1 mL', pressure: 101325, gas: spectator }]),
    ],
    links: [{ id: 'f', kind: 'film', from: 'A', to: 'B', ...film }],
  });
}

describe('the permeance of a film', () => {
  const area = 1e-7;
  const permeance = (film: Readonly<Record<string, unknown>>): number =>
    pair({ area, ...film }).conductance('f')[0]! / area;

  it('is D H/h where the monolayers resist nothing', () => {
    expect(permeance({ thickness: h }) / ((D * H) / h)).toBeCloseTo(1, 14);
  });

  it('is that of liquid and two monolayers in series (Princen & Mason 1965)', () => {
    const k = 3e-3;
    // Resistances add: h/(D H) of the liquid, 1/(H k) of each monolayer.
    const series = 1 / (h / (D * H) + 2 / (H * k));
    expect(permeance({ thickness: h, monolayer: k }) / series).toBeCloseTo(1, 14);
  });

  it('of a very thin film is that of its two monolayers alone, k_ml H/2', () => {
    // What the liquid adds is h k/(2 D) = 7e-7 of it.
    expect(Math.abs(permeance({ thickness: 1e-12, monolayer: 3e-3 }) / ((3e-3 * H) / 2) - 1)).toBeLessThan(1e-6);
  });

  it('given outright is the same for every gas', () => {
    const film = pair({ area, permeance: 4e-8 }, undefined, [{ air: 1, tracer: 1 }, { air: 1 }]);
    expect([...film.conductance('f')].map((one) => one / (4e-8 * area))).toEqual([1, 1]);
  });
});

describe('flow through a film', () => {
  it('goes from the smaller bubble to the larger, by the difference of their pressures', () => {
    const film = pair({ area: '0.1 mm^2', thickness: h });
    const { pressure } = film.system.state;
    const flow = film.flow('f')[0]!;
    expect(flow).toBeLessThan(0);
    expect(flow / (((D * H) / h) * 1e-7 * (pressure[0]! - pressure[1]!))).toBeCloseTo(1, 13);
  });

  it('lets each gas through by its own partial pressure: a gas that only one side holds goes over, uphill or down', () => {
    const film = pair({ area: '0.1 mm^2', thickness: h }, undefined, [{ air: 1, tracer: 1 }, { air: 1 }]);
    const [air, tracer] = film.flow('f');
    const { pressure } = film.system.state;
    expect(pressure[0]).toBeLessThan(pressure[1]!);
    expect(tracer! / (((1e-9 * 5e-7) / h) * 1e-7 * 0.5 * pressure[0]!)).toBeCloseTo(1, 13);
    expect(air! / (((D * H) / h) * 1e-7 * (0.5 * pressure[0]! - pressure[1]!))).toBeCloseTo(1, 13);
  });

  it('of a bubble under a gas space goes out to it by the difference to the pressure there', () => {
    const open = sample({
      nodes: [
        { id: 'A', kind: 'bubble', radius: 1e-3, gas: { air: 1 } },
        { id: 'S', kind: 'reservoir', pressure: 101325 },
      ],
      links: [{ id: 'f', kind: 'film', from: 'S', to: 'A', area: { share: 0.2 }, thickness: h }],
    });
    // The share is of the bubble's own section where the other side has none; the capillary pressure drives: 2 gamma/R.
    const gamma = open.system.state.tension[0]!;
    const expected = -((D * H) / h) * 0.2 * Math.PI * 1e-6 * ((2 * gamma) / 1e-3);
    // The capillary pressure of 144 Pa is a difference of pressures that are rounded at 1.5e-11 Pa.
    expect(Math.abs(open.flow('f')[0]! / expected - 1)).toBeLessThan(1e-12);
  });
});

describe('a film that is a share of the smaller section', () => {
  const share = { area: { share: 0.2 }, thickness: h };

  it('has the area phi pi min(R_i, R_j)^2, in either order', () => {
    const expected = ((D * H) / h) * 0.2 * Math.PI * 0.4e-3 ** 2;
    expect(pair(share, [1e-3, 0.4e-3]).conductance('f')[0]! / expected).toBeCloseTo(1, 13);
    expect(pair(share, [0.4e-3, 1e-3]).conductance('f')[0]! / expected).toBeCloseTo(1, 13);
  });

  it('does not widen with the larger bubble, and widens with the square of the smaller', () => {
    const conductance = (radii: readonly [number, number]): number => pair(share, radii).conductance('f')[0]!;
    expect(conductance([2e-3, 0.4e-3]) / conductance([1e-3, 0.4e-3])).toBeCloseTo(1, 13);
    expect(conductance([1e-3, 0.8e-3]) / conductance([1e-3, 0.4e-3])).toBeCloseTo(4, 12);
  });

  it('is reckoned alike by the loop for one gas and the loop for many', () => {
    for (const radii of [
      [1e-3, 0.4e-3],
      [0.4e-3, 1e-3],
      [0.7e-3, 0.7e-3],
    ] as const) {
      const one = pair(share, radii);
      // A cavity apart holds the second gas: the same pair through the general loop.
      const many = pair(share, radii, undefined, { helium: 1 });
      // A pressure of 1e5 Pa is rounded at 1.5e-11 Pa, the differences that drive are of 1e2 Pa.
      const allowed = 1e-12;
      expect(many.conductance('f')[0]! / one.conductance('f')[0]!).toBeCloseTo(1, 14);
      expect(many.flow('f')[1]).toBe(0);
      if (radii[0] !== radii[1]) expect(Math.abs(many.flow('f')[0]! / one.flow('f')[0]! - 1)).toBeLessThan(allowed);
      const [a, b] = [linearised(one.system, 0, one.y), linearised(many.system, 0, many.y)];
      for (const i of [0, 1]) {
        expect(Math.abs(b.rates[2 * i]! - a.rates[i]!)).toBeLessThanOrEqual(allowed * Math.abs(a.rates[i]!));
        for (const j of [0, 1]) {
          // In a bubble of one gas the slopes of its own partial pressure are those of the whole.
          const [expected, got] = [a.jacobian[i]![j]!, b.jacobian[2 * i]![2 * j]!];
          expect(Math.abs(got - expected)).toBeLessThan(allowed * Math.abs(expected));
        }
      }
    }
  });
});

/**
 * Free bubbles that empty through tubes, with the settings of a file that says nothing: R^4 falls linearly, so that the last decades
 * of the radius pass in less time than the rounding of the clock. They vanish all the same, when a quadrature says.
 */
import { describe, expect, it } from 'vitest';
import { carryThrough } from '../../run-scenario.ts';

const RT = 8.314462618 * 298.15;
const AMBIENT = 101325;
const gamma = 0.03;
const mu = 18.5e-6;
const [bore, length] = [1e-3, 50e-3];
const vanishRadius = 1e-6; // what a file that says nothing gets

const gases = { air: { molarMass: '28.96 g/mol', viscosity: mu, diffusivity: 2e-9, solubility: 8e-6 } };
const recipes = { bare: { tension: { law: 'constant', clean: gamma } } };
const sphere = (id: string, radius: number): object => ({ id, kind: 'bubble', radius, faces: 2, recipe: 'bare' });
const tube = (id: string, from: string, to: string): object => ({ id, kind: 'tube', from, to, bore, length });

const pressure = (R: number): number => AMBIENT + (4 * gamma) / R;
const amount = (R: number): number => (pressure(R) * (4 / 3) * Math.PI * R ** 3) / RT;

/** The radius that holds n mol. */
function radiusOf(n: number): number {
  let [low, high] = [0, 1e-2];
  for (let pass = 0; pass < 100; pass++) {
    const middle = 0.5 * (low + high);
    if (amount(middle) < n) low = middle;
    else high = middle;
  }
  return 0.5 * (low + high);
}

describe('the smaller of two free bubbles on a tube', () => {
  const [large, small] = [3e-3, 2.9e-3];
  const total = amount(large) + amount(small);

  /** dt/dR of the small one: what it holds more a radius, over what Hagen and Poiseuille let through. */
  function slope(R: number): number {
    const amountSlope = ((4 / 3) * Math.PI * (3 * AMBIENT * R * R + 8 * gamma * R)) / RT;
    const other = pressure(radiusOf(total - amount(R)));
    const flow = (Math.PI * (bore / 2) ** 4 * (pressure(R) ** 2 - other ** 2)) / (16 * mu * length * RT);
    return amountSlope / flow;
  }
  // Simpson's rule; near the start, where the two are nearly equal, the slope is steep, and the pieces are many.
  const pieces = 4000;
  const h = (small - vanishRadius) / pieces;
  let sum = slope(vanishRadius) + slope(small);
  for (let k = 1; k < pieces; k++) sum += (k % 2 === 1 ? 4 : 2) * slope(vanishRadius + k * h);
  const expected = (sum * h) / 3;

  for (const method of ['auto', 'stiff']) {
    for (const tolerance of [1e-6, 1e-9]) {
      const { events, frames, result } = carryThrough({
        gases,
        recipes,
        nodes: [sphere('A', large), sphere('B', small)],
        links: [tube('t', 'A', 'B')],
        run: { until: '1 h', frames: 10, tolerance, method },
      });

      it(`vanishes, and the run goes on, ${method}, tolerance ${tolerance}`, () => {
        expect(result.stop).toEqual({ kind: 'done' });
        expect(frames.at(-1)!.radius.B).toBe(0);
      });

      it(`vanishes when the quadrature of its emptying says, ${method}, tolerance ${tolerance}`, () => {
        const gone = events.find(({ event }) => event === 'bubble-vanished');
        // They part by a factor of 60 on the way: errors of single steps grow with them. Simpson's rule is good to 1e-9.
        expect(Math.abs(gone!.time / expected - 1)).toBeLessThan(20 * tolerance + 1e-8);
      });

      it(`leaves all the gas in the large one, ${method}, tolerance ${tolerance}`, () => {
        expect(Math.abs(frames.at(-1)!.radius.A! / radiusOf(total) - 1)).toBeLessThan(1e-12);
        expect(result.worstGasBalance).toBeLessThan(1e-12);
      });
    }
  }
});

describe('free bubbles on a manifold', () => {
  const radii = [3, 3.1, 3.2, 3.3].map((R) => R * 1e-3);
  const { events, frames, result } = carryThrough({
    gases,
    recipes,
    nodes: [
      ...radii.map((R, i) => sphere(`b${i}`, R)),
      { id: 'M', kind: 'cavity', volume: '1 mL', pressure: AMBIENT + 40 },
    ],
    links: radii.map((_, i) => tube(`t${i}`, `b${i}`, 'M')),
    run: { until: '10 min', frames: 4 },
  });

  it('all empty into the largest, the smallest first', () => {
    expect(result.stop).toEqual({ kind: 'done' });
    expect(events.filter(({ event }) => event === 'bubble-vanished').map(({ subject }) => subject)).toEqual([
      'b0',
      'b1',
      'b2',
    ]);
  });

  it('leave it at the pressure of the cavity', () => {
    const { pressure: p, radius } = frames.at(-1)!;
    expect(Math.abs(p.b3! - pressure(radius.b3!))).toBeLessThan(1e-9 * AMBIENT);
    expect(Object.values(radius).filter((R) => R > 0)).toHaveLength(1);
    expect(result.worstGasBalance).toBeLessThan(1e-12);
  });
});

describe('free bubbles in a chain of tubes', () => {
  it('empty one into the other; what hung on one alone is left over unless neighbours are joined', () => {
    for (const [onVanish, left] of [
      ['drop', 2],
      ['join-neighbours', 1],
    ] as const) {
      const { result, frames } = carryThrough({
        gases,
        recipes,
        nodes: [3, 3.1, 3.2, 3.3].map((R, i) => sphere(`b${i}`, R * 1e-3)),
        links: [tube('t1', 'b1', 'b0'), tube('t2', 'b0', 'b2'), tube('t3', 'b2', 'b3'), tube('t4', 'b0', 'b3')],
        run: { until: '10 min', frames: 4, onVanish },
      });
      expect(result.stop).toEqual({ kind: 'done' });
      expect(Object.values(frames.at(-1)!.radius).filter((R) => R > 0)).toHaveLength(left);
      expect(result.worstGasBalance).toBeLessThan(1e-12);
    }
  });
});

/** What every node shows to its links at one instant: pressures, partial pressures and their slopes, by the law of its kind. */
import { describe, expect, it } from 'vitest';
import { setActiveBubbles } from '../../../core/network/node-state.ts';
import { GAS_CONSTANT, STANDARD_GRAVITY } from '../../../core/quantities/constants.ts';
import { sample } from '../transfer/sample-networks.ts';
import { differenceOf } from './differences.ts';

const RT = GAS_CONSTANT * 298.15;

describe('a cavity', () => {
  it('has the pressure n R T/V of each of its gases, and is as stiff as R T/V', () => {
    const { system, y } = sample({
      nodes: [{ id: 'C', kind: 'cavity', volume: '2 mL', pressure: 101325, gas: { air: 3, helium: 1 } }],
    });
    y[1] = 5e-6;
    system.evaluate(0, y, true);
    const { pressure, partial, stiffness, partialSlope, radius, pressureDrift } = system.state;
    const air = 0.75 * 101325;
    const helium = (5e-6 * RT) / 2e-6;
    expect(partial[0]! / air).toBeCloseTo(1, 14);
    expect(partial[1]! / helium).toBeCloseTo(1, 14);
    expect(pressure[0]! / (air + helium)).toBeCloseTo(1, 14);
    expect(stiffness[0]! / (RT / 2e-6)).toBeCloseTo(1, 14);
    expect([...partialSlope]).toEqual([stiffness[0], 0, 0, stiffness[0]]);
    expect(radius[0]).toBe(Infinity);
    expect(pressureDrift[0]).toBe(0);
  });
});

describe('a pool', () => {
  it('has the partial pressures n_k/(H_k V_l) of what is dissolved (Henry)', () => {
    const { system, y } = sample({
      nodes: [{ id: 'W', kind: 'pool', volume: '1 L', saturation: 1, gas: { air: 3, helium: 1 } }],
    });
    // H of air and helium, core/substances/gases.ts
    y.set([2e-4, 1e-4]);
    system.evaluate(0, y, true);
    const { partial, pressure, partialSlope } = system.state;
    expect(partial[0]! / (2e-4 / (7.8e-6 * 1e-3))).toBeCloseTo(1, 14);
    expect(partial[1]! / (1e-4 / (3.8e-6 * 1e-3))).toBeCloseTo(1, 14);
    expect(pressure[0]).toBe(partial[0]! + partial[1]!);
    expect(partialSlope[0]! * 7.8e-9).toBeCloseTo(1, 14);
    expect([partialSlope[1], partialSlope[2]]).toEqual([0, 0]);
    expect(partialSlope[3]! * 3.8e-9).toBeCloseTo(1, 14);
  });
});

describe('a reservoir', () => {
  it('has the pressure of its waveform and a composition that never changes, whatever passed through it', () => {
    const { system, y } = sample({
      nodes: [
        {
          id: 'S',
          kind: 'reservoir',
          pressure: { wave: 'sine', mean: 102000, amplitude: 500, period: 2 },
          gas: { air: 1, helium: 3 },
        },
      ],
    });
    y.set([-3e-3, 9e-3]);
    system.evaluate(0.5, y, true); // a quarter period: the peak
    const { pressure, partial, stiffness, partialSlope, pressureDrift } = system.state;
    expect(pressure[0]).toBe(102500);
    expect([...partial]).toEqual([0.25 * 102500, 0.75 * 102500]);
    expect(stiffness[0]).toBe(0);
    expect([...partialSlope]).toEqual([0, 0, 0, 0]);
    expect(Math.abs(pressureDrift[0]!)).toBeLessThan(500 * Math.PI * 1e-15); // cos of pi/2, rounded
    system.evaluate(1, y, true);
    expect(pressureDrift[0]! / (-500 * Math.PI)).toBeCloseTo(1, 14);
  });
});

describe('the liquid head', () => {
  const under = (depth: number, faces: 1 | 2, ambient: Readonly<Record<string, unknown>>): number => {
    const { system, y } = sample({
      ambient: { pressure: 101325, ...ambient },
      recipes: { soft: { tension: { law: 'constant', clean: 0.05 } } },
      nodes: [{ id: 'A', kind: 'bubble', radius: 1e-3, faces, recipe: 'soft', at: [0, -depth], gas: { air: 1 } }],
    });
    system.evaluate(0, y, false);
    return system.state.pressure[0]! - 101325 - (2 * faces * 0.05) / 1e-3;
  };

  it('rho g (z_top - z) stands on a bubble in liquid: 9.79 kPa under 1 m of water at 25 degC', () => {
    const head = under(1, 1, { surfaceHeight: 0, liquidDensity: 997 });
    expect(Math.abs(head - 997 * STANDARD_GRAVITY)).toBeLessThan(1e-10); // pressures near 1e5 Pa
    expect(Math.abs(head - 9777)).toBeLessThan(1);
    // Only the depth below the surface counts, wherever the height is reckoned from.
    expect(
      Math.abs(under(0.5, 1, { surfaceHeight: 2, liquidDensity: 800 }) - 800 * 2.5 * STANDARD_GRAVITY),
    ).toBeLessThan(1e-10);
  });

  it('does not stand on a film of two faces, which has gas outside, nor where no surface is given', () => {
    expect(Math.abs(under(1, 2, { surfaceHeight: 0 }))).toBeLessThan(5e-11);
    expect(Math.abs(under(1, 1, {}))).toBeLessThan(5e-11);
  });

  it('stands on mounted and elastic bubbles alike', () => {
    const { system, y } = sample({
      ambient: { surfaceHeight: 0, liquidDensity: 1000 },
      recipes: { skin: { tension: { law: 'henry', clean: 0.072, saturation: 4e-6 }, loading: { coverage: 0.5 } } },
      nodes: [
        { id: 'A', kind: 'bubble', height: 1e-3, mouth: 2e-3, recipe: 'skin', at: [0, -0.3], gas: { air: 1 } },
        { id: 'B', kind: 'bubble', height: 1e-3, mouth: 2e-3, recipe: 'skin', at: [0, 0], gas: { air: 1 } },
      ],
    });
    system.evaluate(0, y, false);
    const { pressure } = system.state;
    expect(Math.abs(pressure[0]! - pressure[1]! - 300 * STANDARD_GRAVITY)).toBeLessThan(1e-10);
  });
});

describe('the gases of a bubble', () => {
  const mixed = sample({
    nodes: [
      { id: 'A', kind: 'bubble', radius: '1 mm', gas: { air: 5, helium: 2, 'carbon-dioxide': 3 } },
      { id: 'B', kind: 'bubble', radius: '1 mm', mouth: '1 mm', gas: { air: 1, helium: 2, 'carbon-dioxide': 1 } },
    ],
  });

  it('share its pressure by their amounts, and its radius is that of the whole', () => {
    const { system, y, network } = mixed;
    system.evaluate(0, y, false);
    const { pressure, partial } = system.state;
    expect(network.species).toEqual(['air', 'helium', 'carbon-dioxide']);
    [0.5, 0.2, 0.3, 0.25, 0.5, 0.25].forEach((share, q) => {
      expect(partial[q]! / (share * pressure[Math.floor(q / 3)]!)).toBeCloseTo(1, 14);
    });
    const alone = sample({ nodes: [{ id: 'A', kind: 'bubble', radius: '1 mm', gas: { air: 1 } }] });
    alone.system.evaluate(0, alone.y, false);
    expect(Math.abs(alone.system.state.pressure[0]! - pressure[0]!)).toBeLessThan(5e-11);
  });

  it('have the slopes of their own differences: what one adds, it takes from the share of the others', () => {
    const { system, y } = mixed;
    for (let node = 0; node < 2; node++) {
      for (let l = 0; l < 3; l++) {
        system.evaluate(0, y, false);
        system.evaluate(0, y, true);
        const slopes = [0, 1, 2].map((k) => system.state.partialSlope[(3 * node + k) * 3 + l]!);
        for (let k = 0; k < 3; k++) {
          const { value, error } = differenceOf(
            (n) => {
              const moved = y.slice();
              moved[3 * node + l] = n;
              system.evaluate(0, moved, false);
              return system.state.partial[3 * node + k]!;
            },
            y[3 * node + l]!,
            1e-3 * y[3 * node + l]!,
          );
          expect(Math.abs(slopes[k]! - value)).toBeLessThan(error);
          expect(error).toBeLessThan(1e-4 * Math.abs(slopes[k]!));
        }
      }
    }
  });
});

describe('a step that ends on an edge', () => {
  it('sees the vessel and the reservoir before it, and the next step sees them after it', () => {
    const { system, y } = sample({
      ambient: { pressure: { wave: 'ramp', from: 100000, to: 101000, start: 1, over: 0 } },
      recipes: { soft: { tension: { law: 'constant', clean: 0.05 } } },
      nodes: [
        { id: 'A', kind: 'bubble', radius: 1e-3, recipe: 'soft', gas: { air: 1 } },
        {
          id: 'S',
          kind: 'reservoir',
          pressure: { wave: 'ramp', from: 1e5, to: 2e5, start: 1, over: 0 },
          gas: { air: 1 },
        },
      ],
    });
    const { state } = system;
    const vessel = (): number => state.pressure[0]! - (2 * 0.05) / state.radius[0]!;
    system.segmentEnd = 1;
    system.evaluate(1, y, false);
    expect(Math.abs(vessel() - 100000)).toBeLessThan(5e-11);
    expect(state.pressure[1]).toBe(1e5);
    system.segmentEnd = 2;
    system.evaluate(1, y, false);
    expect(Math.abs(vessel() - 101000)).toBeLessThan(5e-11);
    expect(state.pressure[1]).toBe(2e5);
  });
});

describe('bubbles that are switched off', () => {
  it('are left as they were, and asked for again are found again', () => {
    const { system, y, network } = sample({
      recipes: { skin: { tension: { law: 'henry', clean: 0.072, saturation: 4e-6 }, loading: { coverage: 0.5 } } },
      nodes: ['water', 'skin', 'water', 'skin'].map((recipe, i) => ({
        id: `b${i}`,
        kind: 'bubble',
        radius: 1e-3,
        recipe,
        gas: { air: 1 },
      })),
    });
    const { state } = system;
    system.evaluate(0, y, false);
    const before = state.radius.slice();
    setActiveBubbles(state, Uint8Array.of(1, 0, 0, 1));
    const grown = y.map((n) => 2 * n);
    system.evaluate(0, grown, false);
    expect([1, 2].map((i) => state.radius[i])).toEqual([1, 2].map((i) => before[i]));
    for (const i of [0, 3]) expect(state.radius[i]).toBeGreaterThan(before[i]!);
    // An amount that is nothing stops nobody while its bubble is off.
    grown[1] = 0;
    expect(system.evaluate(0, grown, false)).toBe(true);
    setActiveBubbles(state, new Uint8Array(network.nodes.count).fill(1));
    system.evaluate(0, y, false);
    state.radius.forEach((R, i) => expect(Math.abs(R / before[i]! - 1)).toBeLessThan(1e-15));
  });
});

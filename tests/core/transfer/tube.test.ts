/** Gas through a tube: Hagen-Poiseuille flow of an ideal gas at constant temperature, with what the upstream node holds. */
import { describe, expect, it } from 'vitest';
import { GAS_CONSTANT } from '../../../core/quantities/constants.ts';
import { linearised, sample, tubeBetweenCavities } from './sample-networks.ts';

const ROOM = 298.15;
const RT = GAS_CONSTANT * ROOM;
const bore = 2e-3;
const a = bore / 2;
const L = 20e-3;
const mu = 18.4e-6; // air, core/substances/gases.ts

describe('flow through a tube', () => {
  it('is pi a^4 dp/(8 mu L) in volume where the pressures nearly agree', () => {
    const p = 101325;
    const dp = 1;
    const flow = tubeBetweenCavities([p + dp, p]).flow('t')[0]!;
    const volume = (flow * RT) / p; // as measured at the outlet
    // The gas at the outlet is wider than at the mean by dp/(2 p), half of 1e-5: that is all the two laws differ by.
    expect(Math.abs(volume / ((Math.PI * a ** 4 * dp) / (8 * mu * L)) - 1 - dp / (2 * p))).toBeLessThan(1e-9);
  });

  it('goes with the fourth power of the bore and falls with length and viscosity', () => {
    const base = tubeBetweenCavities([102000, 101000]).flow('t')[0]!;
    const ratio = (tube: Parameters<typeof tubeBetweenCavities>[1]): number =>
      tubeBetweenCavities([102000, 101000], tube).flow('t')[0]! / base;
    expect(ratio({ bore: 4e-3 })).toBeCloseTo(16, 12);
    expect(ratio({ length: 60e-3 })).toBeCloseTo(1 / 3, 14);
    expect(ratio({ viscosity: 2 * mu })).toBeCloseTo(1 / 2, 14);
  });

  it('lands on the outlet pressure when dp/dx is followed along the tube, for a gas that expands tenfold', () => {
    const [from, to] = [1e6, 1e5];
    const flow = tubeBetweenCavities([from, to]).flow('t')[0]!;
    // Locally Hagen-Poiseuille: dp/dx = -8 mu (flow R T/p)/(pi a^4). Runge-Kutta of order 4.
    const slope = (p: number): number => (-8 * mu * flow * RT) / (p * Math.PI * a ** 4);
    const follow = (steps: number): number => {
      const h = L / steps;
      let p = from;
      for (let s = 0; s < steps; s++) {
        const k1 = slope(p);
        const k2 = slope(p + 0.5 * h * k1);
        const k3 = slope(p + 0.5 * h * k2);
        const k4 = slope(p + h * k3);
        p += (h / 6) * (k1 + 2 * k2 + 2 * k3 + k4);
      }
      return p;
    };
    // The quadrature's own error is a fifteenth of what halving its step changes; 2e4 sums at 1e6 Pa round to 1e-12 of it.
    const [coarse, fine] = [follow(10000), follow(20000)];
    expect(Math.abs(coarse - fine)).toBeLessThan(1e-6 * to);
    expect(Math.abs(fine - to)).toBeLessThan(Math.abs(coarse - fine) + 1e-11 * from);
  });

  it('carries the composition of the upstream node, whichever end that is', () => {
    const [left, right] = [
      { air: 3, helium: 1 },
      { helium: 4, air: 1 },
    ];
    const forward = tubeBetweenCavities([102000, 101000], {}, [left, right]).flow('t');
    const backward = tubeBetweenCavities([101000, 102000], {}, [left, right]).flow('t');
    expect(forward[0]! / (forward[0]! + forward[1]!)).toBeCloseTo(0.75, 14);
    expect(backward[0]! / (backward[0]! + backward[1]!)).toBeCloseTo(0.2, 14);
    expect(forward[0]).toBeGreaterThan(0);
    expect(backward[0]).toBeLessThan(0);
  });

  it('has the viscosity of the upstream mixture', () => {
    const gases = [
      { air: 3, helium: 1 },
      { air: 1, helium: 4 },
    ] as const;
    // Wilke's rule for air (28.965 g/mol, 18.4 uPa s) and helium (4.0026 g/mol, 19.8 uPa s) written out for two gases.
    const phi = (mi: number, mj: number, Mi: number, Mj: number): number =>
      (1 + Math.sqrt(mi / mj) * (Mj / Mi) ** 0.25) ** 2 / Math.sqrt(8 * (1 + Mi / Mj));
    const [air, helium] = [18.4e-6, 19.8e-6];
    const mixed = (x: number): number =>
      (x * air) / (x + (1 - x) * phi(air, helium, 28.965, 4.0026)) +
      ((1 - x) * helium) / (1 - x + x * phi(helium, air, 4.0026, 28.965));
    const whole = (pressures: readonly [number, number]): number =>
      tubeBetweenCavities(pressures, {}, gases)
        .flow('t')
        .reduce((sum, one) => sum + one, 0);
    const poiseuille = (Math.PI * a ** 4 * (102000 ** 2 - 101000 ** 2)) / (16 * L * RT);
    // A dozen roundings, and the cancellation of pressures in the square: 1e-16 * 101500/1000 * a few.
    expect(Math.abs(whole([102000, 101000]) / (poiseuille / mixed(0.75)) - 1)).toBeLessThan(1e-13);
    expect(Math.abs(whole([101000, 102000]) / (-poiseuille / mixed(0.2)) - 1)).toBeLessThan(1e-13);
  });

  it('passes through zero without a jump where it turns, though what it carries changes there', () => {
    const gases = [{ air: 1 }, { helium: 1 }] as const;
    const just = (dp: number): Float64Array => tubeBetweenCavities([101325 + dp, 101325], {}, gases).flow('t');
    const [over, under, level] = [just(1e-3), just(-1e-3), just(0)];
    expect([...level].map(Math.abs)).toEqual([0, 0]);
    expect(over[0]).toBeGreaterThan(0);
    expect(over[1]).toBe(0);
    expect(under[0]).toBeCloseTo(0, 300);
    expect(under[1]).toBeLessThan(0);
    // The two sides differ by the viscosities of air and helium alone, and by the two gas columns: 18.4 to 19.8. The
    // pressure difference of 1e-3 Pa carries the rounding of 101325 Pa, 1.5e-11.
    expect(Math.abs(-under[1]! / over[0]! / (18.4 / 19.8) - 1)).toBeLessThan(1e-7);
  });

  it('takes a viscosity of its own in place of the mixture it carries', () => {
    const gases = [{ air: 3, helium: 1 }, { air: 1 }] as const;
    const flow = tubeBetweenCavities([102000, 101000], { viscosity: 3e-5 }, gases).flow('t');
    const whole = (Math.PI * a ** 4 * (102000 ** 2 - 101000 ** 2)) / (16 * 3e-5 * L * RT);
    expect(Math.abs((flow[0]! + flow[1]!) / whole - 1)).toBeLessThan(1e-13);
  });

  it('is the same for one gas whether or not the file knows a second', () => {
    const alone = tubeBetweenCavities([102000, 101000]);
    const beside = sample({
      nodes: [
        { id: 'A', kind: 'cavity', volume: '1 mL', pressure: 102000, gas: { air: 1 } },
        { id: 'B', kind: 'cavity', volume: '2 mL', pressure: 101000, gas: { air: 1 } },
        { id: 'C', kind: 'cavity', volume: '2 mL', pressure: 101000, gas: { helium: 1 } },
      ],
      links: [{ id: 't', kind: 'tube', from: 'A', to: 'B', bore, length: L }],
    });
    const flow = beside.flow('t');
    expect(Math.abs(flow[0]! / alone.flow('t')[0]! - 1)).toBeLessThan(1e-14);
    expect(flow[1]).toBe(0);
  });

  it('is its conductance times the pressure difference, and the conductance is the slope at equal pressures', () => {
    const pair = tubeBetweenCavities([102000, 101000]);
    expect(pair.flow('t')[0]! / (pair.conductance('t')[0]! * 1000)).toBeCloseTo(1, 13);
    const level = tubeBetweenCavities([101325, 101325]);
    // d(flow)/dp = pi a^4 p/(8 mu L R T)
    expect(level.conductance('t')[0]! / ((Math.PI * a ** 4 * 101325) / (8 * mu * L * RT))).toBeCloseTo(1, 13);
  });

  it('pushes the mixture of a bubble that is itself neutral: at the hemisphere dp/dn is nil, what it holds still changes', () => {
    // A cap of constant tension at h = a: the peak of its pressure (physics.md section 2), so u = 0.
    const blown = sample({
      nodes: [
        { id: 'A', kind: 'bubble', height: '1 mm', mouth: '2 mm', gas: { air: 1, helium: 1 } },
        { id: 'B', kind: 'cavity', volume: '2 mL', pressure: 101325, gas: { air: 1 } },
      ],
      links: [{ id: 't', kind: 'tube', from: 'A', to: 'B', bore, length: L }],
    });
    const { jacobian } = linearised(blown.system, 0, blown.y);
    const u = blown.system.state.stiffness[0]!;
    const [air, helium] = [blown.y[0]!, blown.y[1]!];
    // Neutral to rounding: against the stiffness of the same gas in a rigid vessel, p/n.
    expect(Math.abs(u)).toBeLessThan(1e-12 * (101325 / (air + helium)));
    const whole = -(blown.rates()[0]! + blown.rates()[1]!);
    expect(whole).toBeGreaterThan(0);
    // d(x_air whole/mu(x))/dn by differences at constant pressure: helium added to the bubble thins the air that leaves it.
    const moved = (h: number): number => {
      const y = blown.y.slice();
      y[1] = helium + h;
      const out = new Float64Array(blown.system.size);
      blown.system.rates(0, y, out);
      return out[0]!;
    };
    const h = 1e-4 * helium;
    const difference = (moved(h) - moved(-h)) / (2 * h);
    // Truncation of the order of (h/n)^2 = 1e-8 and rounding of the pressure in the flow, 1.5e-11/144 Pa over 1e-4.
    expect(Math.abs(jacobian[0]![1]! / difference - 1)).toBeLessThan(1e-6);
  });
});

/** Free spheres of constant tension, the fast kernel: from an amount of gas to radius, pressure and how they change. */
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { GAS_CONSTANT } from '../../../core/quantities/constants.ts';
import { sample, type Sample } from '../transfer/sample-networks.ts';
import { differenceOf } from './differences.ts';
import { fixed, PI, ratio, times } from './fixed-point.ts';

const T = 298.15;
const AMBIENT = 101325;

interface Sphere {
  readonly ambient?: unknown;
  readonly gamma?: number;
  readonly faces?: 1 | 2;
  readonly radius?: number;
}

function sphere({ ambient = AMBIENT, gamma = 0.072, faces = 1, radius = 1e-3 }: Sphere): Sample {
  return sample({
    temperature: T,
    ambient: { pressure: ambient },
    recipes: { plain: { tension: { law: 'constant', clean: gamma } } },
    nodes: [{ id: 'A', kind: 'bubble', radius, faces, recipe: 'plain', gas: { air: 1 } }],
  });
}

const exponent = (min: number, max: number): fc.Arbitrary<number> =>
  fc.double({ min, max, noNaN: true }).map((x) => 10 ** x);

/** From foam cells under vacuum to nuclei under a hundred bar; dominated by capillary pressure at one end, free of it at the other. */
const anySphere = fc.record({
  ambient: exponent(1, 7),
  gamma: exponent(-3, -0.5),
  faces: fc.constantFrom<1 | 2>(1, 2),
  radius: exponent(-5.9, 0),
});

describe('the pressure in a free bubble', () => {
  it('is 144 Pa above that of the liquid at 72 mN/m and 1 mm (Young-Laplace)', () => {
    const { system, y } = sphere({ gamma: 0.072, radius: 1e-3 });
    system.evaluate(0, y, false);
    // Pressures near 1e5 Pa are rounded at 1.5e-11 Pa.
    expect(Math.abs(system.state.pressure[0]! - AMBIENT - 144)).toBeLessThan(5e-11);
  });

  it('is 10 Pa above that of the gas around a film of two faces at 25 mN/m and 10 mm (Young-Laplace)', () => {
    const { system, y } = sphere({ gamma: 0.025, radius: 10e-3, faces: 2 });
    system.evaluate(0, y, false);
    expect(Math.abs(system.state.pressure[0]! - AMBIENT - 10)).toBeLessThan(5e-11);
  });
});

describe('the radius of a free bubble', () => {
  it('solves p V = n R T to rounding, from whatever radius the search begins', () => {
    fc.assert(
      fc.property(anySphere, exponent(-8, 1), fc.double({ min: 0.1, max: 10, noNaN: true }), (given, begin, share) => {
        const { system, y } = sphere(given);
        y[0]! *= share;
        system.state.size[0] = begin;
        expect(system.evaluate(0, y, false)).toBe(true);
        const R = system.state.radius[0]!;
        // F = (P R + g) R^2 - 3 n R_gas T/(4 pi) without rounding; its distance to the root is F/F', F' = R (3 P R + 2 g).
        const [P, r, gas] = [fixed(given.ambient), fixed(R), times(fixed(y[0]!), fixed(GAS_CONSTANT), fixed(T))];
        const g = times(fixed(2 * given.faces), fixed(given.gamma));
        const F = times(times(P, r) + g, r, r) - ((((3n * gas) << 400n) / PI) >> 2n);
        const slope = times(r, 3n * times(P, r) + 2n * g);
        // Halley's last step leaves 2/3 of its cube, (1e-5)^3, or less; c n carries four roundings, of which R feels half.
        expect(Math.abs(ratio(F, times(slope, r)))).toBeLessThan(1.2e-15);
        // One sum and one quotient beside it.
        const p = given.ambient + (2 * given.faces * given.gamma) / R;
        expect(Math.abs(system.state.pressure[0]! / p - 1)).toBeLessThan(5e-16);
        expect(system.state.size[0]).toBe(R);
      }),
      { seed: 1, numRuns: 400 },
    );
  });

  it('at the start is that of the file', () => {
    fc.assert(
      fc.property(anySphere, (given) => {
        const { system, y } = sphere(given);
        system.evaluate(0, y, false);
        // The amount is p V/(R T), half a dozen roundings, of which the radius feels half at most.
        expect(Math.abs(system.state.radius[0]! / given.radius - 1)).toBeLessThan(2e-15);
      }),
      { seed: 2, numRuns: 200 },
    );
  });

  it('is nowhere to be found without gas', () => {
    const { system } = sphere({});
    for (const nothing of [0, -1e-9, NaN]) expect(system.evaluate(0, Float64Array.of(nothing), false)).toBe(false);
  });
});

describe('the slopes of a free bubble', () => {
  it('are those of physics.md in closed form: u = (dp/dV)/(dn/dV)', () => {
    fc.assert(
      fc.property(anySphere, (given) => {
        const { system, y } = sphere(given);
        system.evaluate(0, y, true);
        const { state } = system;
        const { radius: R, gamma, faces, ambient } = given;
        const area = 4 * Math.PI * R * R;
        const dpdV = ((2 * faces) / (R * R)) * (-gamma / area);
        const p = ambient + (2 * faces * gamma) / R;
        const dndV = (p + (4 / 3) * Math.PI * R ** 3 * dpdV) / (GAS_CONSTANT * T);
        // A dozen roundings on either side, and those of the radius twice to four times.
        expect(Math.abs(state.stiffness[0]! / (dpdV / dndV) - 1)).toBeLessThan(2e-14);
        expect(Math.abs(state.radiusSlope[0]! / (1 / (area * dndV)) - 1)).toBeLessThan(2e-14);
        expect(state.stiffness[0]).toBeLessThan(0); // runs away, always: no elasticity
      }),
      { seed: 3, numRuns: 300 },
    );
  });

  it('are those of its own radius and pressure by central differences', () => {
    fc.assert(
      fc.property(anySphere, (given) => {
        const { system, y } = sphere(given);
        const n = y[0]!;
        system.evaluate(0, y, true);
        const { stiffness, radiusSlope } = system.state;
        const [u, dR] = [stiffness[0]!, radiusSlope[0]!];
        const at = (what: 'radius' | 'pressure') => (amount: number) => {
          system.evaluate(0, Float64Array.of(amount), false);
          return system.state[what][0]!;
        };
        const [p, R] = (['pressure', 'radius'] as const).map((what) => differenceOf(at(what), n, 1e-3 * n));
        expect(Math.abs(u - p!.value)).toBeLessThan(p!.error);
        expect(Math.abs(dR - R!.value)).toBeLessThan(R!.error);
        expect(R!.error).toBeLessThan(1e-4 * dR); // the measure sees
      }),
      { seed: 4, numRuns: 200 },
    );
  });

  it('in time at constant gas follow the pressure of the vessel', () => {
    fc.assert(
      fc.property(anySphere, fc.double({ min: 0.1, max: 0.9, noNaN: true }), (given, t) => {
        const swinging = { wave: 'sine', mean: given.ambient, amplitude: 0.3 * given.ambient, period: 1 };
        const { system, y } = sphere({ ...given, ambient: swinging });
        system.evaluate(t, y, true);
        const { pressureDrift, radiusDrift } = system.state;
        const [dp, dR] = [pressureDrift[0]!, radiusDrift[0]!];
        const at = (what: 'radius' | 'pressure') => (time: number) => {
          system.evaluate(time, y, false);
          return system.state[what][0]!;
        };
        const [p, R] = (['pressure', 'radius'] as const).map((what) => differenceOf(at(what), t, 1e-4));
        expect(Math.abs(dp - p!.value)).toBeLessThan(p!.error);
        expect(Math.abs(dR - R!.value)).toBeLessThan(R!.error);
      }),
      { seed: 5, numRuns: 200 },
    );
  });
});

/** Gas through liquid: between two separated bubbles, and from a bubble to a pool, at rest and while the liquid still fills. */
import { describe, expect, it } from 'vitest';
import { sample, type Sample } from './sample-networks.ts';

// Air in water, core/substances/gases.ts.
const D = 2.1e-9;
const H = 7.8e-6;

function pairAt(
  distance: number,
  radii: readonly [number, number] = [1e-3, 0.4e-3],
  gases: unknown = { air: 1 },
): Sample {
  return sample({
    nodes: [
      { id: 'A', kind: 'bubble', radius: radii[0], gas: gases },
      { id: 'B', kind: 'bubble', radius: radii[1], gas: gases },
    ],
    links: [{ id: 'l', kind: 'liquid', from: 'A', to: 'B', distance }],
  });
}

/**
 * Shape factor of two equal conducting spheres at +1/2 and -1/2, by images: each sphere's charge is mirrored in the other, again
 * and again (Maxwell, Treatise on Electricity and Magnetism, chapter on electrical images; from memory). S = 4 pi times the
 * charge of one sphere in units where a lone sphere at potential V holds V R.
 */
function byImages(R: number, d: number): number {
  let charge = R / 2;
  let sum = charge;
  let offset = 0; // of the image from its sphere's centre, towards the other
  for (let image = 0; image < 200; image++) {
    // The image of q at distance s from the centre of the other sphere: q R/s at R^2/s from it; of opposite potentials, the
    // signs of mirroring and of the other sphere cancel.
    const s = d - offset;
    charge *= R / s;
    offset = (R * R) / s;
    sum += charge;
  }
  return 4 * Math.PI * sum;
}

describe('a liquid path between two bubbles', () => {
  it('has the shape factor 4 pi/(1/R_i + 1/R_j - 2/d)', () => {
    const path = pairAt(10e-3);
    const S = (4 * Math.PI) / (1 / 1e-3 + 1 / 0.4e-3 - 2 / 10e-3);
    // Radii are found from the amounts to rounding.
    expect(path.conductance('l')[0]! / (D * H * S)).toBeCloseTo(1, 13);
    const { pressure } = path.system.state;
    expect(path.flow('l')[0]! / (D * H * S * (pressure[0]! - pressure[1]!))).toBeCloseTo(1, 13);
    // The smaller has the higher pressure: gas goes from B to A.
    expect(path.flow('l')[0]).toBeLessThan(0);
  });

  it('is two bubbles in series, each with 4 pi R to the far liquid, where they are far apart', () => {
    const far = pairAt(1e4).conductance('l')[0]!;
    const series = 1 / (1 / (4 * Math.PI * 1e-3) + 1 / (4 * Math.PI * 0.4e-3));
    // What is left out is (2/d)/(1/R_i + 1/R_j) = 6e-8.
    expect(Math.abs(far / (D * H * series) - 1)).toBeLessThan(1e-7);
  });

  it('departs from the exact field of two spheres by the fourth power of R/d only', () => {
    const R = 1e-3;
    const departure = (share: number): number => {
      const d = R / share;
      return pairAt(d, [R, R]).conductance('l')[0]! / (D * H * byImages(R, d)) - 1;
    };
    // The dipoles that the spheres raise in each other are the first thing left out: (R/d)^3 R/d. Halving R/d divides the
    // departure by 16; the order after it, (R/d)^5, bends that by less than the 10% allowed at R/d = 1/10.
    const [near, half] = [departure(1 / 10), departure(1 / 20)];
    expect(near / half).toBeGreaterThan(14.4);
    expect(near / half).toBeLessThan(17.6);
    expect(Math.abs(near)).toBeLessThan(2e-4); // a factor of order 1 times 1e-4
  });

  it('lets each gas through by its own partial pressure, D and H', () => {
    const path = sample({
      gases: { air: {}, tracer: { molarMass: 0.138, viscosity: 14e-6, diffusivity: 1e-9, solubility: 5e-7 } },
      nodes: [
        { id: 'A', kind: 'bubble', radius: 1e-3, gas: { air: 3, tracer: 1 } },
        { id: 'B', kind: 'bubble', radius: 0.4e-3, gas: { air: 1, tracer: 3 } },
      ],
      links: [{ id: 'l', kind: 'liquid', from: 'A', to: 'B', distance: 10e-3 }],
    });
    const flow = path.flow('l');
    const { pressure } = path.system.state;
    const S = (4 * Math.PI) / (1 / 1e-3 + 1 / 0.4e-3 - 2 / 10e-3);
    // Against the total pressure difference, air leaves the larger bubble.
    expect(flow[0]! / (D * H * S * (0.75 * pressure[0]! - 0.25 * pressure[1]!))).toBeCloseTo(1, 12);
    expect(flow[1]! / (1e-9 * 5e-7 * S * (0.25 * pressure[0]! - 0.75 * pressure[1]!))).toBeCloseTo(1, 12);
    expect(flow[0]).toBeGreaterThan(0);
    expect(flow[1]).toBeLessThan(0);
  });
});

describe('two bubbles that have grown into one another', () => {
  it('have no liquid between them, and no number comes of it', () => {
    const path = pairAt(1.5e-3); // radii of 1 and 0.4 mm
    expect(Number.isFinite(path.flow('l')[0])).toBe(true);
    // Twice the gas is 1.26 of the radius: 1.26 + 0.4 mm, while 1/R_i + 1/R_j - 2/d would still be positive.
    path.y[0]! *= 2;
    expect(path.flow('l')[0]).toBeNaN();
    expect(path.conductance('l')[0]).toBeNaN();
  });
});

const R = 0.5e-3;
function bubbleOverPool(transient: boolean, ends: readonly [string, string] = ['A', 'W'], saturation = 0.5): Sample {
  return sample({
    nodes: [
      { id: 'A', kind: 'bubble', radius: R, gas: { air: 1 } },
      { id: 'W', kind: 'pool', volume: '1 L', saturation },
    ],
    links: [{ id: 'l', kind: 'liquid', from: ends[0], to: ends[1], transient }],
  });
}

describe('a liquid path to a pool', () => {
  it('is 4 pi R D H times the difference to the pool', () => {
    const path = bubbleOverPool(false);
    const { pressure } = path.system.state;
    const flow = path.flow('l')[0]!;
    expect(pressure[1]! / (0.5 * 101325)).toBeCloseTo(1, 14);
    expect(flow / (4 * Math.PI * R * D * H * (pressure[0]! - pressure[1]!))).toBeCloseTo(1, 13);
    expect(path.flow('l', 1e5)[0]).toBe(flow);
  });

  it('takes gas out of a supersaturated pool', () => {
    expect(bubbleOverPool(false, ['A', 'W'], 2).flow('l')[0]).toBeLessThan(0);
  });

  it('is the same drawn from the pool to the bubble, with the sign turned', () => {
    for (const transient of [false, true]) {
      const [there, back] = [bubbleOverPool(transient), bubbleOverPool(transient, ['W', 'A'])];
      expect(back.flow('l', 3)[0]).toBe(-there.flow('l', 3)[0]!);
      expect(back.conductance('l', 3)[0]).toBe(there.conductance('l', 3)[0]);
      // Rates are kept by node, so these agree without a turn.
      expect([...back.rates(3)]).toEqual([...there.rates(3)]);
    }
  });

  it('has 1/R + 1/sqrt(pi D t) in place of 1/R with the start-up term (Epstein & Plesset 1950)', () => {
    const [steady, early] = [bubbleOverPool(false), bubbleOverPool(true)];
    for (const t of [1e-3, 1, 60, 1e6]) {
      const ratio = early.conductance('l', t)[0]! / steady.conductance('l', t)[0]!;
      expect(ratio / (1 + R / Math.sqrt(Math.PI * D * t))).toBeCloseTo(1, 13);
    }
  });

  it('passes into liquid at rest what the diffusion equation around a sphere says', () => {
    const path = bubbleOverPool(true);
    const end = (0.3 * R * R) / D;
    // What the kernel passes at held pressures from 0 to `end`: in s = sqrt(t) its flow 2 s is linear, so the trapezium is exact.
    const difference = (path.flow('l', 1), path.system.state.pressure[0]! - path.system.state.pressure[1]!);
    const integrand = (s: number): number => 2 * s * path.flow('l', s * s)[0]!;
    // From a hair after the start, where s -> 0 is a limit.
    const least = 1e-3 * Math.sqrt(end);
    const first = integrand(least);
    const slope = (integrand(Math.sqrt(end)) - first) / (Math.sqrt(end) - least);
    const passed = Math.sqrt(end) * (first - slope * least) + (slope * end) / 2;

    // dc/dt = D (1/r^2) d(r^2 dc/dr)/dr outside r = R, c = 1 at R and 0 far away: with v = r c plain diffusion, by implicit steps
    // of second order (Crank-Nicolson started by four implicit Euler half steps) on cells that widen away from the face.
    const dissolved = (cells: number): number => {
      const edge = Float64Array.from({ length: cells + 1 }, (_, i) => R * (1 + 8 * (i / cells) ** 2));
      const v = new Float64Array(cells); // r c in cell centres
      const steps = 2 * cells;
      const h = end / steps;
      const centre = (i: number): number => 0.5 * (edge[i]! + edge[i + 1]!);
      const gap = (i: number): number => (i === 0 ? centre(0) - R : centre(i) - centre(i - 1));
      const advance = (dt: number, implicit: number): void => {
        const up = new Float64Array(cells);
        const right = new Float64Array(cells);
        for (let i = 0; i < cells; i++) {
          const width = edge[i + 1]! - edge[i]!;
          const before = D / (width * gap(i));
          const after = i + 1 < cells ? D / (width * gap(i + 1)) : 0;
          const left = i === 0 ? R : v[i - 1]!;
          const next = i + 1 < cells ? v[i + 1]! : v[i]!;
          const known = v[i]! + dt * (1 - implicit) * (before * (left - v[i]!) + after * (next - v[i]!));
          const below = -dt * implicit * before;
          const above = -dt * implicit * after;
          // Thomas' elimination on the way up; the face holds v = R.
          const pivot = 1 - below - above + (i > 0 ? below * up[i - 1]! : 0);
          up[i] = -above / pivot;
          right[i] = (known + (i === 0 ? -below * R : -below * right[i - 1]!)) / pivot;
        }
        for (let i = cells - 1; i >= 0; i--) v[i] = right[i]! + (i + 1 < cells ? up[i]! * v[i + 1]! : 0);
      };
      for (let s = 0; s < 4; s++) advance(h / 2, 1);
      for (let s = 2; s < steps; s++) advance(h, 0.5);
      let sum = 0;
      for (let i = 0; i < cells; i++) sum += 4 * Math.PI * centre(i) * v[i]! * (edge[i + 1]! - edge[i]!);
      return H * difference * sum;
    };
    const [coarse, fine] = [dissolved(150), dissolved(300)];
    // Second order: the finer one is in error by a third of what the two differ by; that itself must be small.
    expect(Math.abs(coarse / fine - 1)).toBeLessThan(1e-3);
    expect(Math.abs(passed / fine - 1)).toBeLessThan(Math.abs(coarse / fine - 1) + 1e-6);
  });

  it('passes a finite amount at the start: the term is held below a millionth of a millionth of R^2/D', () => {
    const path = bubbleOverPool(true);
    const earliest = (1e-12 * R * R) / D;
    const start = path.flow('l', 0)[0]!;
    expect(Number.isFinite(start)).toBe(true);
    expect(path.flow('l', 0.5 * earliest)[0]).toBe(start);
    expect(path.flow('l', 4 * earliest)[0]! / start).toBeCloseTo(0.5, 5); // 1/sqrt(4), steady part 1e-6 of it
  });
});

/**
 * Coarsening over a common pool against the two classical theories: the size distributions that keep their shape, and how fast the
 * mean size of each grows. Sources: Wagner, Z. Elektrochem. 65 (1961) 581; Lifshitz & Slyozov, J. Phys. Chem. Solids 19 (1961) 35.
 */
import { describe, expect, it } from 'vitest';
import { startNetworkRun } from '../../core/run/engine.ts';
import { poolStart, settings } from '../bench/problems.ts';
import { carryThrough } from '../run-scenario.ts';

const RT = 8.314462618 * 298.15;
const AMBIENT = 101325;

/** Sizes z at the middle of each of `count` equal shares of a distribution function F. */
function shares(count: number, F: (z: number) => number, largest: number): number[] {
  return Array.from({ length: count }, (_, i) => {
    const wanted = (i + 0.5) / count;
    let [low, high] = [0, largest];
    for (let pass = 0; pass < 60; pass++) {
      const middle = 0.5 * (low + high);
      if (F(middle) < wanted) low = middle;
      else high = middle;
    }
    return 0.5 * (low + high);
  });
}

describe('interface-limited coarsening', () => {
  const K = 1e-9; // mol/(m^2 s Pa)
  const count = 2000;
  // Density 24 z/(2-z)^5 exp(-3z/(2-z)); with u = z/(2-z) its distribution function is 1 - (1+u)^3 exp(-3u).
  const wagner = (z: number): number => {
    const u = z / (2 - z);
    return 1 - (1 + u) ** 3 * Math.exp(-3 * u);
  };
  // Bubbles so large that the gas is as good as incompressible: 2 gamma/R = 30 Pa of 101325.
  const R21 = 2e-3;
  const z = shares(count, wagner, 2);
  const radii = Float64Array.from([...z.map((each) => each * R21), 0]);
  // dR/dt = k (1/R_21 - 1/R), k = 2 gamma K R T/p.
  const k = (2 * 0.03 * K * RT) / AMBIENT;
  const until = (3 * R21 * R21) / (k / 2); // by then R_21^2 has grown fourfold and N fallen eightfold
  const start = poolStart(radii, K);
  const run = startNetworkRun(
    start,
    { ...settings(until, null, 1e-5, R21 / 50) },
    { event: () => undefined, frame: () => undefined },
  );
  while (!run.finished) run.advance(1000);
  const left = [...run.radiiAt(run.time)];
  const mean = left.reduce((sum, R) => sum + R, 0) / left.length;
  const R21end = left.reduce((sum, R) => sum + R * R, 0) / (left.length * mean);

  it('grows by k/2 a second in R_21^2', () => {
    // 250 bubbles are left of the 2000: their R_21 scatters by about 0.35/sqrt(250) = 2 %.
    expect(R21end ** 2 / (R21 * R21 + (k / 2) * until)).toBeGreaterThan(0.96);
    expect(R21end ** 2 / (R21 * R21 + (k / 2) * until)).toBeLessThan(1.04);
  });

  it('keeps the shape it started with: <R>/R_21 = 8/9', () => {
    expect(z.reduce((a, b) => a + b, 0) / count).toBeCloseTo(8 / 9, 3);
    expect(Math.abs(mean / R21end - 8 / 9)).toBeLessThan(0.02);
  });

  it('loses bubbles as the inverse of the mean volume', () => {
    // N R^3 is constant for a shape that stays: 2000/8 = 250.
    expect(Math.abs(left.length / 250 - 1)).toBeLessThan(0.06);
  });

  it('has nothing larger than twice R_21', () => {
    expect(Math.max(...left) / R21end).toBeLessThan(2.02);
  });
});

describe('diffusion-limited coarsening', () => {
  // Density up to a constant: z^2 (3+z)^(-7/3) (3/2-z)^(-11/3) exp(-1/(1-2z/3)), 0 < z < 3/2.
  const density = (z: number): number =>
    z >= 1.5 ? 0 : z * z * (3 + z) ** (-7 / 3) * (1.5 - z) ** (-11 / 3) * Math.exp(-1 / (1 - z / 1.5));
  const steps = 20000;
  const sums = new Float64Array(steps + 1);
  for (let s = 0; s < steps; s++) sums[s + 1] = sums[s]! + density(((s + 0.5) * 1.5) / steps);
  const lifshitzSlyozov = (z: number): number => {
    const at = (z / 1.5) * steps;
    const s = Math.min(steps - 1, Math.floor(at));
    return (sums[s]! + (at - s) * (sums[s + 1]! - sums[s]!)) / sums[steps]!;
  };
  const count = 800;
  const critical = 1e-3; // m
  const D = 2e-9;
  const H = 8e-6;
  const gamma = 0.03;
  const z = shares(count, lifshitzSlyozov, 1.5);
  // dR/dt = (k/R)(1/R_c - 1/R), k = 2 gamma D H R T/p; R_c^3 grows by 4 k/9.
  const k = (2 * gamma * D * H * RT) / AMBIENT;
  const until = (3 * critical ** 3) / ((4 / 9) * k);
  const gas = z.reduce((sum, each) => sum + (AMBIENT / RT) * (4 / 3) * Math.PI * (each * critical) ** 3, 0);
  const { frames } = carryThrough({
    gases: { gas: { molarMass: '29 g/mol', viscosity: '18 uPa*s', diffusivity: D, solubility: H } },
    recipes: { bare: { tension: { law: 'constant', clean: gamma } } },
    nodes: [
      ...z.map((each, i) => ({
        id: `b${i}`,
        kind: 'bubble',
        radius: each * critical,
        recipe: 'bare',
        gas: { gas: 1 },
      })),
      // A pool that holds a ten-thousandth of the gas: its pressure follows the bubbles.
      {
        id: 'W',
        kind: 'pool',
        volume: (1e-4 * gas) / (H * AMBIENT),
        saturation: 1 + (2 * gamma) / critical / AMBIENT,
        gas: { gas: 1 },
      },
    ],
    links: z.map((_, i) => ({ id: `l${i}`, kind: 'liquid', from: `b${i}`, to: 'W' })),
    run: { until, frames: 1, tolerance: 1e-5, vanishRadius: critical / 50 },
  });
  const left = Object.values(frames.at(-1)!.radius).filter((R) => R > 0);
  const mean = left.reduce((sum, R) => sum + R, 0) / left.length;

  it('starts with a mean size equal to the critical one', () => {
    expect(z.reduce((a, b) => a + b, 0) / count).toBeCloseTo(1, 3);
  });

  it('grows with the cube root of time: R_c^3 by 4/9 of the constant', () => {
    // Fourfold in R_c^3; 200 bubbles are left, whose mean scatters by 0.22/sqrt(200) = 1.5 %, its cube by 5 %.
    expect(Math.abs(mean ** 3 / (4 * critical ** 3) - 1)).toBeLessThan(0.06);
    expect(Math.abs(left.length / (count / 4) - 1)).toBeLessThan(0.06);
  });

  it('has nothing larger than one and a half of the mean', () => {
    expect(Math.max(...left) / mean).toBeLessThan(1.53);
  });
});

import { describe, it, expect } from 'vitest';
import {
  amountPerVolume,
  amountStiffness,
  bubbleIndex,
  capillaryStiffness,
  capStiffness,
  capVolumeStiffness,
  mobileStiffness,
  pairMargin,
  pairRate,
  sphereStiffness,
  sphereVolumeStiffness,
} from '../../../core/stability/indices.ts';

const TEMPERATURE = 298.15;
const GAS = 8.314462618 * TEMPERATURE;
/** A film whose tension follows its area: gamma = gamma_0 + eps ln(A/A_0). */
const tensionAt = (area: number, restArea: number) => 0.03 + 0.012 * Math.log(area / restArea);

/** Central difference; its error at this step is of order 1e-9 relative. */
function slope(f: (x: number) => number, x: number): number {
  const step = 1e-5 * x;
  return (f(x + step) - f(x - step)) / (2 * step);
}

describe('stiffness', () => {
  it('of a sphere is the slope of its Young-Laplace pressure', () => {
    const R = 2e-4;
    const rest = 4 * Math.PI * R * R;
    const pressure = (r: number) => (4 * tensionAt(4 * Math.PI * r * r, rest)) / r;
    expect(Math.abs(sphereStiffness(2, 0.03, 0.012, R) / slope(pressure, R) - 1)).toBeLessThan(1e-7);
  });

  it('of a cap is the slope of its Young-Laplace pressure, below and above the hemisphere', () => {
    const a = 1e-3;
    for (const h of [0.3e-3, 1e-3, 4e-3]) {
      const area = (height: number) => Math.PI * (a * a + height * height);
      const pressure = (height: number) => (8 * tensionAt(area(height), area(h)) * height) / (a * a + height * height);
      expect(Math.abs(capStiffness(2, 0.03, 0.012, a, h) / slope(pressure, h) - 1)).toBeLessThan(1e-7);
      const volume = (height: number) => (Math.PI * height * (3 * a * a + height * height)) / 6;
      const byVolume = slope(pressure, h) / slope(volume, h);
      expect(Math.abs(capVolumeStiffness(2, 0.03, 0.012, a, h) / byVolume - 1)).toBeLessThan(1e-7);
    }
  });

  it('of a cap of pure liquid is zero at the hemisphere, stiff below and soft above', () => {
    expect(capStiffness(1, 0.072, 0, 1e-3, 1e-3)).toBe(0);
    expect(capStiffness(1, 0.072, 0, 1e-3, 0.5e-3)).toBeGreaterThan(0);
    expect(capStiffness(1, 0.072, 0, 1e-3, 2e-3)).toBeLessThan(0);
  });

  it('u is the slope of pressure against amount of an ideal gas', () => {
    const R = 1e-5; // capillary pressure 6 % of the whole: dn/dV must not be taken as p/RT
    const p = (r: number) => 101325 + (2 * tensionAt(4 * Math.PI * r * r, 4 * Math.PI * R * R)) / r;
    const n = (r: number) => (p(r) * (4 / 3) * Math.PI * r ** 3) / GAS;
    const volume = (4 / 3) * Math.PI * R ** 3;
    const u = amountStiffness(p(R), volume, sphereVolumeStiffness(1, 0.03, 0.012, R), TEMPERATURE);
    expect(Math.abs(u / (slope(p, R) / slope(n, R)) - 1)).toBeLessThan(1e-7);
    const perVolume = amountPerVolume(p(R), volume, sphereVolumeStiffness(1, 0.03, 0.012, R), TEMPERATURE);
    const byVolume = slope(n, R) / (4 * Math.PI * R * R);
    expect(Math.abs(perVolume / byVolume - 1)).toBeLessThan(1e-7);
  });

  it('of the mobile gas is its slope with the frozen amount held', () => {
    const R = 1e-5;
    const V = (r: number) => (4 / 3) * Math.PI * r ** 3;
    const p = (r: number) => 101325 + (2 * tensionAt(4 * Math.PI * r * r, 4 * Math.PI * R * R)) / r;
    const frozen = 0.2 * p(R);
    const mobile = (r: number) => p(r) - (frozen * V(R)) / V(r);
    const amount = (r: number) => (mobile(r) * V(r)) / GAS;
    const u = mobileStiffness(sphereVolumeStiffness(1, 0.03, 0.012, R), frozen, V(R), mobile(R), TEMPERATURE);
    expect(Math.abs(u / (slope(mobile, R) / slope(amount, R)) - 1)).toBeLessThan(1e-7);
  });

  it('with nothing frozen is that of the whole gas', () => {
    const u = mobileStiffness(-3e9, 0, 1e-12, 101325, TEMPERATURE);
    expect(u).toBe(amountStiffness(101325, 1e-12, -3e9, TEMPERATURE));
  });
});

describe('margin and rate of a pair', () => {
  const R = 1e-3;
  const volume = (4 / 3) * Math.PI * R ** 3;

  it('margin tends to 2 eps/gamma for equal bubbles without a wall as the outer pressure grows', () => {
    for (const elasticity of [0, 0.006, 0.015, 0.04]) {
      const pressure = 1e12;
      const u = amountStiffness(pressure, volume, sphereVolumeStiffness(1, 0.03, elasticity, R), TEMPERATURE);
      const d = capillaryStiffness(1, 0.03, R, pressure, TEMPERATURE);
      // Off by capillary over outer pressure, 60 Pa over 1e12 Pa.
      expect(Math.abs(pairMargin(u, u, d, d) - bubbleIndex(elasticity, 0.03))).toBeLessThan(1e-9);
    }
  });

  it('margin is 0 for a pure liquid at any pressure', () => {
    const u = amountStiffness(200, volume, sphereVolumeStiffness(1, 0.03, 0, R), TEMPERATURE);
    const d = capillaryStiffness(1, 0.03, R, 200, TEMPERATURE);
    expect(Math.abs(pairMargin(u, u, d, d))).toBeLessThan(1e-15);
  });

  it('margin is 1 exactly where the rate changes sign', () => {
    expect(pairMargin(-2, 2, 5, 7)).toBe(1);
    expect(pairRate(3, -2, 2)).toBeCloseTo(0, 15);
    expect(pairMargin(-2, 1, 5, 7)).toBeLessThan(1);
    expect(pairRate(3, -2, 1)).toBe(3);
  });

  it('margin does not exist where neither side has a surface', () => {
    expect(pairMargin(5, 0, 0, 0)).toBeNaN();
  });
});

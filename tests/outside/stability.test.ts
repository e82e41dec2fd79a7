/** Stability against what the literature and the trade know. */
import { describe, it, expect } from 'vitest';
import { growingModes } from '../../core/stability/modes.ts';
import {
  amountStiffness,
  capillaryStiffness,
  mobileStiffness,
  pairMargin,
  pairRate,
  sphereVolumeStiffness,
} from '../../core/stability/indices.ts';
import { diffusivePairRate } from '../../core/stability/pair-exchange.ts';

const TEMPERATURE = 298.15;
const GAS = 8.314462618 * TEMPERATURE;

function stiffnessOfSphere(faces: number, tension: number, elasticity: number, radius: number, pressure: number) {
  const volume = (4 / 3) * Math.PI * radius ** 3;
  return amountStiffness(pressure, volume, sphereVolumeStiffness(faces, tension, elasticity, radius), TEMPERATURE);
}

// Gibbs; Lucassen & van den Tempel 1972; Kloek, van Vliet & Meinders 2001.
describe("Gibbs' criterion", () => {
  const pair = (u: number) => ({
    size: 2,
    u: Float64Array.of(u, u),
    from: Int32Array.of(0),
    to: Int32Array.of(1),
    conductance: Float64Array.of(1e-12),
    grounded: new Uint8Array(2),
  });

  it('a pair of equal bubbles of one face changes sign exactly at half the tension', () => {
    const gamma = 0.03;
    const at = (elasticity: number) => stiffnessOfSphere(1, gamma, elasticity, 1e-3, 101325);
    // Exact: 2 (gamma/2) - gamma is 0 in floating point too, and the next number on either side has its sign.
    expect(pairRate(1e-12, at(gamma / 2), at(gamma / 2))).toBeCloseTo(0, 300);
    expect(pairRate(1e-12, at((gamma / 2) * (1 - 1e-15)), at((gamma / 2) * (1 - 1e-15)))).toBeGreaterThan(0);
    expect(pairRate(1e-12, at((gamma / 2) * (1 + 1e-15)), at((gamma / 2) * (1 + 1e-15)))).toBeLessThan(0);
    expect(growingModes(pair(at((gamma / 2) * 0.999999))).count).toBe(1);
    expect(growingModes(pair(at(gamma / 2))).count).toBe(0);
    expect(growingModes(pair(at((gamma / 2) * 1.000001))).count).toBe(0);
  });

  it('a pair of equal thin-film bubbles changes sign exactly where the film elasticity equals the tension of one face', () => {
    const gamma = 0.025;
    const at = (filmElasticity: number) => stiffnessOfSphere(2, gamma, filmElasticity / 2, 1e-2, 101325);
    expect(at(gamma)).toBe(0);
    expect(at(gamma * (1 - 1e-15))).toBeLessThan(0);
    expect(at(gamma * (1 + 1e-15))).toBeGreaterThan(0);
  });

  it('the margin of a pair is 1 there, whatever the two sizes', () => {
    const gamma = 0.03;
    const [small, large] = [2e-5, 3e-4];
    const margin = pairMargin(
      stiffnessOfSphere(1, gamma, gamma / 2, small, 104325),
      stiffnessOfSphere(1, gamma, gamma / 2, large, 101525),
      capillaryStiffness(1, gamma, small, 104325, TEMPERATURE),
      capillaryStiffness(1, gamma, large, 101525, TEMPERATURE),
    );
    expect(margin).toBe(1);
  });
});

// tau = 4 mu L (R/a)^4/|gamma - E|: linearised Poiseuille; its magnitude is common practice.
describe('runaway of two equal thin-film bubbles on one tube', () => {
  // G = pi a^4 p / (8 mu L R T): the squared-pressure law linearised about p.
  function rate(gamma: number, filmElasticity: number, R: number, a: number, length: number, mu: number, p: number) {
    const conductance = (Math.PI * a ** 4 * p) / (8 * mu * length * GAS);
    const u = stiffnessOfSphere(2, gamma, filmElasticity / 2, R, p);
    return pairRate(conductance, u, u);
  }

  it('has the e-folding time 4 mu L (R/a)^4/|gamma - E| at high outer pressure', () => {
    for (const [gamma, E, R, a] of [
      [0.03, 0.01, 5e-3, 1e-3],
      [0.025, 0, 1e-2, 1e-2],
      [0.02, 0.05, 3e-3, 2e-3],
    ] as const) {
      // prettier-ignore
      const tau = (4 * 1.85e-5 * 0.02 * (R / a) ** 4) / (gamma - E);
      // V dp/dV against p is of order 100 Pa against 1e10 Pa.
      expect(Math.abs(rate(gamma, E, R, a, 0.02, 1.85e-5, 1e10) * tau - 1)).toBeLessThan(1e-7);
      // At one atmosphere the formula is good to some tenths of a percent.
      expect(Math.abs(rate(gamma, E, R, a, 0.02, 1.85e-5, 101325) * tau - 1)).toBeLessThan(3e-3);
    }
  });

  it('is of order 1e-5 s on a tube as wide as the bubble and 1 cm long', () => {
    const time = 1 / rate(0.02, 0, 1e-2, 1e-2, 1e-2, 1e-5, 101325);
    expect(time).toBeGreaterThan(1e-5);
    expect(time).toBeLessThan(1e-4);
  });
});

// Webster & Cates 1998 (from memory): trapped gas holds droplets against ripening by its osmotic stiffness;
// equal bubbles of constant tension hold where its pressure exceeds a third of the Laplace pressure 2 gamma/R.
describe('the trapped-species criterion', () => {
  const [gamma, R] = [0.03, 5e-5];
  const laplace = (2 * gamma) / R;
  const volume = (4 / 3) * Math.PI * R ** 3;
  const pressure = 101325 + laplace;
  const dpdV = sphereVolumeStiffness(1, gamma, 0, R);
  const marginWith = (frozen: number) => {
    const u = mobileStiffness(dpdV, frozen, volume, pressure - frozen, TEMPERATURE);
    const d = capillaryStiffness(1, gamma, R, pressure, TEMPERATURE);
    return pairMargin(u, u, d, d);
  };

  it('puts equal bubbles of constant tension at the boundary with a third of the Laplace pressure trapped', () => {
    expect(Math.abs(marginWith(laplace / 3) - 1)).toBeLessThan(1e-12);
    expect(marginWith((laplace / 3) * 0.999)).toBeLessThan(1);
    expect(marginWith((laplace / 3) * 1.001)).toBeGreaterThan(1);
  });

  it('adds the trapped pressure over that third to the margin', () => {
    expect(marginWith(0)).toBeCloseTo(0, 12);
    expect(marginWith(laplace)).toBeCloseTo(3, 10);
  });

  it('agrees with the exchange of both gases: fast growth below the third, growth only at the slow pace above', () => {
    const rateWith = (frozen: number) => {
      // A bubble: a = R T/V, b_k = (p_k/V) dV/dn; two alike.
      const dVdn = GAS / (pressure + volume * dpdV);
      const diagonal = new Float64Array(2).fill((2 * GAS) / volume);
      const common = Float64Array.of((2 * (pressure - frozen) * dVdn) / volume, (2 * frozen * dVdn) / volume);
      return diffusivePairRate(diagonal, common, Float64Array.of(1e-15, 1e-24), 2);
    };
    const d = capillaryStiffness(1, gamma, R, pressure, TEMPERATURE);
    // Below: the rate of the mobile gas alone, -2 G u_m, off by what the slow gas gives way, 1e-9 over the margin.
    const u = mobileStiffness(dpdV, 0.1 * laplace, volume, pressure - 0.1 * laplace, TEMPERATURE);
    expect(Math.abs(rateWith(0.1 * laplace) / (-2e-15 * u) - 1)).toBeLessThan(1e-6);
    // Above: a growth rate of the order of the slow gas's own exchange, never that of the mobile one.
    const slow = rateWith(2 * laplace);
    expect(slow).toBeGreaterThan(0);
    expect(slow).toBeLessThan(1e-6 * 2e-15 * d);
  });
});

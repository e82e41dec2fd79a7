import { describe, it, expect } from 'vitest';
import { eliminationOrder } from '../../../core/stability/elimination-order.ts';
import { growthByInertia } from '../../../core/stability/growth-by-inertia.ts';
import { growthBySubspace } from '../../../core/stability/growth-by-subspace.ts';
import { countGrowing, softNodes } from '../../../core/stability/inertia.ts';
import type { ModeNetwork } from '../../../core/stability/mode-network.ts';
import { connectedParts, extractParts } from '../../../core/stability/mode-network.ts';
import { growingModes } from '../../../core/stability/modes.ts';
import { denseRates, generator, networkOf } from './random-networks.ts';

const GAS = 8.314462618 * 298.15;

interface Bed {
  readonly side: number;
  /** Spread of ln R. */
  readonly spread: number;
  /** Elasticity of one face, N/m, from a number between 0 and 1; the tension is 30 mN/m. */
  readonly elasticity: (draw: number) => number;
  /** u of a pool on every bubble, Pa/mol; 0 for none. */
  readonly pool: number;
  readonly seed: number;
}

/** Bubbles of about 50 micrometres in contact on a cubic lattice, perhaps over a pool. */
function bedOf({ side, spread, elasticity, pool, seed }: Bed): ModeNetwork {
  const random = generator(seed);
  const gauss = () => Math.sqrt(-2 * Math.log(Math.max(random(), 1e-12))) * Math.cos(2 * Math.PI * random());
  const radii = Array.from({ length: side ** 3 }, () => 50e-6 * Math.exp(spread * gauss()));
  const u = radii.map((R) => {
    const stiffness = ((2 / (R * R)) * (2 * elasticity(random()) - 0.03)) / (4 * Math.PI * R * R);
    return (GAS * stiffness) / (101325 + 0.06 / R + (4 / 3) * Math.PI * R ** 3 * stiffness);
  });
  const links: [number, number, number][] = [];
  for (let i = 0; i < radii.length; i++) {
    const steps = [i % side < side - 1, Math.floor(i / side) % side < side - 1, i < side * side * (side - 1)];
    for (const [axis, inside] of steps.entries()) {
      const j = i + side ** axis;
      if (inside) links.push([i, j, 1e-9 * 0.2 * Math.PI * Math.min(radii[i]!, radii[j]!) ** 2]);
    }
    if (pool > 0) links.push([i, radii.length, 1e-9 * 4 * Math.PI * radii[i]! ** 2]);
  }
  return networkOf(pool > 0 ? [...u, pool] : u, links);
}

function bothWays(network: ModeNetwork) {
  const parts = connectedParts(network);
  const soft = softNodes(network);
  const growing = countGrowing(network, parts, soft)[0]!;
  const part = extractParts(network, parts, Uint8Array.of(1), soft)[0]!;
  return {
    growing,
    iterated: growing > 0 ? growthBySubspace(part, growing) : null,
    bracketed: growing > 0 ? growthByInertia(part, eliminationOrder(part, 1e9)!) : null,
  };
}

const pureLiquid = () => 0;
const mixed = (draw: number) => 0.03 * draw;
const fewNearlyHold = (draw: number) => (draw < 0.05 ? 0.0149 : 0.02 + 0.03 * draw);
const fewWeak = (draw: number) => (draw < 0.01 ? 0 : 0.5);

describe('large networks', () => {
  it('of 343 bubbles agree with dense eigenvalues by both ways', () => {
    for (const elasticity of [pureLiquid, mixed, fewNearlyHold]) {
      for (const pool of [0, 1e11]) {
        const network = bedOf({ side: 7, spread: 0.3, elasticity, pool, seed: 5 });
        const rates = denseRates(network);
        const { growing, iterated, bracketed } = bothWays(network);
        const fastest = rates[rates.length - 1]!;
        expect(growing).toBe(rates.filter((rate) => rate > 1e-12 * Math.abs(rates[0]!)).length);
        expect(Math.abs(bracketed!.rate / fastest - 1)).toBeLessThan(1e-9);
        expect(iterated!.converged).toBe(true);
        expect(Math.abs(iterated!.rate / fastest - 1)).toBeLessThan(1e-7);
      }
    }
  });

  it('are not taken in by the fastest place found first: 120 random beds of 512 by both ways', () => {
    // The fastest modes sit on single small bubbles far apart, of nearly equal rates.
    let compared = 0;
    for (let seed = 1; seed <= 15; seed++) {
      for (const elasticity of [pureLiquid, mixed, fewNearlyHold, fewWeak]) {
        for (const pool of [0, 1e9]) {
          const network = bedOf({ side: 8, spread: seed % 2 === 1 ? 0.3 : 0.8, elasticity, pool, seed });
          const { iterated, bracketed } = bothWays(network);
          if (iterated === null || bracketed === null) continue;
          expect(bracketed.converged).toBe(true);
          if (iterated.converged) compared++;
          const error = Math.abs(iterated.rate / bracketed.rate - 1);
          if (iterated.converged) expect(error, `seed ${seed}, pool ${pool}`).toBeLessThan(1e-7);
        }
      }
    }
    expect(compared).toBeGreaterThan(110);
  });

  it('of 27000 bubbles with tubes that carry a million times more than films converge', () => {
    const network = bedOf({ side: 30, spread: 0.3, elasticity: fewNearlyHold, pool: 0, seed: 9 });
    const random = generator(4);
    const conductance = network.conductance.map((g) => (random() < 0.05 ? 1e6 * g : g));
    const modes = growingModes({ ...network, conductance });
    expect(modes.converged).toBe(true);
    expect(modes.fastestRate).toBeGreaterThan(0);
    expect(modes.starves.length).toBeGreaterThan(0);
  });

  it('of 97000 bubbles in contact over a pool converge', () => {
    const modes = growingModes(bedOf({ side: 46, spread: 0.3, elasticity: mixed, pool: 1e9, seed: 5 }));
    expect(modes.converged).toBe(true);
    expect(modes.uncertainty).toBeLessThan(1e-7);
    // The mode sits on one small bubble, which starves.
    expect(modes.starves).toHaveLength(1);
  });

  it('of 100000 bubbles over one pool solve the secular equation of the star', () => {
    const random = generator(3);
    const bubbles = 100_000;
    const pool = 1e7;
    const radii = Array.from({ length: bubbles }, () => 50e-6 * (0.5 + random()));
    const u = radii.map((R) => (-GAS * 0.06) / (4 * Math.PI * R ** 4) / 101325);
    const g = radii.map((R) => 1e-9 * 4 * Math.PI * R * R);
    const modes = growingModes(
      networkOf(
        [...u, pool],
        g.map((conductance, i) => [i, bubbles, conductance] as const),
      ),
    );
    expect(modes.count).toBe(bubbles);
    expect(modes.converged).toBe(true);
    // y_pool (lambda/u_p + sum g_i) = sum g_i y_i with y_i (g_i + lambda/u_i) = g_i y_pool: f changes sign at the rate.
    const f = (rate: number) => {
      let sum = rate / pool;
      for (let i = 0; i < bubbles; i++) sum += (g[i]! * (rate / u[i]!)) / (g[i]! + rate / u[i]!);
      return sum;
    };
    const rate = modes.fastestRate;
    expect(Math.sign(f(rate * (1 - 2e-9)))).not.toBe(Math.sign(f(rate * (1 + 2e-9))));
    // Nothing between there and the pole of the bubble that could be fastest alone.
    const alone = Math.max(...g.map((conductance, i) => -conductance * u[i]!));
    expect(rate).toBeLessThanOrEqual(alone * (1 + 1e-9));
  });
});

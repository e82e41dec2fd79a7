import { describe, it, expect } from 'vitest';
import { growingModes } from '../../../core/stability/modes.ts';
import type { ModeNetwork } from '../../../core/stability/mode-network.ts';
import { denseRates, generator, networkOf, smallNetwork } from './random-networks.ts';

/** Rates of these networks are of order 0.01 to 1e3: below this a dense eigenvalue is rounding of one that is 0. */
const ZERO = 1e-9;

describe('the counting rule', () => {
  it('gives the number of growing modes of 6000 random networks as dense eigenvalues do', () => {
    let judged = 0;
    let growing = 0;
    for (let seed = 1; seed <= 6000; seed++) {
      const network = smallNetwork(seed);
      const rates = denseRates(network);
      judged++;
      const dense = rates.filter((rate) => rate > ZERO).length;
      if (dense > 0) growing++;
      expect(growingModes(network).count, `seed ${seed}`).toBe(dense);
    }
    expect(judged).toBe(6000);
    expect(growing).toBeGreaterThan(1000);
    expect(growing).toBeLessThan(5000);
  });

  it('gives the fastest rate of 6000 random networks as dense eigenvalues do', () => {
    for (let seed = 1; seed <= 6000; seed++) {
      const network = smallNetwork(seed);
      const rates = denseRates(network);
      const modes = growingModes(network);
      expect(modes.converged, `seed ${seed}`).toBe(true);
      if (modes.count === 0) {
        expect(modes.fastestRate).toBe(0);
        continue;
      }
      // The dense path is good to rounding of its largest rate, ours to 1e-9 relative.
      const fastest = rates[rates.length - 1]!;
      const error = Math.abs(modes.fastestRate - fastest);
      expect(error, `seed ${seed}`).toBeLessThan(1e-9 * fastest + 1e-13 * Math.abs(rates[0]!));
    }
  });

  it('holds a closed bank with one weak bubble while the others give less than it can take', () => {
    // 1/|-0.5| = 2 exceeds 1/1 + 1/1.5 = 1.67: stable; with a softer neighbour 1/1 + 1/0.9 = 2.11: not.
    const stable = networkOf([-0.5, 1, 1.5], [[0, 1, 1], [1, 2, 1]]); // prettier-ignore
    const unstable = networkOf([-0.5, 1, 0.9], [[0, 1, 1], [1, 2, 1]]); // prettier-ignore
    expect(growingModes(stable).count).toBe(0);
    expect(growingModes(unstable).count).toBe(1);
  });

  it('lets no weak bubble hold against a reservoir', () => {
    const network = networkOf([-0.5, 100, 0], [[0, 1, 1], [1, 2, 1]], [2]); // prettier-ignore
    expect(growingModes(network).count).toBe(1);
  });

  it('counts no growth where a closed pair stands exactly at the boundary', () => {
    expect(growingModes(networkOf([-1, 1], [[0, 1, 1]])).count).toBe(0);
    expect(growingModes(networkOf([0, 0], [[0, 1, 1]])).count).toBe(0);
  });

  it('counts a weak bubble beside one of no stiffness as growing', () => {
    const modes = growingModes(networkOf([-2, 0, 0], [[0, 1, 3], [1, 2, 1]])); // prettier-ignore
    expect(modes.count).toBe(1);
    expect(modes.fastestRate).toBeCloseTo(6, 8); // -G (u_i + 0)
  });

  it('judges stiffness that is tiny but not zero by its sign', () => {
    const links: [number, number, number][] = [[0, 1, 1]];
    expect(growingModes(networkOf([-1e-150, 1], links)).count).toBe(0);
    expect(growingModes(networkOf([1e-150, -1], links)).count).toBe(1);
    expect(growingModes(networkOf([-1e-150, -1], links)).count).toBe(1);
  });

  it('lets a shut valve part the network', () => {
    expect(growingModes(networkOf([-1, -1], [[0, 1, 0]])).count).toBe(0);
    expect(growingModes(networkOf([-1, -1], [[0, 1, 1]])).count).toBe(1);
  });

  it('refuses a stiffness that is not a number', () => {
    expect(() => growingModes(networkOf([NaN, 1], [[0, 1, 1]]))).toThrow(RangeError);
    expect(() => growingModes(networkOf([-1, 1], [[0, 1, -1]]))).toThrow(RangeError);
  });
});

/** Bubbles on one manifold of small volume, fed from nothing; all on tubes of about the same bore. */
function manifold(bubbles: number, stiffness: (i: number) => number, seed: number): ModeNetwork {
  const random = generator(seed);
  const u = Array.from({ length: bubbles }, (_, i) => stiffness(i));
  u.push(1e12);
  return networkOf(
    u,
    u.slice(0, -1).map((_, i) => [i, bubbles, 4e-5 * (0.9 + 0.2 * random())] as const),
  );
}

describe('the fastest rate', () => {
  it('of one pair is -G (u_i + u_j)', () => {
    const modes = growingModes(networkOf([-3e10, 1e10], [[0, 1, 2e-12]]));
    expect(Math.abs(modes.fastestRate / 0.04 - 1)).toBeLessThan(1e-9); // the bracket's width
  });

  it('keeps its digits beside relaxation fifteen decades faster', () => {
    // Two equal bubbles on a stiff little cavity: the odd mode has the rate -G u exactly, whatever the cavity.
    const [G, u] = [1e-9, -1e4];
    const network = networkOf([u, u, 1e19], [[0, 2, G], [1, 2, G]]); // prettier-ignore
    const modes = growingModes(network);
    expect(modes.count).toBe(1);
    expect(Math.abs(modes.fastestRate / 1e-5 - 1)).toBeLessThan(1e-9);
  });

  it('of a bank nearly at its boundary says how far rounding of the stiffnesses blurs it', () => {
    // Rate -G (u_i + u_j), where the sum has lost all but 2^-32 of its digits: subtraction of two doubles is exact.
    const [G, u, v] = [1e-4, 1e9, -1e9 * (1 + 2 ** -32)];
    const modes = growingModes(networkOf([u, v], [[0, 1, G]]));
    const error = Math.abs(modes.fastestRate / (-G * (u + v)) - 1);
    expect(error).toBeLessThan(modes.uncertainty);
    expect(modes.uncertainty).toBeGreaterThan(1e-7);
    expect(modes.uncertainty).toBeLessThan(1e-4);
  });

  it('of a manifold agrees with dense eigenvalues', () => {
    const random = generator(7);
    const network = manifold(60, () => 1e9 * (2 * random() - 1), 3);
    const rates = denseRates(network);
    const modes = growingModes(network);
    // The cavity's mode, 2e9/s, sets the rounding of the dense path.
    expect(Math.abs(modes.fastestRate - rates[rates.length - 1]!)).toBeLessThan(1e-13 * Math.abs(rates[0]!));
    expect(modes.count).toBe(rates.filter((rate) => rate > 1e-3).length);
  });

  it('of several parts is that of the fastest part', () => {
    const network = networkOf([-1, -1, -5, -5, 2], [[0, 1, 1], [2, 3, 1]]); // prettier-ignore
    expect(growingModes(network).fastestRate).toBeCloseTo(10, 7);
    expect(growingModes(network).count).toBe(2);
    expect([...growingModes(network).feeds, ...growingModes(network).starves].sort()).toEqual([2, 3]);
  });

  it('does not depend on the order of the nodes', () => {
    const network = smallNetwork(30);
    const last = network.size - 1;
    const reversed: ModeNetwork = {
      size: network.size,
      u: network.u.toReversed(),
      from: network.from.map((i) => last - i),
      to: network.to.map((i) => last - i),
      conductance: network.conductance,
      grounded: network.grounded.toReversed(),
    };
    const [one, two] = [growingModes(network), growingModes(reversed)];
    expect(one.count).toBeGreaterThan(0);
    expect(two.count).toBe(one.count);
    expect(Math.abs(two.fastestRate / one.fastestRate - 1)).toBeLessThan(2e-9);
  });
});

describe('the groups of the fastest mode', () => {
  const star = networkOf([-1, -1, -8, 50], [[0, 3, 1], [1, 3, 1], [2, 3, 1]]); // prettier-ignore
  const named = Uint8Array.of(1, 1, 1, 0);

  it('starve the bubble that loses gas now and feed its partners', () => {
    const modes = growingModes(star, { named, flow: Float64Array.of(1, 1, -2, 0) });
    expect(modes.starves).toEqual([2]);
    expect([...modes.feeds].sort()).toEqual([0, 1]);
  });

  it('turn round with the flow', () => {
    const modes = growingModes(star, { named, flow: Float64Array.of(-1, -1, 2, 0) });
    expect(modes.feeds).toEqual([2]);
  });

  it('starve the bubble of highest pressure where nothing flows', () => {
    const pressure = Float64Array.of(100, 101, 130, 500);
    expect(growingModes(star, { named, pressure, flow: new Float64Array(4) }).starves).toEqual([2]);
    const modes = growingModes(networkOf([-1, -1], [[0, 1, 1]]), { pressure: Float64Array.of(5, 7) });
    expect(modes.starves).toEqual([1]);
    expect(modes.feeds).toEqual([0]);
  });

  it('name no cavity, pool or reservoir', () => {
    const modes = growingModes(networkOf([-1, 0], [[0, 1, 1]], [1]), { named: Uint8Array.of(1, 0) });
    expect([...modes.feeds, ...modes.starves]).toEqual([0]);
  });

  it('are empty where nothing grows', () => {
    const modes = growingModes(networkOf([1, 1], [[0, 1, 1]]));
    expect([...modes.feeds, ...modes.starves]).toEqual([]);
  });
});

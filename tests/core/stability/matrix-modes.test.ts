import { describe, it, expect } from 'vitest';
import { growingModesOfMatrix } from '../../../core/stability/matrix-modes.ts';
import { growingModes } from '../../../core/stability/modes.ts';
import { connectedParts } from '../../../core/stability/mode-network.ts';
import { jacobianOf, smallNetwork } from './random-networks.ts';

describe('modes from the whole Jacobian', () => {
  it('agree with the counting rule and its rate on 2000 random networks of one gas', () => {
    let growing = 0;
    for (let seed = 1; seed <= 2000; seed++) {
      const network = smallNetwork(seed);
      const parts = connectedParts(network);
      const conserved = parts.open.filter((open) => open === 0).length;
      const { matrix, size } = jacobianOf(network);
      const dense = growingModesOfMatrix(matrix, size, conserved);
      const modes = growingModes(network);
      expect(dense.count, `seed ${seed}`).toBe(modes.count);
      growing += modes.count;
      // The counting path is good to 1e-9 relative; the QR algorithm to the norm (up to 1e3) times the condition.
      const error = Math.abs(dense.fastestRate - modes.fastestRate);
      expect(error, `seed ${seed}`).toBeLessThan(1e-9 * modes.fastestRate + 1e-9);
    }
    expect(growing).toBeGreaterThan(1000);
  });

  it('find slow growth between unknowns of very different size', () => {
    // A pair of amounts of 1e-12 mol that exchanges with itself, beside a pool of 1 mol: scaled unknowns of one pair.
    const big = 1e12;
    const jacobian = Float64Array.of(1e-4, -1e-4 * big, 0, -1e-4 / big, 1e-4, 0, 0, 0, -1e5);
    const modes = growingModesOfMatrix(jacobian, 3, 1);
    expect(modes.count).toBe(1);
    expect(Math.abs(modes.fastestRate / 2e-4 - 1)).toBeLessThan(1e-6); // rounding of 1e5 is 1e-11
    expect(Math.abs(modes.vector[0]! / modes.vector[1]! / -big - 1)).toBeLessThan(1e-6);
  });

  it('say the frequency of a mode that swings as it grows', () => {
    const modes = growingModesOfMatrix(Float64Array.of(1, -3, 3, 1), 2, 0);
    expect(modes.count).toBe(2);
    expect(modes.fastestRate).toBeCloseTo(1, 12);
    expect(modes.frequency).toBeCloseTo(3, 12);
  });

  it('do not take a conserved total for growth', () => {
    const modes = growingModesOfMatrix(Float64Array.of(-1, 1, 1, -1), 2, 1);
    expect(modes.count).toBe(0);
    expect(modes.fastestRate).toBe(0);
  });

  it('refuse an entry that is not a number', () => {
    expect(() => growingModesOfMatrix(Float64Array.of(NaN), 1, 0)).toThrow(RangeError);
  });
});

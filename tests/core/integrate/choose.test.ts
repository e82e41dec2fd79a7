/** Who gets which method: what is not certainly slow goes to the stiff one. */
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { chooseMethod } from '../../../core/integrate/choose.ts';
import { systemOf, type Problem } from './problems.ts';

/** Decays with these rates, none coupled. */
function decays(rates: readonly number[]): Problem {
  return {
    size: rates.length,
    rates: (_t, y, out) => rates.forEach((rate, i) => (out[i] = -rate * y[i]!)),
    jacobian: (_t, _y, set) => rates.forEach((rate, i) => set(i, i, -rate)),
    scale: () => 1e-6,
  };
}

const choice = (
  rates: readonly number[],
  until: number,
  asked: 'auto' | 'explicit' | 'stiff',
  carries = false,
): string => chooseMethod(systemOf(decays(rates)), new Float64Array(rates.length).fill(1), until, asked, carries).name;

describe('the method chosen', () => {
  it('is explicit for a small network that is slow against its run', () => {
    expect(choice([1, 2, 5], 10, 'auto')).toBe('explicit');
  });

  it('is stiff as soon as one mode could be fast, however slow the rest', () => {
    fc.assert(
      fc.property(
        fc.array(fc.double({ min: 1e-3, max: 1, noNaN: true }), { minLength: 1, maxLength: 20 }),
        fc.integer({ min: 0, max: 20 }),
        fc.double({ min: 1001, max: 1e12, noNaN: true }),
        (slow, place, fast) => {
          const rates = [...slow];
          rates.splice(Math.min(place, slow.length), 0, fast);
          expect(choice(rates, 1, 'auto')).toBe('stiff');
        },
      ),
      { seed: 11, numRuns: 200 },
    );
  });

  it('is stiff where the rate is no number', () => {
    expect(choice([1, NaN], 1, 'auto')).toBe('stiff');
  });

  it('is stiff for more unknowns than the library is quick with', () => {
    expect(choice(new Array<number>(65).fill(1), 1, 'auto')).toBe('stiff');
  });

  it('is the pair for large networks where dying bubbles are carried apart, and stiff beyond its reach', () => {
    expect(choice([1], 1.9e4, 'auto', true)).toBe('structured');
    expect(choice([1], 2.1e4, 'auto', true)).toBe('stiff');
  });

  it('is what was asked for', () => {
    expect(choice([1], 1, 'stiff')).toBe('stiff');
    expect(choice([1e9], 1, 'explicit')).toBe('explicit');
  });
});

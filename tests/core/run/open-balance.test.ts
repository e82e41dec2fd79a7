/** The balance of a network that takes in far more gas than it began with: what closes to rounding is told to close. */
import { describe, expect, it } from 'vitest';
import { carryThrough } from '../../run-scenario.ts';

const recipes = { bare: { tension: { law: 'constant', clean: '30 mN/m' } } };

describe('the gas balance', () => {
  it('closes to rounding where a supply blows a bubble up to millions of times its gas', () => {
    const { result, frames } = carryThrough({
      recipes,
      nodes: [
        { id: 'A', kind: 'bubble', radius: '1 mm', faces: 2, recipe: 'bare' },
        { id: 'S', kind: 'reservoir', pressure: '2 bar' },
      ],
      links: [{ id: 't', kind: 'tube', from: 'S', to: 'A', bore: '1 mm', length: '50 mm' }],
      run: { until: '1 h', frames: 4 },
    });
    expect(frames.at(-1)!.amount.A! / frames[0]!.amount.A!).toBeGreaterThan(1e6);
    // Against the gas that there is: a double has 16 digits, and the run a few hundred steps.
    expect(result.worstGasBalance).toBeLessThan(1e-12);
  });

  it('closes to rounding for a trace that a feed makes the greater part', () => {
    const { result } = carryThrough({
      gases: { air: {}, helium: {} },
      recipes,
      nodes: [
        { id: 'A', kind: 'bubble', radius: '1 mm', recipe: 'bare', gas: { air: 1, helium: 1e-9 }, feed: { rate: '1 umol/s', gas: { helium: 1 } } }, // prettier-ignore
        { id: 'B', kind: 'bubble', radius: '1 mm', recipe: 'bare', gas: { air: 1 } },
      ],
      links: [{ id: 't', kind: 'tube', from: 'A', to: 'B', bore: '1 mm', length: '50 mm' }],
      run: { until: '100 s', frames: 4 },
    });
    expect(result.worstGasBalance).toBeLessThan(1e-12);
  });
});

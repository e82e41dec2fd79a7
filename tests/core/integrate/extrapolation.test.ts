import { describe, expect, it } from 'vitest';
import { createExtrapolation, MOST_EFOLDINGS } from '../../../core/integrate/extrapolation.ts';
import references from '../../references/integrators.json' with { type: 'json' };
import {
  drivenByTwoRates,
  drivenPair,
  hyperbola,
  hyperbolaAt,
  robertson,
  runTo,
  systemOf,
  vanDerPol,
  type Problem,
} from './problems.ts';

const make = (problem: Problem, until: number) => createExtrapolation(systemOf(problem), until);
const start = (y: readonly number[]): Float64Array => Float64Array.from(y);

describe('extrapolation: solutions', () => {
  it('follows a decay in inverse powers of time to the tolerance, in very few steps', () => {
    for (const tolerance of [1e-5, 1e-8, 1e-11]) {
      const stepper = make(hyperbola(tolerance), 10);
      stepper.restart(0, start([1, 1]), 0);
      expect(runTo(stepper, 10)).toBe('arrived');
      hyperbolaAt(10).forEach((y, i) => expect(Math.abs(stepper.state[i]! / y - 1)).toBeLessThan(10 * tolerance));
      expect(stepper.statistics.steps).toBeLessThan(40);
    }
  });

  it('follows a driven nonlinear pair', () => {
    // tests/references/integrators.py: two methods of SciPy that agree to 1e-12.
    const { times, states } = references.drivenPair;
    const stepper = make(drivenPair(1e-10), 10);
    stepper.restart(0, start([1, 0.5]), 0);
    times.forEach((t, q) => {
      expect(runTo(stepper, t)).toBe('arrived');
      expect(stepper.time).toBe(t);
      states[q]!.forEach((y, i) => expect(Math.abs(stepper.state[i]! - y)).toBeLessThan(1e-8));
    });
  });

  it('takes systems whose times are nanoseconds or centuries alike', () => {
    const steps = [1e-9, 1, 1e9].map((unit) => {
      const base = hyperbola(1e-8);
      const stepper = make(
        {
          ...base,
          rates(t, y, out) {
            base.rates(t, y, out);
            for (let i = 0; i < 2; i++) out[i]! /= unit;
          },
          jacobian: (t, y, set) => base.jacobian(t, y, (r, c, value) => set(r, c, value / unit)),
        },
        10 * unit,
      );
      stepper.restart(0, start([1, 1]), 0);
      expect(runTo(stepper, 10 * unit)).toBe('arrived');
      hyperbolaAt(10).forEach((y, i) => expect(Math.abs(stepper.state[i]! / y - 1)).toBeLessThan(1e-7));
      return stepper.statistics.steps;
    });
    expect(Math.max(...steps) - Math.min(...steps)).toBeLessThanOrEqual(1);
  });

  it('looks at no instant beyond the limit, for beyond a waveform edge the rates are another law', () => {
    let latest = 0;
    const base = drivenPair(1e-8);
    const stepper = make(
      {
        ...base,
        rates(t, y, out) {
          latest = Math.max(latest, t);
          base.rates(t, y, out);
        },
      },
      10,
    );
    stepper.restart(0, start([1, 0.5]), 0);
    for (const limit of [0.3, 0.31, 1, 2.5, 2.6, 7, 10]) {
      expect(runTo(stepper, limit)).toBe('arrived');
      expect(latest).toBeLessThanOrEqual(limit);
    }
  });

  it('has a dense output as good as its steps, and the states at both ends', () => {
    const stepper = make(hyperbola(1e-9), 10);
    stepper.restart(0, start([1, 1]), 0);
    const out = new Float64Array(2);
    while (stepper.time < 10) {
      const before = stepper.state.slice();
      expect(stepper.step(10).kind).toBe('accepted');
      stepper.interpolate(stepper.previousTime, out);
      expect([...out]).toEqual([...before]);
      stepper.interpolate(stepper.time, out);
      expect([...out]).toEqual([...stepper.state]);
      for (let q = 1; q < 8; q++) {
        const t = stepper.previousTime + ((stepper.time - stepper.previousTime) * q) / 8;
        stepper.interpolate(t, out);
        hyperbolaAt(t).forEach((y, i) => {
          expect(Math.abs(out[i]! / y - 1)).toBeLessThan(2e-8);
          expect(stepper.interpolateOne(t, i)).toBe(out[i]);
        });
      }
    }
  });

  it('gives the same bytes in two runs', () => {
    const run = (): number[] => {
      const stepper = make(drivenPair(1e-8), 10);
      stepper.restart(0, start([1, 0.5]), 0);
      runTo(stepper, 10);
      return [...stepper.state, stepper.statistics.rateEvaluations];
    };
    expect(run()).toEqual(run());
  });

  it('does not let an unknown that is not controlled shorten its steps, nor lose it', () => {
    const stepper = make(
      {
        size: 2,
        rates(_t, y, out) {
          out[0] = -y[0]!;
          out[1] = y[0]!;
        },
        jacobian(_t, _y, set) {
          set(0, 0, -1);
          set(1, 0, 1);
        },
        scale: (y, i) => (i === 1 ? Infinity : 1e-8 * Math.abs(y)),
      },
      5,
    );
    stepper.restart(0, start([1e-9, 3]), 0);
    expect(runTo(stepper, 5)).toBe('arrived');
    expect(Math.abs(stepper.state[1]! - 3 - 1e-9 * (1 - Math.exp(-5)))).toBeLessThan(1e-15);
  });
});

describe('extrapolation: the guard against stiffness', () => {
  it('refuses a system with rates 1 and 1e5 before its first step', () => {
    const stepper = make(drivenByTwoRates(1e5, 1e-6), 10);
    stepper.restart(0, start([0, 0]), 0);
    const outcome = stepper.step(10);
    expect(outcome.kind).toBe('stiff');
    // A bound from above, at most twice the truth for what is exchanged.
    if (outcome.kind === 'stiff') {
      expect(outcome.fastestRate).toBeGreaterThanOrEqual(1e5);
      expect(outcome.fastestRate).toBeLessThanOrEqual(2.1e5);
    }
    expect(stepper.time).toBe(0);
  });

  it('refuses however near the limits are set, for the run is as long as it is', () => {
    const stepper = make(drivenByTwoRates(1e5, 1e-6), 10);
    stepper.restart(0, start([0, 0]), 0);
    expect(stepper.step(1e-3).kind).toBe('stiff');
  });

  it("refuses Van der Pol's oscillator at mu = 1000, and Robertson's reaction before it goes wrong", () => {
    const oscillator = make(vanDerPol(1e3, 1e-6), 2000);
    oscillator.restart(0, start([2, 0]), 0);
    expect(runTo(oscillator, 2000)).toBe('stiff');
    const reaction = make(robertson(1e-6), 40);
    reaction.restart(0, start([1, 0, 0]), 0);
    expect(runTo(reaction, 40)).toBe('stiff');
    expect(reaction.time).toBeLessThan(1);
  });

  it('is right wherever it does not refuse: a fast mode within the allowance costs steps, not accuracy', () => {
    const fast = (0.45 * MOST_EFOLDINGS) / 5;
    const stepper = make(drivenByTwoRates(fast, 1e-6), 5);
    stepper.restart(0, start([0, 0]), 0);
    expect(runTo(stepper, 5)).toBe('arrived');
    const x = (Math.sin(5) - Math.cos(5) + Math.exp(-5)) / 2;
    expect(Math.abs(stepper.state[0]! - x)).toBeLessThan(1e-5);
    // y follows x with a lag of x'/fast.
    const slope = (Math.cos(5) + Math.sin(5) - Math.exp(-5)) / 2;
    expect(Math.abs(stepper.state[1]! - x + slope / fast)).toBeLessThan(1e-5);
  });

  it('gives back the start of a step inside which the system turned stiff, though no error shows', () => {
    // y = t whatever the rate, which leaps from 0 to 100 half way.
    const rate = (t: number): number => (t < 0.5 ? 0 : 100);
    const problem: Problem = {
      size: 1,
      rates: (t, y, out) => void (out[0] = 1 - rate(t) * (y[0]! - t)),
      jacobian: (t, _y, set) => set(0, 0, -rate(t)),
      scale: () => 1e-6,
    };
    const stepper = make(problem, 1);
    stepper.restart(0, start([0]), 0.1);
    let outcome = stepper.step(1);
    while (outcome.kind === 'accepted') outcome = stepper.step(1);
    expect(outcome).toEqual({ kind: 'stiff', fastestRate: 100 });
    expect(stepper.time).toBeGreaterThan(0);
    expect(stepper.time).toBeLessThan(0.5);
    expect(Math.abs(stepper.state[0]! - stepper.time)).toBeLessThan(1e-14);
  });
});

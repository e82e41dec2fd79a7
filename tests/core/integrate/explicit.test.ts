import { describe, expect, it } from 'vitest';
import { createExplicit } from '../../../core/integrate/explicit.ts';
import references from '../../references/integrators.json' with { type: 'json' };
import {
  denseError,
  drivenByTwoRates,
  drivenPair,
  evenError,
  hyperbola,
  hyperbolaAt,
  logistic,
  logisticAt,
  poolExchange,
  protheroRobinson,
  robertson,
  runEvenly,
  runTo,
  systemOf,
  uncontrolled,
  vanDerPol,
  wave,
  waveAt,
  type Problem,
} from './problems.ts';

const options = { norm: 'max', companion: null } as const;
const make = (problem: Problem) => createExplicit(systemOf(problem), options);
const start = (y: readonly number[]): Float64Array => Float64Array.from(y);
const forced = (t: number): number => 2 + Math.sin(t);

describe('the explicit stepper: order', () => {
  it('gains a factor of 2^5 from half the step on a nonlinear system', () => {
    const order = Math.log2(
      evenError(make(logistic), logisticAt, 0, 2.4, 32) / evenError(make(logistic), logisticAt, 0, 2.4, 64),
    );
    expect(Math.abs(order - 5)).toBeLessThan(0.3);
  });

  it('gains as much where the rates depend on time', () => {
    const order = Math.log2(evenError(make(wave), waveAt, 0, 2.4, 64) / evenError(make(wave), waveAt, 0, 2.4, 128));
    expect(Math.abs(order - 5)).toBeLessThan(0.3);
  });

  it('gains as much on a driven system that relaxes', () => {
    const problem = { ...protheroRobinson(2, 1), scale: uncontrolled };
    const order = Math.log2(
      evenError(make(problem), forced, 0, 2.4, 64) / evenError(make(problem), forced, 0, 2.4, 128),
    );
    expect(Math.abs(order - 5)).toBeLessThan(0.3);
  });

  it('has a dense output whose error over one step falls as h^5', () => {
    for (const [problem, exact] of [
      [logistic, logisticAt],
      [wave, waveAt],
    ] as const) {
      const order = Math.log2(denseError(make(problem), exact, 1, 0.05) / denseError(make(problem), exact, 1, 0.025));
      expect(Math.abs(order - 5)).toBeLessThan(0.3);
    }
  });
});

describe('the explicit stepper: solutions', () => {
  it('follows a decay in inverse powers of time to the tolerance, in few steps', () => {
    const stepper = make(hyperbola(1e-8));
    stepper.restart(0, start([1, 1]), 0);
    expect(runTo(stepper, 10)).toBe('arrived');
    hyperbolaAt(10).forEach((y, i) => expect(Math.abs(stepper.state[i]! / y - 1)).toBeLessThan(1e-7));
    expect(stepper.statistics.steps).toBeLessThan(100);
  });

  it('follows a driven nonlinear pair', () => {
    // tests/references/integrators.py: two methods of SciPy that agree to 1e-12.
    const { times, states } = references.drivenPair;
    const stepper = make(drivenPair(1e-10));
    stepper.restart(0, start([1, 0.5]), 0);
    times.forEach((t, q) => {
      expect(runTo(stepper, t)).toBe('arrived');
      states[q]!.forEach((y, i) => expect(Math.abs(stepper.state[i]! - y)).toBeLessThan(1e-8));
    });
  });

  it('evaluates six rates a step: the last is the first of the next', () => {
    const stepper = make(hyperbola(1e-6));
    stepper.restart(0, start([1, 1]), 0.01);
    for (let s = 0; s < 10; s++) stepper.step(10);
    expect(stepper.statistics.rejected).toBe(0);
    expect(stepper.statistics.rateEvaluations).toBe(1 + 6 * 10);
  });

  it('keeps the total over ten thousand steps to rounding', () => {
    const stores = 40;
    const stepper = createExplicit(poolExchange(stores, 1, 1e9).system, options);
    const y = [...Array.from({ length: stores }, (_, i) => 1 + 0.02 * i), 0.7 * stores];
    const total = y.reduce((a, b) => a + b, 0);
    runEvenly(stepper, y, 0, 100, 10_000);
    expect(Math.abs(stepper.state.reduce((a, b) => a + b, 0) / total - 1)).toBeLessThan(1e-13);
  });

  it('sees a change of the system once it is told of it', () => {
    let pace = 1;
    const problem: Problem = {
      size: 1,
      rates: (_t, y, out) => void (out[0] = -pace * y[0]!),
      jacobian: (_t, _y, set) => set(0, 0, -pace),
      scale: () => 1e-10,
    };
    const stepper = make(problem);
    stepper.restart(0, start([1]), 0);
    expect(runTo(stepper, 1)).toBe('arrived');
    pace = 0;
    stepper.invalidate();
    expect(runTo(stepper, 2)).toBe('arrived');
    expect(Math.abs(stepper.state[0]! - Math.exp(-1))).toBeLessThan(1e-9);
  });
});

describe('the explicit stepper: stiffness', () => {
  it('hands over a system with rates 1 and 1e5 once the fast one holds its steps short', () => {
    const stepper = make(drivenByTwoRates(1e5, 1e-4));
    stepper.restart(0, start([0, 0]), 0);
    const outcome = untilNotAccepted(stepper, 10);
    expect(outcome.kind).toBe('stiff');
    // The rate that two stages feel between them is that of the fast mode.
    if (outcome.kind === 'stiff') expect(Math.abs(outcome.fastestRate / 1e5 - 1)).toBeLessThan(0.1);
    expect(stepper.statistics.steps).toBeLessThan(200);
  });

  it("hands over Van der Pol's oscillator at mu = 1000 and Robertson's reaction", () => {
    for (const [problem, y, end] of [
      [vanDerPol(1e3, 1e-4), [2, 0], 500],
      [robertson(1e-4), [1, 0, 0], 40],
    ] as const) {
      const stepper = make(problem);
      stepper.restart(0, start(y), 0);
      expect(untilNotAccepted(stepper, end).kind).toBe('stiff');
      expect(stepper.statistics.steps).toBeLessThan(500);
    }
  });

  it('leaves time and state at the last step that was kept when it hands over', () => {
    const stepper = make(drivenByTwoRates(1e5, 1e-4));
    stepper.restart(0, start([0, 0]), 0);
    let time = 0;
    let state = stepper.state.slice();
    while (stepper.step(10).kind === 'accepted') {
      time = stepper.time;
      state = stepper.state.slice();
    }
    expect(stepper.time).toBe(time);
    expect([...stepper.state]).toEqual([...state]);
  });

  it('does not cry stiff on an oscillation that accuracy alone limits', () => {
    const problem: Problem = {
      size: 2,
      rates(_t, y, out) {
        out[0] = y[1]!;
        out[1] = -y[0]!;
      },
      jacobian(_t, _y, set) {
        set(0, 1, 1);
        set(1, 0, -1);
      },
      scale: () => 1e-6,
    };
    const stepper = make(problem);
    stepper.restart(0, start([1, 0]), 0);
    expect(runTo(stepper, 200)).toBe('arrived');
  });
});

function untilNotAccepted(stepper: ReturnType<typeof make>, end: number): ReturnType<typeof stepper.step> {
  for (;;) {
    const outcome = stepper.step(end);
    if (outcome.kind !== 'accepted' || stepper.time >= end) return outcome;
  }
}

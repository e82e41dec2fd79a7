import { describe, expect, it } from 'vitest';
import { createRosenbrock } from '../../../core/integrate/rosenbrock.ts';
import references from '../../references/integrators.json' with { type: 'json' };
import {
  denseError,
  drivenByTwoRates,
  drivenPair,
  evenError,
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
const make = (problem: Problem) => createRosenbrock(systemOf(problem), options);
const start = (y: readonly number[]): Float64Array => Float64Array.from(y);
const forced = (t: number): number => 2 + Math.sin(t);

describe('the stiff stepper: order', () => {
  it('gains a factor of 2^5 from half the step on a nonlinear system', () => {
    const order = Math.log2(
      evenError(make(logistic), logisticAt, 0, 2.4, 32) / evenError(make(logistic), logisticAt, 0, 2.4, 64),
    );
    expect(Math.abs(order - 5)).toBeLessThan(0.3);
  });

  it('gains as much where rates and Jacobian depend on time', () => {
    const order = Math.log2(evenError(make(wave), waveAt, 0, 2.4, 32) / evenError(make(wave), waveAt, 0, 2.4, 64));
    expect(Math.abs(order - 5)).toBeLessThan(0.3);
  });

  it('gains as much on a driven system that relaxes, and on pure quadrature', () => {
    for (const lambda of [2, 0]) {
      const problem = { ...protheroRobinson(lambda, 1), scale: uncontrolled };
      const order = Math.log2(
        evenError(make(problem), forced, 0, 2.4, 16) / evenError(make(problem), forced, 0, 2.4, 32),
      );
      expect(Math.abs(order - 5)).toBeLessThan(0.3);
    }
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

  it('follows a slow solution of a system a million times faster without error growing with the stiffness', () => {
    // Prothero & Robinson: order falls to 3 in the stiff limit (Steinebach 2023), and the error with 1/lambda.
    const problem = { ...protheroRobinson(1e6, 1), scale: uncontrolled };
    const coarse = evenError(make(problem), forced, 0, 2.4, 16);
    const fine = evenError(make(problem), forced, 0, 2.4, 32);
    expect(coarse).toBeLessThan(1e-10);
    expect(Math.log2(coarse / fine)).toBeGreaterThan(2.7);
  });
});

describe('the stiff stepper: solutions found elsewhere', () => {
  // Values: tests/references/integrators.py, two methods of SciPy that agree to 2e-9 or better.
  it("follows Robertson's reaction over nine decades of time", () => {
    const { times, states } = references.robertson;
    const stepper = make(robertson(1e-7));
    stepper.restart(0, start([1, 0, 0]), 0);
    times.forEach((t, q) => {
      expect(runTo(stepper, t)).toBe('arrived');
      // A hundred times the tolerance of a step, for the steps on the way.
      states[q]!.forEach((y, i) => expect(Math.abs(stepper.state[i]! / y - 1)).toBeLessThan(1e-5));
    });
  });

  it("arrives at the published end of Robertson's reaction at 1e11 s", () => {
    // Test Set for IVP Solvers (Mazzia & Magherini, release 2.4), problem ROBER, solution at the end.
    const published = [0.2083340149701255e-7, 0.8333360770334713e-13, 0.999999979166505];
    const stepper = make(robertson(1e-7));
    stepper.restart(0, start([1, 0, 0]), 0);
    expect(runTo(stepper, 1e11)).toBe('arrived');
    published.forEach((y, i) => expect(Math.abs(stepper.state[i]! / y - 1)).toBeLessThan(1e-5));
  });

  it("arrives at the published end of Van der Pol's oscillator at mu = 1000", () => {
    // Test Set for IVP Solvers, problem VDPOL: time in units of mu, eps = 1/mu^2 = 1e-6, solution at t = 2.
    const published = [0.1706167732170483e1, -0.8928097010247975];
    const mu2 = 1e6;
    const problem: Problem = {
      size: 2,
      rates(_t, y, out) {
        out[0] = y[1]!;
        out[1] = mu2 * ((1 - y[0]! * y[0]!) * y[1]! - y[0]!);
      },
      jacobian(_t, y, set) {
        set(0, 1, 1);
        set(1, 0, mu2 * (-2 * y[0]! * y[1]! - 1));
        set(1, 1, mu2 * (1 - y[0]! * y[0]!));
      },
      scale: (y) => 1e-8 * (1 + Math.abs(y)),
    };
    const stepper = make(problem);
    stepper.restart(0, start([2, 0]), 0);
    expect(runTo(stepper, 2)).toBe('arrived');
    published.forEach((y, i) => expect(Math.abs(stepper.state[i]! / y - 1)).toBeLessThan(1e-5));
    expect(stepper.statistics.steps).toBeLessThan(3000);
  });

  it("follows Van der Pol's oscillator at mu = 5", () => {
    const { times, states } = references.vanDerPol5;
    const stepper = make(vanDerPol(5, 1e-9));
    stepper.restart(0, start([2, 0]), 0);
    times.forEach((t, q) => {
      expect(runTo(stepper, t)).toBe('arrived');
      states[q]!.forEach((y, i) => expect(Math.abs(stepper.state[i]! - y)).toBeLessThan(2e-6));
    });
  });

  it('follows a driven nonlinear pair', () => {
    const { times, states } = references.drivenPair;
    const stepper = make(drivenPair(1e-10));
    stepper.restart(0, start([1, 0.5]), 0);
    times.forEach((t, q) => {
      expect(runTo(stepper, t)).toBe('arrived');
      states[q]!.forEach((y, i) => expect(Math.abs(stepper.state[i]! - y)).toBeLessThan(1e-8));
    });
  });

  it('follows twelve stores over a pool, six decades of pace, from its first instants to rest', () => {
    const { times, states } = references.pool12;
    const stepper = createRosenbrock(poolExchange(12, 6, 1e-8).system, options);
    stepper.restart(0, start([...Array.from({ length: 12 }, (_, i) => 1 + 0.05 * i), 6]), 0);
    times.forEach((t, q) => {
      expect(runTo(stepper, t)).toBe('arrived');
      states[q]!.forEach((y, i) => expect(Math.abs(stepper.state[i]! / y - 1)).toBeLessThan(1e-6));
    });
  });

  it('takes few steps where an explicit method would need a million', () => {
    const stepper = make(drivenByTwoRates(1e5, 1e-6));
    stepper.restart(0, start([0, 0]), 0);
    expect(runTo(stepper, 10)).toBe('arrived');
    expect(stepper.statistics.steps).toBeLessThan(400);
    // x = (sin t - cos t + e^-t)/2; y lags behind it by less than 1e-5.
    const x = (Math.sin(10) - Math.cos(10) + Math.exp(-10)) / 2;
    expect(Math.abs(stepper.state[0]! - x)).toBeLessThan(1e-5);
    expect(Math.abs(stepper.state[1]! - x)).toBeLessThan(2e-5);
  });
});

describe('the stiff stepper: what is conserved', () => {
  it('keeps the total over ten thousand steps to rounding', () => {
    const stores = 40;
    const stepper = createRosenbrock(poolExchange(stores, 2, 1e9).system, options);
    const y = [...Array.from({ length: stores }, (_, i) => 1 + 0.02 * i), 0.7 * stores];
    const total = y.reduce((a, b) => a + b, 0);
    runEvenly(stepper, y, 0, 100, 10_000);
    expect(Math.abs(stepper.state.reduce((a, b) => a + b, 0) / total - 1)).toBeLessThan(1e-13);
  });

  it('keeps the total where the paces spread over eight decades', () => {
    // A solve's rounding may reach the total magnified by h times the fastest rate; near rest there is little of it.
    const stores = 40;
    const stepper = createRosenbrock(poolExchange(stores, 8, 1e-6).system, options);
    const y = [...Array.from({ length: stores }, (_, i) => 1 + 0.02 * i), 0.7 * stores];
    const total = y.reduce((a, b) => a + b, 0);
    stepper.restart(0, start(y), 0);
    expect(runTo(stepper, 1e3)).toBe('arrived');
    expect(Math.abs(stepper.state.reduce((a, b) => a + b, 0) / total - 1)).toBeLessThan(1e-13);
  });

  it('keeps the total inside a step too', () => {
    const stores = 12;
    const stepper = createRosenbrock(poolExchange(stores, 2, 1e-6).system, options);
    const y = [...Array.from({ length: stores }, (_, i) => 1 + 0.05 * i), 6];
    const total = y.reduce((a, b) => a + b, 0);
    stepper.restart(0, start(y), 0);
    const out = new Float64Array(stores + 1);
    for (let s = 0; s < 20; s++) {
      stepper.step(10);
      stepper.interpolate(0.3 * stepper.previousTime + 0.7 * stepper.time, out);
      expect(Math.abs(out.reduce((a, b) => a + b, 0) / total - 1)).toBeLessThan(1e-14);
    }
  });
});

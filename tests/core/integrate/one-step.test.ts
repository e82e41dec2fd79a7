import { describe, expect, it } from 'vitest';
import { createExplicit } from '../../../core/integrate/explicit.ts';
import { createExtrapolation } from '../../../core/integrate/extrapolation.ts';
import type { Companion, OwnedStepper } from '../../../core/integrate/owned-stepper.ts';
import { createRosenbrock } from '../../../core/integrate/rosenbrock.ts';
import type { System } from '../../../core/integrate/system.ts';
import { drivenPair, hyperbola, hyperbolaAt, runTo, systemOf, type Problem } from './problems.ts';

const start = (y: readonly number[]): Float64Array => Float64Array.from(y);
const makers: Readonly<Record<string, (system: System, companion?: Companion) => OwnedStepper>> = {
  stiff: (system, companion) => createRosenbrock(system, { norm: 'max', companion: companion ?? null }),
  explicit: (system, companion) => createExplicit(system, { norm: 'max', companion: companion ?? null }),
};
const all = { ...makers, extrapolation: (system: System) => createExtrapolation(system, 100) };

describe.each(Object.entries(all))('any stepper (%s): limits', (_name, make) => {
  it('lands on every limit to the bit', () => {
    const stepper = make(systemOf(drivenPair(1e-6)));
    stepper.restart(0, start([1, 0.5]), 0);
    for (const limit of [0.1, 0.1 + 1e-9, 1 / 3, 0.7, 1.9, Math.PI, 10]) {
      expect(runTo(stepper, limit)).toBe('arrived');
      expect(stepper.time).toBe(limit);
    }
  });

  it('never steps past a limit', () => {
    const stepper = make(systemOf(drivenPair(1e-3)));
    stepper.restart(0, start([1, 0.5]), 0);
    for (let limit = 0.013; limit < 3; limit *= 1.07) {
      while (stepper.time < limit) {
        stepper.step(limit);
        expect(stepper.time).toBeLessThanOrEqual(limit);
      }
    }
  });

  it('forgets a step that only the limit made short', () => {
    const stepper = make(systemOf(hyperbola(1e-6)));
    stepper.restart(0, start([1, 1]), 0);
    for (let s = 0; s < 6; s++) stepper.step(50);
    const proposal = stepper.nextStep;
    stepper.step(stepper.time + 1e-3 * proposal);
    expect(stepper.nextStep).toBeGreaterThanOrEqual(proposal);
    stepper.step(50);
    expect(stepper.time - stepper.previousTime).toBeGreaterThan(0.9 * proposal);
  });

  it('stretches a step to a limit that is a little farther, and leaves no crumb', () => {
    const stepper = make(systemOf(hyperbola(1e-6)));
    stepper.restart(0, start([1, 1]), 0.01);
    stepper.step(0.0108);
    expect(stepper.time).toBe(0.0108);
    expect(stepper.statistics.steps).toBe(1);
  });

  it('refuses to step to where it stands', () => {
    const stepper = make(systemOf(hyperbola(1e-6)));
    stepper.restart(1, start([1, 1]), 0);
    expect(() => stepper.step(1)).toThrow(RangeError);
    expect(() => stepper.step(NaN)).toThrow(RangeError);
  });

  it('refuses a state of another length', () => {
    const stepper = make(systemOf(hyperbola(1e-6)));
    expect(() => stepper.restart(0, start([1]), 0)).toThrow(RangeError);
  });
});

describe.each(Object.entries(all))('any stepper (%s): its owner', (_name, make) => {
  it('finds the states at both ends of the dense output', () => {
    const stepper = make(systemOf(drivenPair(1e-6)));
    stepper.restart(0, start([1, 0.5]), 0);
    const out = new Float64Array(2);
    for (let s = 0; s < 10; s++) {
      const before = stepper.state.slice();
      stepper.step(10);
      stepper.interpolate(stepper.previousTime, out);
      expect([...out]).toEqual([...before]);
      stepper.interpolate(stepper.time, out);
      expect([...out]).toEqual([...stepper.state]);
      // Just inside the ends too: the output is continuous there.
      const h = stepper.time - stepper.previousTime;
      stepper.interpolate(stepper.time - 1e-9 * h, out);
      out.forEach((y, i) => expect(Math.abs(y - stepper.state[i]!)).toBeLessThan(1e-8));
      stepper.interpolate(stepper.previousTime + 1e-9 * h, out);
      out.forEach((y, i) => expect(Math.abs(y - before[i]!)).toBeLessThan(1e-8));
    }
  });

  it('finds one unknown of the dense output as all of them', () => {
    const stepper = make(systemOf(drivenPair(1e-6)));
    stepper.restart(0, start([1, 0.5]), 0);
    const out = new Float64Array(2);
    for (let s = 0; s < 5; s++) {
      stepper.step(10);
      for (const share of [0, 0.2, 0.77, 1]) {
        const t = share === 1 ? stepper.time : stepper.previousTime + share * (stepper.time - stepper.previousTime);
        stepper.interpolate(t, out);
        // The terms are added in another order.
        out.forEach((y, i) => expect(Math.abs(stepper.interpolateOne(t, i) - y)).toBeLessThan(1e-14));
      }
    }
  });

  it('is told when it asks for an instant outside the last step', () => {
    const stepper = make(systemOf(drivenPair(1e-6)));
    stepper.restart(0, start([1, 0.5]), 0);
    stepper.step(10);
    stepper.step(10);
    const out = new Float64Array(2);
    expect(() => stepper.interpolate(stepper.time * 1.001, out)).toThrow(RangeError);
    expect(() => stepper.interpolateOne(0, 0)).toThrow(RangeError);
  });

  it('may correct the state at the end of a step, and the step behind stays as it was', () => {
    const stepper = make(systemOf(hyperbola(1e-9)));
    stepper.restart(0, start([1, 1]), 0);
    while (stepper.time < 1) stepper.step(1);
    const middle = 0.5 * (stepper.previousTime + stepper.time);
    const inside = stepper.interpolateOne(middle, 0);
    const end = stepper.state[0]!;
    stepper.adjust(0, 0.25);
    expect(stepper.state[0]).toBe(end + 0.25);
    expect(stepper.interpolateOne(middle, 0)).toBe(inside);
    expect(stepper.interpolateOne(1, 0)).toBe(end);
    // From y(1) = 3/4 on: y = 1/(4/3 + t - 1).
    expect(runTo(stepper, 2)).toBe('arrived');
    expect(Math.abs(stepper.state[0]! - 3 / 7)).toBeLessThan(1e-7);
    expect(Math.abs(stepper.state[1]! - hyperbolaAt(2)[1]!)).toBeLessThan(1e-7);
  });

  it('gets the same bytes from the same calls, however often it was used before', () => {
    const stepper = make(systemOf(drivenPair(1e-6)));
    const run = (): number[] => {
      stepper.restart(0, start([1, 0.5]), 0);
      runTo(stepper, 5);
      return [...stepper.state];
    };
    expect(run()).toEqual(run());
  });

  it('may give a first step, which is taken as told', () => {
    const stepper = make(systemOf(hyperbola(1e-6)));
    stepper.restart(2, start([1, 1]), 1e-3);
    stepper.step(5);
    expect(stepper.previousTime).toBe(2);
    expect(Math.abs(stepper.time - 2.001)).toBeLessThan(1e-15);
  });
});

describe.each(Object.entries(all))('any stepper (%s): where the laws end', (_name, make) => {
  // y' = -1/2 y^-1 from y = 1: y = sqrt(1 - t), no rates from t = 1 on.
  const falling: Problem = {
    size: 2,
    rates(_t, y, out) {
      out[0] = 0;
      out[1] = y[1]! > 0 ? -0.5 / y[1]! : NaN;
    },
    jacobian: (_t, y, set) => set(1, 1, y[1]! > 0 ? 0.5 / (y[1]! * y[1]!) : NaN),
    scale: (y) => 1e-6 * (1e-3 + Math.abs(y)),
  };

  it('takes shorter steps, never throws, and in the end says which unknown failed', () => {
    const stepper = make(systemOf(falling));
    stepper.restart(0, start([1, 1]), 0);
    let outcome = stepper.step(2);
    for (let s = 0; s < 2000 && outcome.kind === 'accepted'; s++) outcome = stepper.step(2);
    expect(outcome.kind).not.toBe('accepted');
    // The end is where y^2 = 1 - t is used up: it moves with the errors of the steps, each 1e-6 of y at most.
    expect(stepper.time).toBeLessThan(1 + 1e-5);
    expect(Math.abs(stepper.state[1]! - Math.sqrt(1 - Math.min(1, stepper.time)))).toBeLessThan(1e-3);
    if (outcome.kind === 'failed') {
      expect(outcome.worst).toBe(1);
      expect(stepper.time).toBeGreaterThan(0.99);
    } else expect(outcome.kind).toBe('stiff');
  });

  it('fails at once, with its state untouched, where there are no rates at the start', () => {
    const stepper = make(systemOf(falling));
    stepper.restart(0, start([1, -1]), 0.1);
    expect(stepper.step(1)).toMatchObject({ kind: 'failed', reason: 'not-finite' });
    expect(stepper.time).toBe(0);
    expect([...stepper.state]).toEqual([1, -1]);
  });

  it('has no dense output of a step that failed', () => {
    const stepper = make(systemOf(falling));
    stepper.restart(0, start([1, 1]), 0);
    stepper.step(0.1);
    let guard = 0;
    while (stepper.step(2).kind === 'accepted' && guard < 2000) guard++;
    const out = new Float64Array(2);
    stepper.interpolate(stepper.time, out);
    expect([...out]).toEqual([...stepper.state]);
    expect(() => stepper.interpolate(0.5 * (stepper.previousTime + stepper.time), out)).toThrow(/dense output/);
  });
});

describe.each(Object.entries(makers))('a one-step method (%s): control', (name, make) => {
  it('keeps the error of its end in proportion to the tolerance', () => {
    const errors = [1e-4, 1e-6, 1e-8].map((tolerance) => {
      const stepper = make(systemOf(hyperbola(tolerance)));
      stepper.restart(0, start([1, 1]), 0);
      runTo(stepper, 10);
      return Math.abs(stepper.state[1]! * 21 - 1) / tolerance;
    });
    for (const error of errors) expect(error).toBeLessThan(30);
  });

  it('shortens a first step that is far too long, and counts what it rejected', () => {
    const stepper = make(systemOf(drivenPair(1e-8)));
    stepper.restart(0, start([1, 0.5]), 5);
    expect(stepper.step(10).kind).toBe('accepted');
    expect(stepper.time).toBeLessThan(1);
    expect(stepper.statistics.rejected).toBeGreaterThan(0);
    expect(stepper.statistics.steps).toBe(1);
    expect(stepper.statistics.jacobians).toBe(name === 'stiff' ? 1 : 0);
    expect(stepper.statistics.factorisations).toBe(name === 'stiff' ? 1 + stepper.statistics.rejected : 0);
  });

  it('takes a matrix that cannot be factored for a step that is too long', () => {
    if (name !== 'stiff') return;
    const system = systemOf(hyperbola(1e-6));
    const factor = system.matrix.factor.bind(system.matrix);
    system.matrix.factor = (shift) => shift > 1000 && factor(shift);
    const stepper = make(system);
    stepper.restart(0, start([1, 1]), 0.1);
    expect(stepper.step(1).kind).toBe('accepted');
    // shift = 1/(0.2119 h) > 1000
    expect(stepper.time).toBeLessThan(1 / (0.2119 * 1000));
    expect(stepper.statistics.rejected).toBeGreaterThan(0);
  });

  it('fails with the unknown of the largest error where no step is short enough', () => {
    // A rate that is another one every time it is asked for.
    let sign = 1;
    const stepper = make(
      systemOf({
        size: 3,
        rates(_t, _y, out) {
          sign = -sign;
          out[0] = 0;
          out[1] = 1e20 * sign;
          out[2] = sign;
        },
        jacobian: () => undefined,
        scale: () => 1e-6,
      }),
    );
    stepper.restart(1, start([1, 1, 1]), 0.1);
    expect(stepper.step(2)).toEqual({ kind: 'failed', reason: 'step-too-small', worst: 1 });
    expect(stepper.time).toBe(1);
  });

  it('counts an unknown without scale neither in the largest error nor in the mean', () => {
    for (const norm of ['max', 'rms'] as const) {
      const create = name === 'stiff' ? createRosenbrock : createExplicit;
      const counted = (copies: number): number => {
        const base = hyperbola(1e-6);
        const stepper = create(
          systemOf({
            ...base,
            size: 2 + copies,
            rates(t, y, out) {
              base.rates(t, y, out);
              for (let i = 2; i < 2 + copies; i++) out[i] = Math.sin(50 * t);
            },
            scale: (y, i) => (i < 2 ? base.scale(y, i) : Infinity),
          }),
          { norm, companion: null },
        );
        stepper.restart(0, start([1, 1, ...new Array<number>(copies).fill(1)]), 1e-3);
        runTo(stepper, 5);
        return stepper.statistics.steps;
      };
      expect(counted(5)).toBe(counted(0));
    }
  });
});

describe.each(Object.entries(makers))('a one-step method (%s): a companion', (_name, make) => {
  it('is begun before every attempt, changes the rates of that attempt, and has a say in its acceptance', () => {
    // The companion supplies a source that it knows only once it is told the step.
    let source = 0;
    const attempts: number[] = [];
    const judged: number[] = [];
    const problem: Problem = {
      size: 1,
      rates: (_t, _y, out) => void (out[0] = source),
      jacobian: () => undefined,
      scale: () => 1e-6,
    };
    const companion: Companion = {
      begin(t, h) {
        attempts.push(h);
        source = 2 * t + h; // moves the state by (t + h)^2 - t^2 in the step
      },
      error(_t, h) {
        judged.push(h);
        return h > 0.1 ? 100 : 0.01;
      },
    };
    const stepper = make(systemOf(problem), companion);
    stepper.restart(0, start([0]), 1);
    expect(stepper.step(4).kind).toBe('accepted');
    expect(attempts.length).toBeGreaterThan(1);
    expect(attempts[0]).toBe(1);
    expect(judged).toEqual(attempts);
    expect(stepper.time).toBeLessThanOrEqual(0.1);
    expect(runTo(stepper, 4)).toBe('arrived');
    expect(Math.abs(stepper.state[0]! - 16)).toBeLessThan(1e-12);
  });

  it('that has no answer makes the step shorter', () => {
    const companion: Companion = { begin: () => undefined, error: (_t, h) => (h > 0.01 ? NaN : 0) };
    const stepper = make(systemOf(hyperbola(1e-3)), companion);
    stepper.restart(0, start([1, 1]), 0.1);
    expect(stepper.step(1).kind).toBe('accepted');
    expect(stepper.time).toBeLessThanOrEqual(0.01);
  });
});

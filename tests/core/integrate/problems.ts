/** Systems with known solutions, for the tests of the steppers. Each gives a problem, its start and what is known of its end. */
import { createArrow } from '../../../core/integrate/linear/arrow.ts';
import type { AssembledMatrix } from '../../../core/integrate/linear/assembled.ts';
import { createDense } from '../../../core/integrate/linear/dense.ts';
import type { OwnedStepper } from '../../../core/integrate/owned-stepper.ts';
import type { System } from '../../../core/integrate/system.ts';

export interface Problem {
  readonly size: number;
  rates(t: number, y: Float64Array, out: Float64Array): void;
  /** Writes the entries that are not zero by `set(row, column, value)`. */
  jacobian(t: number, y: Float64Array, set: (row: number, column: number, value: number) => void): void;
  timeDerivative?(t: number, y: Float64Array, out: Float64Array): void;
  /** Error scale of unknown i at value y; the tolerance lives here. */
  scale(y: number, i: number): number;
}

export function systemOf(problem: Problem, matrix: AssembledMatrix = createDense(problem.size)): System {
  const set = (row: number, column: number, value: number): void => {
    const slot = matrix.slot(row, column);
    if (slot < 0) throw new Error(`no place for (${row}, ${column})`);
    matrix.values[slot]! += value;
  };
  return {
    size: problem.size,
    matrix,
    rates: (t, y, out) => problem.rates(t, y, out),
    linearise(t, y, rates, timeDerivative) {
      problem.rates(t, y, rates);
      timeDerivative.fill(0);
      problem.timeDerivative?.(t, y, timeDerivative);
      matrix.clear();
      problem.jacobian(t, y, set);
    },
    rateBound(t, y) {
      const sums = new Float64Array(problem.size);
      problem.jacobian(t, y, (_row, column, value) => void (sums[column]! += Math.abs(value)));
      return sums.reduce((largest, sum) => (sum <= largest ? largest : sum), 0);
    },
    errorScale(y, out) {
      for (let i = 0; i < problem.size; i++) out[i] = problem.scale(y[i]!, i);
    },
  };
}

/** Never controls the error: every step is as long as it is asked to be. */
export const uncontrolled = (): number => 1e9;

/** y' = y (1 - y), y(0) = 1/10: y = 1/(1 + 9 e^-t). Nonlinear and autonomous. */
export const logistic: Problem = {
  size: 1,
  rates(_t, y, out) {
    out[0] = y[0]! * (1 - y[0]!);
  },
  jacobian(_t, y, set) {
    set(0, 0, 1 - 2 * y[0]!);
  },
  scale: uncontrolled,
};
export const logisticAt = (t: number): number => 1 / (1 + 9 * Math.exp(-t));

/** y' = y cos t, y(0) = 1: y = exp(sin t). Its Jacobian depends on time. */
export const wave: Problem = {
  size: 1,
  rates(t, y, out) {
    out[0] = y[0]! * Math.cos(t);
  },
  jacobian(t, _y, set) {
    set(0, 0, Math.cos(t));
  },
  timeDerivative(t, y, out) {
    out[0] = -y[0]! * Math.sin(t);
  },
  scale: uncontrolled,
};
export const waveAt = (t: number): number => Math.exp(Math.sin(t));

/** y' = -y^2, y(0) = 1: y = 1/(1 + t). Two copies at different paces, so that a norm has something to add up. */
export function hyperbola(tolerance: number): Problem {
  return {
    size: 2,
    rates(_t, y, out) {
      out[0] = -y[0]! * y[0]!;
      out[1] = -2 * y[1]! * y[1]!;
    },
    jacobian(_t, y, set) {
      set(0, 0, -2 * y[0]!);
      set(1, 1, -4 * y[1]!);
    },
    scale: (y) => tolerance * Math.abs(y),
  };
}

export const hyperbolaAt = (t: number): number[] => [1 / (1 + t), 1 / (1 + 2 * t)];

/** Prothero & Robinson: y' = -lambda (y - phi) + phi', phi = sin t + 2; y = phi for y(0) = phi(0). */
export function protheroRobinson(lambda: number, tolerance: number): Problem {
  return {
    size: 1,
    rates(t, y, out) {
      out[0] = -lambda * (y[0]! - 2 - Math.sin(t)) + Math.cos(t);
    },
    jacobian(_t, _y, set) {
      set(0, 0, -lambda);
    },
    timeDerivative(t, _y, out) {
      out[0] = lambda * Math.cos(t) - Math.sin(t);
    },
    scale: () => tolerance,
  };
}

/** A driven pair that is nonlinear and depends on time in both equations, also through its Jacobian; no closed form is at hand. */
export function drivenPair(tolerance: number): Problem {
  return {
    size: 2,
    rates(t, y, out) {
      out[0] = Math.cos(t) - y[0]! * y[1]!;
      out[1] = -y[1]! + 0.5 * Math.sin(2 * t) * y[0]!;
    },
    jacobian(t, y, set) {
      set(0, 0, -y[1]!);
      set(0, 1, -y[0]!);
      set(1, 0, 0.5 * Math.sin(2 * t));
      set(1, 1, -1);
    },
    timeDerivative(t, y, out) {
      out[0] = -Math.sin(t);
      out[1] = Math.cos(2 * t) * y[0]!;
    },
    scale: () => tolerance,
  };
}

/** Van der Pol's oscillator, y'' = mu (1 - y^2) y' - y. */
export function vanDerPol(mu: number, tolerance: number): Problem {
  return {
    size: 2,
    rates(_t, y, out) {
      out[0] = y[1]!;
      out[1] = mu * (1 - y[0]! * y[0]!) * y[1]! - y[0]!;
    },
    jacobian(_t, y, set) {
      set(0, 1, 1);
      set(1, 0, -2 * mu * y[0]! * y[1]! - 1);
      set(1, 1, mu * (1 - y[0]! * y[0]!));
    },
    scale: (y) => tolerance * (1e-3 + Math.abs(y)),
  };
}

/** Robertson's reaction, rates over eleven decades; y1 + y2 + y3 = 1. */
export function robertson(tolerance: number): Problem {
  return {
    size: 3,
    rates(_t, y, out) {
      const slow = 0.04 * y[0]!;
      const back = 1e4 * y[1]! * y[2]!;
      const fast = 3e7 * y[1]! * y[1]!;
      out[0] = -slow + back;
      out[1] = slow - back - fast;
      out[2] = fast;
    },
    jacobian(_t, y, set) {
      const b2 = 1e4 * y[2]!;
      const b3 = 1e4 * y[1]!;
      const f2 = 6e7 * y[1]!;
      set(0, 0, -0.04);
      set(0, 1, b2);
      set(0, 2, b3);
      set(1, 0, 0.04);
      set(1, 1, -b2 - f2);
      set(1, 2, -b3);
      set(2, 1, f2);
    },
    scale: (y, i) => tolerance * (Math.abs(y) + (i === 1 ? 1e-9 : 1e-6)),
  };
}

/** Two rates, 1 and `fast`, driven by a sine: x' = -x + sin t, y' = -fast (y - x). */
export function drivenByTwoRates(fast: number, tolerance: number): Problem {
  return {
    size: 2,
    rates(t, y, out) {
      out[0] = -y[0]! + Math.sin(t);
      out[1] = -fast * (y[1]! - y[0]!);
    },
    jacobian(_t, _y, set) {
      set(0, 0, -1);
      set(1, 0, fast);
      set(1, 1, -fast);
    },
    timeDerivative(t, _y, out) {
      out[0] = Math.cos(t);
    },
    scale: () => tolerance,
  };
}

/**
 * Exchange of many stores with one pool, nonlinear: n_i' = k_i (pool/N - n_i^(1/3)); what leaves the stores enters the pool,
 * which is the last unknown. The paces k_i spread over `spread` decades. The total is conserved. Its matrix is an arrow.
 */
export function poolExchange(stores: number, spread: number, tolerance: number): { problem: Problem; system: System } {
  const pace = Float64Array.from({ length: stores }, (_, i) => 10 ** ((spread * ((i * 7919) % stores)) / stores));
  const problem: Problem = {
    size: stores + 1,
    rates(_t, y, out) {
      let sum = 0;
      for (let i = 0; i < stores; i++) {
        const flow = pace[i]! * (y[stores]! / stores - Math.cbrt(y[i]!));
        out[i] = flow;
        sum += flow;
      }
      out[stores] = -sum;
    },
    jacobian(_t, y, set) {
      for (let i = 0; i < stores; i++) {
        const own = (-pace[i]! / 3) * Math.cbrt(y[i]!) ** -2;
        const pool = pace[i]! / stores;
        set(i, i, own);
        set(i, stores, pool);
        set(stores, i, -own);
        set(stores, stores, -pool);
      }
    },
    scale: (y) => tolerance * Math.abs(y),
  };
  return { problem, system: systemOf(problem, createArrow(stores + 1, [stores])) };
}

/** Steps to `end`, or to the first step that is not accepted; gives the last outcome. */
export function runTo(stepper: OwnedStepper, end: number, mostSteps = 100_000): string {
  for (let count = 0; count < mostSteps; count++) {
    if (stepper.time >= end) return 'arrived';
    const outcome = stepper.step(end);
    if (outcome.kind !== 'accepted') return outcome.kind;
  }
  return 'too many steps';
}

/** Error at `end` of `count` even steps from (start, exact(start)), one unknown. */
export function evenError(
  stepper: OwnedStepper,
  exact: (t: number) => number,
  start: number,
  end: number,
  count: number,
): number {
  runEvenly(stepper, [exact(start)], start, end, count);
  return Math.abs(stepper.state[0]! - exact(end));
}

/** Largest error inside one step of length h from (start, exact(start)), one unknown. */
export function denseError(stepper: OwnedStepper, exact: (t: number) => number, start: number, h: number): number {
  runEvenly(stepper, [exact(start)], start, start + h, 1);
  let worst = 0;
  for (let q = 1; q < 16; q++) {
    const t = start + (h * q) / 16;
    worst = Math.max(worst, Math.abs(stepper.interpolateOne(t, 0) - exact(t)));
  }
  return worst;
}

/** `count` steps of one length from `start` to `end`, whatever the error. */
export function runEvenly(
  stepper: OwnedStepper,
  y: readonly number[],
  start: number,
  end: number,
  count: number,
): void {
  const h = (end - start) / count;
  stepper.restart(start, Float64Array.from(y), h);
  for (let s = 1; s <= count; s++) {
    const limit = s === count ? end : start + s * h;
    const outcome = stepper.step(limit);
    if (outcome.kind !== 'accepted' || stepper.time !== limit)
      throw new Error(`step ${s} was not even: ${outcome.kind}`);
  }
}

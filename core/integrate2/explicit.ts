/**
 * The explicit stepper for large networks that are not stiff: Tsitouras' pair, with a watch for stiffness
 * (Hairer & Wanner, Solving ODEs II, IV.2: the two last stages have one time, so |f_7 - f_6|/|y_7 - y_6| estimates a rate).
 */
import { errorNorm, fitStep, growth, shortestStep, shrinkage, startingStep, worstUnknown } from './control.ts';
import type { OwnedStepper, StepperOptions } from './owned-stepper.ts';
import type { StepOutcome, StepStatistics, System } from '../integrate/system.ts';
import { TSIT5 } from '../integrate/tableaus/tsit5.ts';

/** Tsitouras' pair is stable on the negative real axis to about this h times rate. */
const STABLE = 3.2;
/** So many steps at the bound, with no run of clear ones between, count as stiff. */
const STIFF_STEPS = 15;
const CLEAR_STEPS = 6;

export function createExplicit(system: System, options: StepperOptions): OwnedStepper {
  const n = system.size;
  const { companion, norm } = options;
  const real = (): Float64Array => new Float64Array(n);
  const start = real();
  const state = real();
  const trial = real();
  const before = real(); // argument of stage 6
  const error = real();
  const scale = real();
  const k: Float64Array[] = Array.from({ length: 7 }, real);
  const statistics: StepStatistics = { steps: 0, rejected: 0, rateEvaluations: 0, jacobians: 0, factorisations: 0 };
  let time = 0;
  let previousTime = 0;
  let nextStep = 0;
  let normBefore = 1;
  let fresh = false; // k[6] holds the rates at `state`
  let stiffSteps = 0;
  let clearSteps = 0;

  const { rows, nodes, errorWeights, dense } = TSIT5;

  function attempt(h: number): number {
    const [k0, k1, k2, k3, k4, k5, k6] = k as [
      Float64Array,
      Float64Array,
      Float64Array,
      Float64Array,
      Float64Array,
      Float64Array,
      Float64Array,
    ];
    if (companion) {
      companion.begin(time, h);
      system.rates(time, start, k0);
    }
    let [a0, a1, a2, a3, a4, a5] = [h * rows[1][0], 0, 0, 0, 0, 0];
    for (let i = 0; i < n; i++) trial[i] = start[i]! + a0 * k0[i]!;
    system.rates(time + nodes[1] * h, trial, k1);
    [a0, a1] = [h * rows[2][0], h * rows[2][1]];
    for (let i = 0; i < n; i++) trial[i] = start[i]! + a0 * k0[i]! + a1 * k1[i]!;
    system.rates(time + nodes[2] * h, trial, k2);
    [a0, a1, a2] = [h * rows[3][0], h * rows[3][1], h * rows[3][2]];
    for (let i = 0; i < n; i++) trial[i] = start[i]! + a0 * k0[i]! + a1 * k1[i]! + a2 * k2[i]!;
    system.rates(time + nodes[3] * h, trial, k3);
    [a0, a1, a2, a3] = [h * rows[4][0], h * rows[4][1], h * rows[4][2], h * rows[4][3]];
    for (let i = 0; i < n; i++) trial[i] = start[i]! + a0 * k0[i]! + a1 * k1[i]! + a2 * k2[i]! + a3 * k3[i]!;
    system.rates(time + nodes[4] * h, trial, k4);
    [a0, a1, a2, a3, a4] = [h * rows[5][0], h * rows[5][1], h * rows[5][2], h * rows[5][3], h * rows[5][4]];
    for (let i = 0; i < n; i++) {
      before[i] = start[i]! + a0 * k0[i]! + a1 * k1[i]! + a2 * k2[i]! + a3 * k3[i]! + a4 * k4[i]!;
    }
    system.rates(time + h, before, k5);
    [a0, a1, a2, a3, a4, a5] = [h * rows[6][0], h * rows[6][1], h * rows[6][2], h * rows[6][3], h * rows[6][4], h * rows[6][5]];
    for (let i = 0; i < n; i++) {
      trial[i] = start[i]! + a0 * k0[i]! + a1 * k1[i]! + a2 * k2[i]! + a3 * k3[i]! + a4 * k4[i]! + a5 * k5[i]!;
    }
    system.rates(time + h, trial, k6);
    statistics.rateEvaluations += companion ? 7 : 6;
    const [e0, e1, e2, e3, e4, e5, e6] = errorWeights;
    for (let i = 0; i < n; i++) {
      error[i] = h * (e0 * k0[i]! + e1 * k1[i]! + e2 * k2[i]! + e3 * k3[i]! + e4 * k4[i]! + e5 * k5[i]! + e6 * k6[i]!);
    }
    let e = errorNorm(error, scale, norm);
    if (companion && e <= 1) e = Math.max(e, companion.error(time, h, trial));
    return e;
  }

  /** h times the estimated fastest rate, from the two stages at the step's end. */
  function stiffness(h: number): number {
    let above = 0;
    let below = 0;
    for (let i = 0; i < n; i++) {
      if (scale[i] === Infinity) continue;
      const f = (k[6]![i]! - k[5]![i]!) / scale[i]!;
      const y = (trial[i]! - before[i]!) / scale[i]!;
      above += f * f;
      below += y * y;
    }
    return below > 0 ? h * Math.sqrt(above / below) : 0;
  }

  return {
    name: 'explicit',
    state,
    statistics,
    get time() {
      return time;
    },
    get previousTime() {
      return previousTime;
    },
    get nextStep() {
      return nextStep;
    },

    restart(t, y, firstStep) {
      time = previousTime = t;
      state.set(y);
      nextStep = firstStep;
      normBefore = 1;
      fresh = false;
    },

    invalidate() {
      fresh = false;
    },

    adjust(unknown, delta) {
      state[unknown] = state[unknown]! + delta;
      fresh = false;
    },

    step(limit): StepOutcome {
      start.set(state);
      previousTime = time;
      system.errorScale(start, scale);
      if (fresh && !companion) k[0]!.set(k[6]!);
      else if (!companion || !(nextStep > 0)) system.rates(time, start, k[0]!);
      if (!(nextStep > 0)) {
        nextStep = startingStep(system, time, start, k[0]!, scale, TSIT5.order, limit - time, trial, k[1]!);
      }
      const proposed = nextStep;
      let h = fitStep(time, nextStep, limit);
      let rejected = false;
      let finite = false;
      for (;;) {
        const e = attempt(h);
        if (e <= 1) {
          const product = stiffness(h);
          if (product > STABLE) {
            clearSteps = 0;
            stiffSteps++;
            if (stiffSteps === STIFF_STEPS) {
              state.set(start);
              fresh = false;
              stiffSteps = 0;
              return { kind: 'stiff', fastestRate: product / h };
            }
          } else if (stiffSteps > 0 && ++clearSteps === CLEAR_STEPS) stiffSteps = 0;
          statistics.steps++;
          state.set(trial);
          fresh = true;
          const next = h * Math.min(growth(e, normBefore, TSIT5.order), rejected ? 1 : Infinity);
          nextStep = rejected ? next : Math.max(next, h < proposed ? proposed : 0);
          normBefore = e;
          time = h === limit - time ? limit : time + h;
          return { kind: 'accepted' };
        }
        if (Number.isFinite(e)) finite = true;
        statistics.rejected++;
        rejected = true;
        h *= shrinkage(e, TSIT5.order);
        if (!(h > shortestStep(time))) {
          nextStep = h;
          return { kind: 'failed', reason: finite ? 'step-too-small' : 'not-finite', worst: worstUnknown(error, scale) };
        }
      }
    },

    interpolateOne(t, i) {
      const h = time - previousTime;
      const x = h > 0 ? (t - previousTime) / h : 1;
      let sum = start[i]!;
      for (let s = 0; s < 7; s++) {
        const r = dense[s]!;
        sum += h * x * (r[0] + x * (r[1] + x * (r[2] + x * r[3]))) * k[s]![i]!;
      }
      return sum;
    },

    interpolate(t, out) {
      if (t === time) {
        out.set(trial);
        return;
      }
      const h = time - previousTime;
      const x = h > 0 ? (t - previousTime) / h : 1;
      out.set(start);
      for (let s = 0; s < 7; s++) {
        const r = dense[s]!;
        const weight = h * x * (r[0] + x * (r[1] + x * (r[2] + x * r[3])));
        const ks = k[s]!;
        for (let i = 0; i < n; i++) out[i] = out[i]! + weight * ks[i]!;
      }
    },
  };
}

/**
 * The explicit method for small networks that are not stiff: extrapolation of the midpoint rule by the library `odex`
 * (a port of ODEX, Hairer, Norsett & Wanner, Solving ODEs I), behind the house's stepper interface.
 *
 * The library cannot be suspended between steps, so each step is one call that is stopped after the first accepted step.
 * On a stiff system it can be wrong without a sign: before it starts and after every step the rates of the system are bounded,
 * and where stability rather than accuracy could come to rule the step is not kept and `stiff` is returned.
 */
import { Solver } from 'odex';
import { fitStep, shortestStep, startingStep } from './control.ts';
import type { OwnedStepper } from './owned-stepper.ts';
import { rateBound } from './rate-bound.ts';
import type { StepOutcome, StepStatistics, System } from '../integrate/system.ts';

/** Extrapolation is stable to several times this product of step and rate; beyond it the step is not trusted. */
const MOST_RATE_TIMES_STEP = 4;
/** More e-foldings of the fastest mode than this in one run would be left to a method that takes them in its stride. */
export const MOST_EFOLDINGS = 2e4;

class NotANumber extends Error {}

/** @param until end of the run, s: bounds how many e-foldings of the fastest mode the run may hold */
export function createExtrapolation(system: System, until: number): OwnedStepper {
  const n = system.size;
  const state = new Float64Array(n);
  const rates = new Float64Array(n);
  const argument = new Float64Array(n);
  const scale = new Float64Array(n);
  const scratch = new Float64Array(n);
  const statistics: StepStatistics = { steps: 0, rejected: 0, rateEvaluations: 0, jacobians: 0, factorisations: 0 };
  let time = 0;
  let previousTime = 0;
  let nextStep = 0;
  // The dense output of the last step at Chebyshev points, by which it is rebuilt after the library's call has ended.
  const points = 24;
  const samples = Array.from({ length: points }, () => new Float64Array(n));
  const places = Array.from({ length: points }, (_, q) => 0.5 - 0.5 * Math.cos((Math.PI * q) / (points - 1)));

  function rightSide(t: number, y: number[]): number[] {
    for (let i = 0; i < n; i++) argument[i] = y[i]!;
    system.rates(t, argument, rates);
    statistics.rateEvaluations++;
    const out = Array.from(rates);
    if (out.some((value) => !Number.isFinite(value))) throw new NotANumber();
    return out;
  }

  /** One accepted step from the present state with first trial h; false where some rate was no number. */
  function callLibrary(h: number, limit: number): boolean {
    const solver = new Solver(n);
    solver.absoluteTolerance = Array.from(scale, (s) => (s === Infinity ? 1e30 : s));
    // The library wants some; far below what the scale asks for.
    solver.relativeTolerance = Array.from({ length: n }, () => 1e-14);
    solver.initialStepSize = h;
    solver.denseOutput = true;
    solver.maxSteps = 100;
    const from = time;
    let reached = from;
    const end: number[] = [];
    try {
      solver.solve(rightSide, from, Array.from(state), limit, (count, _from, x, y, dense) => {
        // The library's first call shows the start.
        if (count === 1) return undefined;
        reached = x;
        for (let i = 0; i < n; i++) end[i] = y[i]!;
        for (let q = 0; q < points; q++) {
          const at = from + places[q]! * (x - from);
          const sample = samples[q]!;
          for (let i = 0; i < n; i++) sample[i] = q === 0 ? state[i]! : q === points - 1 ? y[i]! : dense!(i, at);
        }
        return false;
      });
    } catch (error) {
      if (error instanceof NotANumber) return false;
      throw error;
    }
    if (!(reached > from) || end.some((value) => !Number.isFinite(value))) return false;
    time = limit - reached <= 4 * Number.EPSILON * Math.abs(limit) ? limit : reached;
    for (let i = 0; i < n; i++) state[i] = end[i]!;
    return true;
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
    },

    invalidate() {
      // Every call starts from the state alone.
    },

    adjust(unknown, delta) {
      state[unknown] = state[unknown]! + delta;
    },

    step(limit): StepOutcome {
      const from = time;
      const before = state.slice();
      const bound = rateBound(system, from, state);
      if (!(bound * (until - from) <= MOST_EFOLDINGS)) return { kind: 'stiff', fastestRate: bound };
      system.errorScale(state, scale);
      if (!(nextStep > 0)) {
        system.rates(from, state, rates);
        nextStep = startingStep(system, from, state, rates.slice(), scale, 8, limit - from, scratch, rates);
      }
      let h = Math.min(fitStep(from, nextStep, limit), MOST_RATE_TIMES_STEP / bound);
      while (!callLibrary(h, limit)) {
        statistics.rejected++;
        h *= 0.25;
        if (!(h > shortestStep(from))) return { kind: 'failed', reason: 'not-finite', worst: 0 };
      }
      previousTime = from;
      const taken = time - from;
      statistics.steps++;
      const after = rateBound(system, time, state);
      if (!(Math.max(bound, after) * taken <= 2 * MOST_RATE_TIMES_STEP) || !(after * (until - time) <= MOST_EFOLDINGS)) {
        state.set(before);
        time = from;
        return { kind: 'stiff', fastestRate: Math.max(bound, after) };
      }
      nextStep = Math.min(taken >= 0.99 * h ? 2 * taken : taken, MOST_RATE_TIMES_STEP / after);
      return { kind: 'accepted' };
    },

    interpolateOne(t, i) {
      this.interpolate(t, scratch);
      return scratch[i]!;
    },

    interpolate(t, out) {
      const x = time > previousTime ? Math.min(1, Math.max(0, (t - previousTime) / (time - previousTime))) : 1;
      // Barycentric interpolation at Chebyshev points of the second kind: weights +-1, halved at the ends.
      out.fill(0);
      let below = 0;
      for (let q = 0; q < points; q++) {
        const distance = x - places[q]!;
        if (Math.abs(distance) < 1e-15) {
          out.set(samples[q]!);
          return;
        }
        const weight = ((q % 2 === 0 ? 1 : -1) * (q === 0 || q === points - 1 ? 0.5 : 1)) / distance;
        below += weight;
        const sample = samples[q]!;
        for (let i = 0; i < n; i++) out[i] = out[i]! + weight * sample[i]!;
      }
      for (let i = 0; i < n; i++) out[i] = out[i]! / below;
    },
  };
}


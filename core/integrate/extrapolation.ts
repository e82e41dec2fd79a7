/**
 * The stepper for small systems that are not stiff: extrapolation of the midpoint rule (Gragg, Bulirsch, Stoer) by the library
 * `odex`, a port of ODEX of Hairer, Norsett & Wanner, Solving ODEs I, section II.9.
 *
 * The library cannot be suspended between steps, so every step is a call of its own that is broken off after the first accepted
 * step; the dense output of that call stays valid. Time is handed over in units of the step to be tried and the state as its
 * change in units of the error scale: the library's own least step and its tolerances then mean what ours mean.
 * On a stiff system it could be wrong without a sign: no step longer than its stability allows is tried or kept.
 */
import { chooseFirstStep } from './first-step.ts';
import { suspect, weightsFromScales } from './norm.ts';
import { Solver } from './odex.js';
import { LEAST_STEP, STRETCH } from './one-step.ts';
import type { OwnedStepper } from './owned-stepper.ts';
import type { StepOutcome, StepStatistics, System } from './system.ts';

/** Every line of the extrapolation from the second on is stable to a product of step and rate of 5.02 (on the real axis). */
const MOST_RATE_TIMES_STEP = 4.9;
/** More e-foldings of the fastest mode than this in one run are left to a method that takes them in its stride. */
export const MOST_EFOLDINGS = 2e4;
/** The order that the first step is chosen for. */
const STARTING_ORDER = 6;
const MOST_GROWTH = 8;

/** How a call of the library ended, where not with a result: thrown out of the rates, which is the only way to break it off. */
class BrokenOff extends Error {
  override readonly name = 'BrokenOff';
}

/**
 * @param until end of the run, s: bounds how many e-foldings of the fastest mode the run may hold
 */
export function createExtrapolation(system: System, until: number): OwnedStepper {
  const size = system.size;
  const state = new Float64Array(size);
  const previous = new Float64Array(size);
  const end = new Float64Array(size);
  const argument = new Float64Array(size);
  const rates = new Float64Array(size);
  const weight = new Float64Array(size);
  /** What one unit of the library's variables is, in our units. */
  const unit = new Float64Array(size);
  const statistics: StepStatistics = { steps: 0, rejected: 0, rateEvaluations: 0, jacobians: 0, factorisations: 0 };
  const brokenOff = new BrokenOff();
  let time = 0;
  let previousTime = 0;
  let proposal = 0;
  let bound: number | null = null;
  let denseOf: ((index: number, x: number) => number) | null = null;

  function boundNow(): number {
    statistics.jacobians++;
    statistics.rateEvaluations++;
    return system.rateBound(time, state);
  }

  /** The library's own interpolation, at x in units of the step that was tried; it looks its unknown up, hence O(n). */
  let tried = 1;
  function inside(index: number, t: number): number {
    return previous[index]! + unit[index]! * denseOf!(index, (t - previousTime) / tried);
  }

  /**
   * One call of the library from `state`, first trying a step to t + h = `last`.
   * @returns how much of h was taken and what share of h the library proposes next; null where rates were no numbers or it gave up
   */
  function callLibrary(h: number, last: number): { readonly taken: number; readonly next: number } | null {
    const solver = new Solver(size);
    // The library's norm is a root mean square over all unknowns; so scaled, none may err by more than its scale.
    const tolerance = Math.sqrt(1 / size);
    solver.absoluteTolerance = Array.from(weight, (w) => (w === 0 ? 1e300 : tolerance));
    solver.relativeTolerance = 0;
    solver.initialStepSize = 1;
    solver.denseOutput = true;
    solver.maxSteps = 40;
    // Its own check takes the rounding of a state at rest for instability, and halves the step for nothing; ours is stricter.
    solver.stabilityCheckCount = 0;
    let taken = 0;
    let next = 0;

    const right = (x: number, z: number[]): number[] => {
      if (taken > 0) {
        // The first look beyond an accepted step is half a step ahead: so the library tells what it proposes.
        next = 2 * (x - taken);
        throw brokenOff;
      }
      // After a rejection it may try a longer step, which would look past the limit.
      if (x > 1 + 1e-9) throw brokenOff;
      for (let i = 0; i < size; i++) argument[i] = state[i]! + unit[i]! * z[i]!;
      system.rates(x >= 1 ? last : time + x * h, argument, rates);
      statistics.rateEvaluations++;
      // It would take a step that is no number for accepted.
      for (let i = 0; i < size; i++) if (!Number.isFinite(rates[i]!)) throw brokenOff;
      return Array.from(rates, (rate, i) => (h * rate) / unit[i]!);
    };

    try {
      const start = new Array<number>(size).fill(0);
      solver.solve(right, 0, start, 4 * MOST_GROWTH, (count, _from, x, z, dense) => {
        if (count === 1) return undefined;
        taken = x;
        for (let i = 0; i < size; i++) end[i] = state[i]! + unit[i]! * z[i]!;
        denseOf = dense;
        return undefined;
      });
    } catch (error) {
      if (error !== brokenOff) throw error;
    }
    if (!(taken > 0)) return null;
    if (taken < 1) statistics.rejected++;
    return { taken: Math.min(taken, 1), next: Math.min(next, MOST_GROWTH * taken) };
  }

  function mustBeInside(t: number): void {
    if (!(t >= previousTime && t <= time)) {
      throw new RangeError(`${t} is outside the last step, ${previousTime} to ${time}`);
    }
    if (denseOf === null && t !== time) {
      throw new Error('there is no dense output: no step was accepted since the last start or failure');
    }
  }

  return {
    name: 'extrapolation',
    state,
    statistics,
    get time() {
      return time;
    },
    get previousTime() {
      return previousTime;
    },
    get nextStep() {
      return proposal;
    },

    restart(t, y, first) {
      if (y.length !== size) throw new RangeError(`a state of ${y.length} for a system of ${size}`);
      time = t;
      previousTime = t;
      state.set(y);
      proposal = first > 0 && Number.isFinite(first) ? first : 0;
      bound = null;
      denseOf = null;
    },

    step(limit): StepOutcome {
      const remaining = limit - time;
      if (!(remaining > 0)) throw new RangeError(`a step from ${time} cannot end at ${limit}`);
      denseOf = null;
      const before = (bound ??= boundNow());
      if (!Number.isFinite(before)) return { kind: 'failed', reason: 'not-finite', worst: 0 };
      if (before * (Math.max(until, limit) - time) > MOST_EFOLDINGS) return { kind: 'stiff', fastestRate: before };
      system.errorScale(state, weight);
      for (let i = 0; i < size; i++) unit[i] = weight[i] === Infinity ? 1 : Math.max(weight[i]!, 1e-300);
      const controlled = weightsFromScales(weight);
      if (proposal === 0) {
        system.rates(time, state, rates);
        statistics.rateEvaluations++;
        const from = rates.slice();
        proposal = chooseFirstStep(
          system,
          time,
          state,
          from,
          weight,
          controlled,
          remaining,
          STARTING_ORDER,
          argument,
          rates,
          statistics,
        );
      }
      const least = LEAST_STEP * Math.abs(time);
      let wanted = Math.max(Math.min(proposal, MOST_RATE_TIMES_STEP / STRETCH / before), least);
      for (;;) {
        const landing = wanted * STRETCH >= remaining;
        const h = landing ? remaining : wanted;
        const call = callLibrary(h, landing ? limit : time + h);
        if (call === null) {
          statistics.rejected++;
          wanted = 0.25 * h;
          if (wanted > least && wanted > 1e-280) continue;
          const finite = rates.every((rate) => Number.isFinite(rate));
          const worst = suspect(rates, state, argument, weight);
          return { kind: 'failed', reason: finite ? 'step-too-small' : 'not-finite', worst };
        }
        const { taken } = call;
        previous.set(state);
        previousTime = time;
        state.set(end);
        time = taken < 1 ? time + taken * h : landing ? limit : time + h;
        bound = boundNow();
        if (!(Math.max(before, bound) * taken * h <= 2 * MOST_RATE_TIMES_STEP)) {
          // The system became too fast inside the step: it is not to be trusted.
          const fastestRate = Number.isFinite(bound) ? Math.max(before, bound) : before;
          state.set(previous);
          time = previousTime;
          bound = null;
          denseOf = null;
          return { kind: 'stiff', fastestRate };
        }
        tried = h;
        statistics.steps++;
        const shortened = taken === 1 && h < 0.95 * wanted;
        proposal = shortened ? Math.max(proposal, call.next * h) : call.next * h;
        return { kind: 'accepted' };
      }
    },

    interpolate(t, out) {
      mustBeInside(t);
      if (t === time) out.set(denseOf === null ? state : end);
      else if (t === previousTime) out.set(previous);
      else for (let i = 0; i < size; i++) out[i] = inside(i, t);
    },

    interpolateOne(t, index) {
      mustBeInside(t);
      if (t === time) return (denseOf === null ? state : end)[index]!;
      if (t === previousTime) return previous[index]!;
      return inside(index, t);
    },

    invalidate() {
      bound = null;
    },

    adjust(index, delta) {
      state[index]! += delta;
      bound = null;
    },
  };
}

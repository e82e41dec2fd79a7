/**
 * The life of a one-step method: its state, its attempts, its landings on limits. What a step does to a state is the
 * business of a kernel (`rosenbrock.ts`, `explicit.ts`), how long the next one is that of `control.ts`.
 */
import { createControl } from './control.ts';
import { chooseFirstStep } from './first-step.ts';
import { weightsFromScales } from './norm.ts';
import type { OwnedStepper, StepperOptions } from './owned-stepper.ts';
import type { StepOutcome, StepStatistics, System } from './system.ts';

/** The arrays that the stepper and its kernel share. */
export interface Workspace {
  /** The state at the start of the step. */
  state: Float64Array;
  /** The state at its end, written by the kernel's attempt. */
  candidate: Float64Array;
  /** 1 over the error scale at the start of the step. */
  readonly weight: Float64Array;
  /** How many weights are not zero. */
  controlled: number;
  readonly statistics: StepStatistics;
}

export interface Kernel {
  readonly name: string;
  /** The power of the step size with which the error estimate goes. */
  readonly errorOrder: number;
  /** Brings f(t, state), and what else an attempt needs of the start, up to date. */
  prepare(t: number): void;
  /** f at the start, after `prepare`. */
  rates(): Float64Array;
  /** Two arrays that hold nothing between attempts. */
  scratch(): readonly [Float64Array, Float64Array];
  /** Writes the candidate for t + h = `end` and returns its error norm; NaN where rates or pivots were no numbers. */
  attempt(t: number, h: number, end: number): number;
  /** After an attempt that was good enough: the fastest rate if the method is to be left for a stiff one, else 0. */
  stiffness(h: number): number;
  /** After a failed attempt: the unknown to blame. */
  blame(): number;
  /** The candidate has become the state. */
  accepted(): void;
  /** Rates kept from the last step hold no more. */
  invalidate(): void;
  restart(): void;
  /** The dense output at t + theta h of the last attempt, `from` and `to` being the states at its ends. */
  interpolate(theta: number, h: number, from: Float64Array, to: Float64Array, out: Float64Array): void;
  /** The same for one unknown. */
  interpolateOne(theta: number, h: number, from: Float64Array, to: Float64Array, index: number): number;
}

/** A step within this factor of the limit is stretched to it. */
export const STRETCH = 1.1;
/** The least step in units of the last place of the time. */
export const LEAST_STEP = 16 * Number.EPSILON;

export function createWorkspace(size: number): Workspace {
  return {
    state: new Float64Array(size),
    candidate: new Float64Array(size),
    weight: new Float64Array(size),
    controlled: 0,
    statistics: { steps: 0, rejected: 0, rateEvaluations: 0, jacobians: 0, factorisations: 0 },
  };
}

/**
 * @param work of `createWorkspace(system.size)`, shared with the kernel
 */
export function createOneStep(system: System, options: StepperOptions, work: Workspace, kernel: Kernel): OwnedStepper {
  const control = createControl(kernel.errorOrder);
  const { companion } = options;
  const { weight, statistics } = work;
  let time = 0;
  let previousTime = 0;
  let proposal = 0;
  // False once the stages of the last accepted step have been written over.
  let dense = false;
  // The end of the last step before its owner adjusted it.
  const unadjusted = new Float64Array(system.size);
  let adjusted = false;

  function firstStep(longest: number): number {
    const [trial, trialRates] = kernel.scratch();
    return chooseFirstStep(
      system,
      time,
      work.state,
      kernel.rates(),
      weight,
      work.controlled,
      longest,
      kernel.errorOrder,
      trial,
      trialRates,
      statistics,
    );
  }

  function accept(end: number): void {
    previousTime = time;
    time = end;
    const before = work.state;
    work.state = work.candidate;
    work.candidate = before;
    kernel.accepted();
    dense = true;
    statistics.steps++;
  }

  function mustBeInside(t: number): void {
    if (!(t >= previousTime && t <= time)) {
      throw new RangeError(`${t} is outside the last step, ${previousTime} to ${time}`);
    }
    if (!dense && t !== time) {
      throw new Error('there is no dense output: no step was accepted since the last start or failure');
    }
  }

  function endOfStep(): Float64Array {
    return adjusted && dense ? unadjusted : work.state;
  }

  return {
    name: kernel.name,
    get time() {
      return time;
    },
    get state() {
      return work.state;
    },
    get previousTime() {
      return previousTime;
    },
    get nextStep() {
      return proposal;
    },
    statistics,

    restart(t, y, first) {
      if (y.length !== system.size) throw new RangeError(`a state of ${y.length} for a system of ${system.size}`);
      time = t;
      previousTime = t;
      work.state.set(y);
      proposal = first > 0 && Number.isFinite(first) ? first : 0;
      dense = false;
      adjusted = false;
      control.restart();
      kernel.restart();
    },

    step(limit): StepOutcome {
      const remaining = limit - time;
      if (!(remaining > 0)) throw new RangeError(`a step from ${time} cannot end at ${limit}`);
      dense = false;
      adjusted = false;
      system.errorScale(work.state, weight);
      work.controlled = weightsFromScales(weight);
      // A companion prepares every attempt anew.
      if (companion === null || proposal === 0) kernel.prepare(time);
      const least = LEAST_STEP * Math.abs(time);
      if (proposal === 0) proposal = firstStep(remaining);
      let wanted = Math.max(proposal, least);
      let rejected = false;
      for (;;) {
        const landing = wanted * STRETCH >= remaining;
        const h = landing ? remaining : wanted;
        const end = landing ? limit : time + h;
        if (companion !== null) {
          companion.begin(time, h);
          kernel.invalidate();
          kernel.prepare(time);
        }
        let error = kernel.attempt(time, h, end);
        if (error <= 1 && companion !== null) error = Math.max(error, companion.error(time, h, work.candidate));
        if (error <= 1) {
          const fastestRate = kernel.stiffness(h);
          if (fastestRate > 0) return { kind: 'stiff', fastestRate };
          if (h < 0.95 * wanted) {
            const factor = control.afterShortened(error);
            const next = factor >= control.growthLimit ? Math.max(wanted, h * factor) : h * factor;
            proposal = rejected ? Math.min(next, wanted) : next;
          } else {
            proposal = h * control.afterAccepted(error);
          }
          accept(end);
          return { kind: 'accepted' };
        }
        rejected = true;
        statistics.rejected++;
        wanted = h * control.afterRejected(error);
        if (wanted < least || !(wanted > 1e-280)) {
          return {
            kind: 'failed',
            reason: Number.isFinite(error) ? 'step-too-small' : 'not-finite',
            worst: kernel.blame(),
          };
        }
      }
    },

    interpolate(t, out) {
      mustBeInside(t);
      const end = endOfStep();
      const h = time - previousTime;
      if (t === time) out.set(end);
      else if (t === previousTime) out.set(work.candidate);
      else kernel.interpolate((t - previousTime) / h, h, work.candidate, end, out);
    },

    interpolateOne(t, index) {
      mustBeInside(t);
      const end = endOfStep();
      const h = time - previousTime;
      if (t === time) return end[index]!;
      if (t === previousTime) return work.candidate[index]!;
      return kernel.interpolateOne((t - previousTime) / h, h, work.candidate, end, index);
    },

    invalidate() {
      kernel.invalidate();
    },

    adjust(index, delta) {
      if (dense && !adjusted) {
        unadjusted.set(work.state);
        adjusted = true;
      }
      work.state[index]! += delta;
      kernel.invalidate();
    },
  };
}

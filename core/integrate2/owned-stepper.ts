/** A stepper whose owner may change the system and touch the state between steps, and take part in each attempt. */
import type { Stepper, System } from '../integrate/system.ts';

export interface OwnedStepper extends Stepper {
  /** The system changed under an unchanged state: rates kept from the last step are void. */
  invalidate(): void;
  /** Adds to one unknown of the state at `time`. The dense output of the last step does not change. */
  /** The dense output of one unknown inside the last step. */
  interpolateOne(t: number, unknown: number): number;
  adjust(unknown: number, delta: number): void;
}

/** Takes part in each attempt of a step (see core/run/carried.ts). */
export interface Companion {
  /** Before the attempt over [t, t+h]. */
  begin(t: number, h: number): void;
  /** After it, with the candidate state: a further error norm, 1 is the tolerance. */
  error(t: number, h: number, candidate: Float64Array): number;
}

export interface StepperOptions {
  /** `max` for few unknowns, where each is somebody's; `rms` for many, where one in 10^5 must not rule. */
  readonly norm: 'max' | 'rms';
  readonly companion: Companion | null;
}

export type StepperMaker = (system: System, options: StepperOptions) => OwnedStepper;

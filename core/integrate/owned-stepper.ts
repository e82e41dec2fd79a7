/**
 * What the owner of a stepper may ask of it beyond stepping, and what it may hang beside it.
 * All steppers of this room are of this type; `system.ts` has the part that every reader of results needs.
 */
import type { Stepper } from './system.ts';

/** A stepper whose owner may change the system and correct the state between steps. */
export interface OwnedStepper extends Stepper {
  /** To be called when the system changed under an unchanged state: rates kept from the step before are forgotten. */
  invalidate(): void;
  /** Adds `delta` to one unknown of the state at `time`, without a new start. The dense output of the last step stays as it was. */
  adjust(index: number, delta: number): void;
  /** The dense output of one unknown inside the last accepted step, `previousTime <= t <= time`. */
  interpolateOne(t: number, index: number): number;
}

/** Something that moves along with the system inside every step and has an error of its own. */
export interface Companion {
  /** Before each attempt over [t, t + h]; it may change the system's rates. */
  begin(t: number, h: number): void;
  /** After an attempt whose own error is within the tolerance: the companion's error, 1 being the tolerance. */
  error(t: number, h: number, candidate: Float64Array): number;
}

/**
 * How the errors e_i / scale_i become one number: their root mean square over the unknowns that are controlled
 * (whose scale is finite), or the largest.
 */
export type ErrorNorm = 'rms' | 'max';

export interface StepperOptions {
  readonly norm: ErrorNorm;
  /** What moves along inside each step, if anything does. */
  readonly companion: Companion | null;
}

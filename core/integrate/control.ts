/**
 * How long the next step may be: a proportional-integral controller on the error of this step and of the one before.
 * Knows nothing of methods or states; a stepper asks it after every attempt.
 * Source: Hairer & Wanner, Solving ODEs II, section IV.2 (K. Gustafsson's controller).
 */

/** All factors multiply the step size that was tried. */
export interface StepControl {
  /** The greatest factor it ever gives. */
  readonly growthLimit: number;
  /** Forgets earlier steps. */
  restart(): void;
  /** After an accepted step with this error (1 is the tolerance). */
  afterAccepted(error: number): number;
  /**
   * After an accepted step that was cut shorter than proposed. It says little about the next one: the memory of errors is left
   * as it was, and whether a rejection came before is the caller's to weigh.
   */
  afterShortened(error: number): number;
  /** After a rejected step; an error that is not finite asks for a quarter. */
  afterRejected(error: number): number;
}

const SAFETY = 0.9;
const GROWTH_LIMIT = 8;
const SHRINK_LIMIT = 0.2;
/** The factor after a step whose rates or pivots were not finite. */
const AFTER_FAULT = 0.25;
/** Errors below this say no more than that the step was far too short. */
const LEAST_ERROR = 1e-4;

/**
 * @param order the power of the step size with which the error estimate goes, p for an embedded method of order p - 1
 */
export function createControl(order: number): StepControl {
  const integral = 0.7 / order;
  const proportional = 0.4 / order;
  let before = 1;
  let wasRejected = false;

  function bounded(factor: number): number {
    return Math.min(wasRejected ? 1 : GROWTH_LIMIT, Math.max(SHRINK_LIMIT, factor));
  }

  return {
    growthLimit: GROWTH_LIMIT,

    restart() {
      before = 1;
      wasRejected = false;
    },

    afterAccepted(error) {
      const now = Math.max(error, LEAST_ERROR);
      const factor = bounded(SAFETY * now ** -integral * before ** proportional);
      before = now;
      wasRejected = false;
      return factor;
    },

    afterShortened(error) {
      wasRejected = false;
      return bounded(SAFETY * Math.max(error, 1e-300) ** (-1 / order));
    },

    afterRejected(error) {
      wasRejected = true;
      if (!Number.isFinite(error)) return AFTER_FAULT;
      return Math.min(SAFETY, Math.max(SHRINK_LIMIT, SAFETY * error ** (-1 / order)));
    },
  };
}

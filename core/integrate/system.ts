/**
 * What an integrator knows of the world: a vector, its rates, and a matrix it can solve with.
 * The network offers itself through this interface; nothing here knows a bubble.
 */

/** The Jacobian of a system, kept by whoever knows its sparsity, and the linear solves a Rosenbrock method needs. */
export interface ShiftedMatrix {
  /**
   * Factors `shift I - J` with the Jacobian of the last `linearise`.
   * @param shift 1/(h gamma), 1/s
   * @returns false where a pivot is too small to trust: the step must be made shorter.
   */
  factor(shift: number): boolean;
  /** Replaces `x` by the solution of `(shift I - J) x = right side`, in place. */
  solve(x: Float64Array): void;
}

/** A system `dy/dt = f(t, y)` of `size` unknowns. */
export interface System {
  readonly size: number;
  readonly matrix: ShiftedMatrix;
  /** Writes f(t, y) into `out`. Where the state is outside what the laws allow (an amount below zero), writes NaN. */
  rates(t: number, y: Float64Array, out: Float64Array): void;
  /** Evaluates the analytic Jacobian at (t, y) into `matrix`, and writes f and its partial derivative with respect to t. */
  linearise(t: number, y: Float64Array, rates: Float64Array, timeDerivative: Float64Array): void;
  /**
   * An upper bound on the rate of every mode of the Jacobian at (t, y), 1/s, such as its largest column sum of sizes (Gershgorin).
   * A bound from above cannot overlook a fast mode, as an iteration from a chosen start can. NaN where the state has no Jacobian.
   */
  rateBound(t: number, y: Float64Array): number;
  /** Writes the size of error that is one unit of the norm for each unknown; Infinity for one that is not controlled. */
  errorScale(y: Float64Array, out: Float64Array): void;
}

/** What one call of `step` did. */
export type StepOutcome =
  | { readonly kind: 'accepted' }
  /** The step size fell below what the clock can resolve; `worst` is the unknown with the largest error. */
  | { readonly kind: 'failed'; readonly reason: 'step-too-small' | 'not-finite'; readonly worst: number }
  /** An explicit method found the system stiff: nothing after `time` is to be trusted to it. */
  | { readonly kind: 'stiff'; readonly fastestRate: number };

/**
 * A one-step integrator. It owns its state; `time` and `state` are those at the end of the last accepted step.
 * Steps depend on nothing but the system and the arguments, so that two runs give the same bytes.
 */
export interface Stepper {
  readonly name: string;
  readonly time: number;
  /** The state at `time`; read it, do not write it (use `restart`). Length `system.size`. */
  readonly state: Float64Array;
  /** The start of the last accepted step. */
  readonly previousTime: number;
  /** Step size that the controller proposes next, s. */
  readonly nextStep: number;
  readonly statistics: StepStatistics;
  /** Begins anew at (t, y), after a jump of state or of the system. `firstStep` 0: chosen by the stepper. `y` is copied. */
  restart(t: number, y: Float64Array, firstStep: number): void;
  /** One accepted step, never past `limit`; lands on `limit` exactly when it would come near it. */
  step(limit: number): StepOutcome;
  /** The dense output inside the last accepted step, `previousTime <= t <= time`. */
  interpolate(t: number, out: Float64Array): void;
}

export interface StepStatistics {
  steps: number;
  rejected: number;
  rateEvaluations: number;
  jacobians: number;
  factorisations: number;
}

/**
 * Which stepper a network gets: from how fast its fastest mode can be, bounded from above, and from whether it carries its dying
 * bubbles apart. What is not certainly slow goes to the stiff stepper, which is never wrong to have chosen.
 */
import { createExplicit } from './explicit.ts';
import { createExtrapolation } from './extrapolation.ts';
import type { Companion, ErrorNorm, OwnedStepper } from './owned-stepper.ts';
import { createRosenbrock } from './rosenbrock.ts';
import type { System } from './system.ts';

export interface Method {
  /**
   * `stiff`: RODAS5P. `explicit`: extrapolation by odex. `structured`: Tsitouras' pair with dying bubbles carried apart,
   * for large networks of contacts.
   */
  readonly name: 'stiff' | 'explicit' | 'structured';
  /** Dying bubbles are carried apart. */
  readonly carries: boolean;
}

/** Up to so many e-foldings of its fastest mode a run is certainly not stiff. */
const FEW_EFOLDINGS = 1000;
/** Large networks of contacts have fast modes only in their dying bubbles, which are carried apart. */
const FEW_EFOLDINGS_APART = 2e4;
/** Above this size the library's arrays cost more than its high order saves. */
const LARGEST_EXTRAPOLATED = 64;

/**
 * @param asked what the user asked for
 * @param carries whether dying bubbles are carried apart
 */
export function chooseMethod(
  system: System,
  y: Float64Array,
  until: number,
  asked: 'auto' | 'explicit' | 'stiff',
  carries: boolean,
): Method {
  if (asked === 'stiff') return { name: 'stiff', carries };
  if (asked === 'explicit') return { name: carries ? 'structured' : 'explicit', carries };
  const efoldings = system.rateBound(0, y) * until;
  if (carries) return { name: efoldings <= FEW_EFOLDINGS_APART ? 'structured' : 'stiff', carries };
  return { name: efoldings <= FEW_EFOLDINGS && system.size <= LARGEST_EXTRAPOLATED ? 'explicit' : 'stiff', carries };
}

/** Up to this size every unknown is somebody's, and errs by no more than the tolerance; in a crowd it is their mean that counts. */
const LARGEST_SINGLE_OUT = 300;

/** How the errors of a run that begins with `size` unknowns become one number; it stays so to its end. */
export function errorNorm(size: number): ErrorNorm {
  return size > LARGEST_SINGLE_OUT ? 'rms' : 'max';
}

export function createStepper(
  method: Method,
  system: System,
  until: number,
  norm: ErrorNorm,
  companion: Companion | null,
): OwnedStepper {
  switch (method.name) {
    case 'stiff':
      return createRosenbrock(system, { norm, companion });
    case 'structured':
      return createExplicit(system, { norm, companion });
    case 'explicit':
      return createExtrapolation(system, until);
  }
}

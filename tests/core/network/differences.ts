/** Slopes by central differences, with what they may be wrong by: the yardstick for slopes in closed form. */

const EPSILON = 2 ** -52;

export interface Difference {
  readonly value: number;
  /** Truncation as a step twice as long shows it, and rounding. */
  readonly error: number;
}

/**
 * @param f the function
 * @param x where
 * @param h the step
 * @param roundings how many roundings of its own size f may carry
 */
export function differenceOf(f: (x: number) => number, x: number, h: number, roundings = 16): Difference {
  const [up, down] = [f(x + h), f(x - h)];
  const fine = (up - down) / (2 * h);
  const coarse = (f(x + 2 * h) - f(x - 2 * h)) / (4 * h);
  // Of second order, the fine one errs by a third of what they differ by; all of it is allowed.
  const rounding = (roundings * EPSILON * Math.max(Math.abs(up), Math.abs(down))) / h;
  return { value: fine, error: Math.abs(fine - coarse) + rounding };
}

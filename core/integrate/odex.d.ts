/** Types of the part of `odex` 2.0.4 that `extrapolation.ts` uses. */

export declare class Solver {
  constructor(size: number);
  maxSteps: number;
  /** In how many lines of the table it checks for instability; 0: in none. */
  stabilityCheckCount: number;
  /** At least 1e-4, and at most half the interval: the library insists. */
  initialStepSize: number;
  maxExtrapolationColumns: number;
  denseOutput: boolean;
  absoluteTolerance: number | number[];
  relativeTolerance: number | number[];
  solve(
    rates: (x: number, y: number[]) => number[],
    x: number,
    y: number[],
    end: number,
    /** Called at the start (count 1) and after each accepted step; false stops. `dense` gives one unknown inside the step. */
    seen: (
      count: number,
      from: number,
      to: number,
      y: number[],
      dense: (index: number, x: number) => number,
    ) => false | undefined,
  ): unknown;
}

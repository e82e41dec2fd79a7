/**
 * The stiff stepper: RODAS5P with the system's analytic Jacobian, one factorisation an attempt. Knows rates and a matrix, no bubble.
 */
import { errorNorm, fitStep, growth, shortestStep, shrinkage, startingStep, worstUnknown } from './control.ts';
import type { OwnedStepper, StepperOptions } from './owned-stepper.ts';
import type { StepOutcome, StepStatistics, System } from '../integrate/system.ts';
import { RODAS5P } from '../integrate/tableaus/rodas5p.ts';

export function createRosenbrock(system: System, options: StepperOptions): OwnedStepper {
  const n = system.size;
  const { companion, norm } = options;
  const real = (): Float64Array => new Float64Array(n);
  const start = real(); // y at the start of the step, kept for the dense output
  const state = real();
  const end = real(); // y at the end of the step as computed, before its owner adjusts `state`
  const trial = real();
  const slope = real();
  const timeDerivative = real();
  const scale = real();
  const k: Float64Array[] = Array.from({ length: 8 }, real);
  const dense: Float64Array[] = [real(), real(), real()];
  const statistics: StepStatistics = { steps: 0, rejected: 0, rateEvaluations: 0, jacobians: 0, factorisations: 0 };
  let time = 0;
  let previousTime = 0;
  let nextStep = 0;
  let normBefore = 1;
  let denseReady = false;

  const { gamma, stages: a, couplings: C, nodes: c, timeWeights: d, dense: H } = RODAS5P as unknown as { gamma: number; stages: readonly (readonly number[])[]; couplings: readonly (readonly number[])[]; nodes: readonly number[]; timeWeights: readonly number[]; dense: readonly (readonly number[])[] };

  /** Right sides of stages 2 to 6: f at y + sum a k, plus sum (C/h) k and h d df/dt, solved in place. */
  function stage(index: number, h: number): void {
    const target = k[index]!;
    const [a0 = 0, a1 = 0, a2 = 0, a3 = 0, a4 = 0] = a[index]!;
    const [k0, k1, k2, k3, k4] = k as [Float64Array, Float64Array, Float64Array, Float64Array, Float64Array];
    switch (index) {
      case 1:
        for (let i = 0; i < n; i++) trial[i] = start[i]! + a0 * k0[i]!;
        break;
      case 2:
        for (let i = 0; i < n; i++) trial[i] = start[i]! + a0 * k0[i]! + a1 * k1[i]!;
        break;
      case 3:
        for (let i = 0; i < n; i++) trial[i] = start[i]! + a0 * k0[i]! + a1 * k1[i]! + a2 * k2[i]!;
        break;
      case 4:
        for (let i = 0; i < n; i++) trial[i] = start[i]! + a0 * k0[i]! + a1 * k1[i]! + a2 * k2[i]! + a3 * k3[i]!;
        break;
      case 5:
        for (let i = 0; i < n; i++) trial[i] = start[i]! + a0 * k0[i]! + a1 * k1[i]! + a2 * k2[i]! + a3 * k3[i]! + a4 * k4[i]!;
        break;
      default: {
        const last = k[index - 1]!;
        for (let i = 0; i < n; i++) trial[i] = trial[i]! + last[i]!;
      }
    }
    system.rates(time + c[index]! * h, trial, target);
    addCouplings(index, h, target);
    system.matrix.solve(target);
  }

  function addCouplings(index: number, h: number, target: Float64Array): void {
    const row = C[index]!;
    const inverse = 1 / h;
    const c0 = row[0]! * inverse;
    const c1 = (row[1] ?? 0) * inverse;
    const c2 = (row[2] ?? 0) * inverse;
    const c3 = (row[3] ?? 0) * inverse;
    const c4 = (row[4] ?? 0) * inverse;
    const c5 = (row[5] ?? 0) * inverse;
    const c6 = (row[6] ?? 0) * inverse;
    const hd = h * d[index]!;
    const [k0, k1, k2, k3, k4, k5, k6] = k as [
      Float64Array,
      Float64Array,
      Float64Array,
      Float64Array,
      Float64Array,
      Float64Array,
      Float64Array,
    ];
    const g = timeDerivative;
    switch (index) {
      case 1:
        for (let i = 0; i < n; i++) target[i] = target[i]! + hd * g[i]! + c0 * k0[i]!;
        break;
      case 2:
        for (let i = 0; i < n; i++) target[i] = target[i]! + hd * g[i]! + c0 * k0[i]! + c1 * k1[i]!;
        break;
      case 3:
        for (let i = 0; i < n; i++) target[i] = target[i]! + hd * g[i]! + c0 * k0[i]! + c1 * k1[i]! + c2 * k2[i]!;
        break;
      case 4:
        for (let i = 0; i < n; i++) {
          target[i] = target[i]! + hd * g[i]! + c0 * k0[i]! + c1 * k1[i]! + c2 * k2[i]! + c3 * k3[i]!;
        }
        break;
      case 5:
        for (let i = 0; i < n; i++) {
          target[i] = target[i]! + c0 * k0[i]! + c1 * k1[i]! + c2 * k2[i]! + c3 * k3[i]! + c4 * k4[i]!;
        }
        break;
      case 6:
        for (let i = 0; i < n; i++) {
          target[i] = target[i]! + c0 * k0[i]! + c1 * k1[i]! + c2 * k2[i]! + c3 * k3[i]! + c4 * k4[i]! + c5 * k5[i]!;
        }
        break;
      default:
        for (let i = 0; i < n; i++) {
          target[i] =
            target[i]! + c0 * k0[i]! + c1 * k1[i]! + c2 * k2[i]! + c3 * k3[i]! + c4 * k4[i]! + c5 * k5[i]! + c6 * k6[i]!;
        }
    }
  }

  /** One attempt of length h; the candidate in `end`. Returns the error norm, NaN or Infinity where it cannot stand. */
  function attempt(h: number): number {
    companion?.begin(time, h);
    system.linearise(time, start, slope, timeDerivative);
    statistics.jacobians++;
    statistics.factorisations++;
    if (!system.matrix.factor(1 / (h * gamma))) return Infinity;
    const first = k[0]!;
    const hd = h * d[0]!;
    for (let i = 0; i < n; i++) first[i] = slope[i]! + hd * timeDerivative[i]!;
    system.matrix.solve(first);
    for (let index = 1; index < 8; index++) stage(index, h);
    statistics.rateEvaluations += 8;
    const last = k[7]!;
    for (let i = 0; i < n; i++) end[i] = trial[i]! + last[i]!;
    let e = errorNorm(last, scale, norm);
    if (companion && e <= 1) e = Math.max(e, companion.error(time, h, end));
    return e;
  }

  return {
    name: 'stiff',
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
      normBefore = 1;
    },

    invalidate() {
      // Rates are computed anew in every step.
    },

    adjust(unknown, delta) {
      state[unknown] = state[unknown]! + delta;
    },

    step(limit): StepOutcome {
      start.set(state);
      previousTime = time;
      denseReady = false;
      system.errorScale(start, scale);
      if (!(nextStep > 0)) {
        system.rates(time, start, slope);
        nextStep = startingStep(system, time, start, slope, scale, RODAS5P.order, limit - time, trial, k[0]!);
      }
      const proposed = nextStep;
      let h = fitStep(time, nextStep, limit);
      let rejected = false;
      let finite = false;
      for (;;) {
        const e = attempt(h);
        if (e <= 1) {
          statistics.steps++;
          state.set(end);
          const next = h * Math.min(growth(e, normBefore, RODAS5P.order), rejected ? 1 : Infinity);
          nextStep = rejected ? next : Math.max(next, h < proposed ? proposed : 0);
          normBefore = e;
          time = h === limit - time ? limit : time + h;
          return { kind: 'accepted' };
        }
        if (Number.isFinite(e)) finite = true;
        statistics.rejected++;
        rejected = true;
        h *= shrinkage(e, RODAS5P.order);
        if (!(h > shortestStep(time))) {
          nextStep = h;
          return { kind: 'failed', reason: finite ? 'step-too-small' : 'not-finite', worst: worstUnknown(k[7]!, scale) };
        }
      }
    },

    interpolateOne(t, i) {
      const x = time > previousTime ? (t - previousTime) / (time - previousTime) : 1;
      const w = 1 - x;
      let sum = 0;
      for (let s = 0; s < 8; s++) sum += (H[0]![s]! + x * (H[1]![s]! + x * H[2]![s]!)) * k[s]![i]!;
      return w * start[i]! + x * (end[i]! + w * sum);
    },

    interpolate(t, out) {
      if (t === time) {
        out.set(end);
        return;
      }
      if (!denseReady) {
        for (let q = 0; q < 3; q++) {
          const target = dense[q]!;
          const row = H[q]!;
          target.fill(0);
          for (let s = 0; s < 8; s++) {
            const weight = row[s]!;
            const ks = k[s]!;
            for (let i = 0; i < n; i++) target[i] = target[i]! + weight * ks[i]!;
          }
        }
        denseReady = true;
      }
      const x = time > previousTime ? (t - previousTime) / (time - previousTime) : 1;
      const w = 1 - x;
      const [K1, K2, K3] = dense as [Float64Array, Float64Array, Float64Array];
      for (let i = 0; i < n; i++) {
        out[i] = w * start[i]! + x * (end[i]! + w * (K1[i]! + x * (K2[i]! + x * K3[i]!)));
      }
    },
  };
}

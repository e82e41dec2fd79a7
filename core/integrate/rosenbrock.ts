/**
 * The stiff stepper: the L-stable Rosenbrock method of `tableaus/rodas5p.ts` with the analytic Jacobian of its system.
 * One factorisation and eight solves a step, no iteration; each stage is one sweep over the arrays, whatever their number.
 */
import { addFinite, allFinite, suspect } from './norm.ts';
import { createOneStep, createWorkspace, type Kernel, type Workspace } from './one-step.ts';
import type { OwnedStepper, StepperOptions } from './owned-stepper.ts';
import type { System } from './system.ts';
import { RODAS5P } from './tableaus/rodas5p.ts';

const { gamma, nodes, timeWeights, stages, couplings, dense } = RODAS5P;
const [, [a21], [a31, a32], [a41, a42, a43], [a51, a52, a53, a54], [a61, a62, a63, a64, a65]] = stages;
const [, [c21], [c31, c32], [c41, c42, c43], [c51, c52, c53, c54], [c61, c62, c63, c64, c65]] = couplings;
const [c71, c72, c73, c74, c75, c76] = couplings[6];
const [c81, c82, c83, c84, c85, c86, c87] = couplings[7];

/**
 * A stepper of order 5 for stiff systems, its error estimated by a method of order 4, its dense output of order 4.
 * Rates and Jacobian are evaluated anew at the start of every step, so the system may change between steps.
 * Every array is allocated here.
 */
export function createRosenbrock(system: System, options: StepperOptions): OwnedStepper {
  const work = createWorkspace(system.size);
  return createOneStep(system, options, work, createKernel(system, options.norm, work));
}

function createKernel(system: System, norm: 'rms' | 'max', work: Workspace): Kernel {
  const size = system.size;
  const { weight, statistics } = work;
  const startRates = new Float64Array(size);
  const timeDerivative = new Float64Array(size);
  const stageRates = new Float64Array(size);
  const k1 = new Float64Array(size);
  const k2 = new Float64Array(size);
  const k3 = new Float64Array(size);
  const k4 = new Float64Array(size);
  const k5 = new Float64Array(size);
  const k6 = new Float64Array(size);
  const k7 = new Float64Array(size);
  const k8 = new Float64Array(size);
  const k = [k1, k2, k3, k4, k5, k6, k7, k8];
  /** What each k counts for at one instant of the dense output. */
  const w = new Float64Array(8);
  let faulty = false;

  /** k += f(t, candidate), then the solve; false where a rate is no number. */
  function finishStage(t: number, stage: Float64Array): boolean {
    system.rates(t, work.candidate, stageRates);
    statistics.rateEvaluations++;
    if (!addFinite(stageRates, stage)) return false;
    system.matrix.solve(stage);
    return true;
  }

  // Each sweep writes u = y + sum_j a_ij k_j and the known part of the right side, sum_j c_ij/h k_j + d_i h f_t.

  function sweep1(h: number): void {
    const d = timeWeights[0] * h;
    for (let i = 0; i < size; i++) k1[i] = startRates[i]! + d * timeDerivative[i]!;
  }

  function sweep2(h: number): void {
    const y = work.state;
    const u = work.candidate;
    const e1 = c21 / h;
    const d = timeWeights[1] * h;
    for (let i = 0; i < size; i++) {
      const q1 = k1[i]!;
      u[i] = y[i]! + a21 * q1;
      k2[i] = e1 * q1 + d * timeDerivative[i]!;
    }
  }

  function sweep3(h: number): void {
    const y = work.state;
    const u = work.candidate;
    const [e1, e2] = [c31 / h, c32 / h];
    const d = timeWeights[2] * h;
    for (let i = 0; i < size; i++) {
      const q1 = k1[i]!;
      const q2 = k2[i]!;
      u[i] = y[i]! + (a31 * q1 + a32 * q2);
      k3[i] = e1 * q1 + e2 * q2 + d * timeDerivative[i]!;
    }
  }

  function sweep4(h: number): void {
    const y = work.state;
    const u = work.candidate;
    const [e1, e2, e3] = [c41 / h, c42 / h, c43 / h];
    const d = timeWeights[3] * h;
    for (let i = 0; i < size; i++) {
      const q1 = k1[i]!;
      const q2 = k2[i]!;
      const q3 = k3[i]!;
      u[i] = y[i]! + (a41 * q1 + a42 * q2 + a43 * q3);
      k4[i] = e1 * q1 + e2 * q2 + e3 * q3 + d * timeDerivative[i]!;
    }
  }

  function sweep5(h: number): void {
    const y = work.state;
    const u = work.candidate;
    const [e1, e2, e3, e4] = [c51 / h, c52 / h, c53 / h, c54 / h];
    const d = timeWeights[4] * h;
    for (let i = 0; i < size; i++) {
      const q1 = k1[i]!;
      const q2 = k2[i]!;
      const q3 = k3[i]!;
      const q4 = k4[i]!;
      u[i] = y[i]! + (a51 * q1 + a52 * q2 + a53 * q3 + a54 * q4);
      k5[i] = e1 * q1 + e2 * q2 + e3 * q3 + e4 * q4 + d * timeDerivative[i]!;
    }
  }

  function sweep6(h: number): void {
    const y = work.state;
    const u = work.candidate;
    const [e1, e2, e3, e4, e5] = [c61 / h, c62 / h, c63 / h, c64 / h, c65 / h];
    for (let i = 0; i < size; i++) {
      const q1 = k1[i]!;
      const q2 = k2[i]!;
      const q3 = k3[i]!;
      const q4 = k4[i]!;
      const q5 = k5[i]!;
      u[i] = y[i]! + (a61 * q1 + a62 * q2 + a63 * q3 + a64 * q4 + a65 * q5);
      k6[i] = e1 * q1 + e2 * q2 + e3 * q3 + e4 * q4 + e5 * q5;
    }
  }

  // The last stages differ from the one before by its own increment: u7 = u6 + k6, u8 = u7 + k7.

  function sweep7(h: number): void {
    const u = work.candidate;
    const [e1, e2, e3, e4, e5, e6] = [c71 / h, c72 / h, c73 / h, c74 / h, c75 / h, c76 / h];
    for (let i = 0; i < size; i++) {
      const q6 = k6[i]!;
      u[i]! += q6;
      k7[i] = e1 * k1[i]! + e2 * k2[i]! + e3 * k3[i]! + e4 * k4[i]! + e5 * k5[i]! + e6 * q6;
    }
  }

  function sweep8(h: number): void {
    const u = work.candidate;
    const [e1, e2, e3, e4, e5, e6, e7] = [c81 / h, c82 / h, c83 / h, c84 / h, c85 / h, c86 / h, c87 / h];
    for (let i = 0; i < size; i++) {
      const q7 = k7[i]!;
      u[i]! += q7;
      k8[i] = e1 * k1[i]! + e2 * k2[i]! + e3 * k3[i]! + e4 * k4[i]! + e5 * k5[i]! + e6 * k6[i]! + e7 * q7;
    }
  }

  /** The new state u8 + k8, and the norm of its error k8. */
  function conclude(): number {
    const u = work.candidate;
    let sum = 0;
    if (norm === 'rms') {
      for (let i = 0; i < size; i++) {
        const q8 = k8[i]!;
        u[i]! += q8;
        const e = q8 * weight[i]!;
        sum += e * e;
      }
      return Math.sqrt(sum / Math.max(1, work.controlled));
    }
    let lost = 0;
    for (let i = 0; i < size; i++) {
      const q8 = k8[i]!;
      u[i]! += q8;
      const e = Math.abs(q8 * weight[i]!);
      lost += e - e;
      if (e > sum) sum = e;
    }
    return sum + lost;
  }

  function attempt(t: number, h: number, end: number): number {
    faulty = true;
    if (!allFinite(startRates)) {
      // Nothing has moved: the rates at the start are to blame.
      work.candidate.set(work.state);
      stageRates.set(startRates);
      return NaN;
    }
    stageRates.set(startRates);
    statistics.factorisations++;
    if (!system.matrix.factor(1 / (h * gamma))) {
      work.candidate.set(work.state);
      for (let i = 0; i < size; i++) work.candidate[i]! += h * startRates[i]!;
      return NaN;
    }
    sweep1(h);
    system.matrix.solve(k1);
    sweep2(h);
    if (!finishStage(t + nodes[1] * h, k2)) return NaN;
    sweep3(h);
    if (!finishStage(t + nodes[2] * h, k3)) return NaN;
    sweep4(h);
    if (!finishStage(t + nodes[3] * h, k4)) return NaN;
    sweep5(h);
    if (!finishStage(t + nodes[4] * h, k5)) return NaN;
    sweep6(h);
    if (!finishStage(end, k6)) return NaN;
    sweep7(h);
    if (!finishStage(end, k7)) return NaN;
    sweep8(h);
    if (!finishStage(end, k8)) return NaN;
    faulty = false;
    return conclude();
  }

  /** y(theta) = (1-theta) y0 + theta y1 + sum_j w_j k_j,  w_j = theta (1-theta) (H1_j + theta (H2_j + theta H3_j)) */
  function weighStages(theta: number): void {
    for (let j = 0; j < 8; j++) {
      w[j] = theta * (1 - theta) * (dense[0][j]! + theta * (dense[1][j]! + theta * dense[2][j]!));
    }
  }

  return {
    name: 'stiff',
    errorOrder: RODAS5P.order,

    prepare(t) {
      system.linearise(t, work.state, startRates, timeDerivative);
      statistics.rateEvaluations++;
      statistics.jacobians++;
    },
    rates: () => startRates,
    scratch: () => [k2, k3],
    attempt,
    stiffness: () => 0,

    blame() {
      if (faulty) return suspect(stageRates, work.state, work.candidate, weight);
      let worst = 0;
      for (let i = 1; i < size; i++) {
        if (!(Math.abs(k8[i]! * weight[i]!) <= Math.abs(k8[worst]! * weight[worst]!))) worst = i;
      }
      return worst;
    },

    // Nothing is kept from step to step: rates and Jacobian are those of the start, evaluated in `prepare`.
    accepted: () => undefined,
    invalidate: () => undefined,
    restart: () => undefined,

    interpolate(theta, _h, from, to, out) {
      weighStages(theta);
      const rest = 1 - theta;
      const [w1, w2, w3, w4] = [w[0]!, w[1]!, w[2]!, w[3]!];
      const [w5, w6, w7, w8] = [w[4]!, w[5]!, w[6]!, w[7]!];
      for (let i = 0; i < size; i++) {
        out[i] =
          rest * from[i]! +
          theta * to[i]! +
          (w1 * k1[i]! +
            w2 * k2[i]! +
            w3 * k3[i]! +
            w4 * k4[i]! +
            w5 * k5[i]! +
            w6 * k6[i]! +
            w7 * k7[i]! +
            w8 * k8[i]!);
      }
    },

    interpolateOne(theta, _h, from, to, index) {
      weighStages(theta);
      let sum = 0;
      for (let j = 0; j < 8; j++) sum += w[j]! * k[j]![index]!;
      return (1 - theta) * from[index]! + theta * to[index]! + sum;
    },
  };
}

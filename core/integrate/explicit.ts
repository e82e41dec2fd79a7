/**
 * The stepper for systems that are not stiff: the explicit pair of `tableaus/tsit5.ts`, six evaluations of the rates a step.
 * It notices when stability and not accuracy holds its steps short, and then says so instead of going on.
 */
import { allFinite, suspect } from './norm.ts';
import { createOneStep, createWorkspace, type Kernel, type Workspace } from './one-step.ts';
import type { OwnedStepper, StepperOptions } from './owned-stepper.ts';
import type { System } from './system.ts';
import { TSIT5 } from './tableaus/tsit5.ts';

const { nodes, rows, errorWeights, dense, stabilityInterval } = TSIT5;
const [, [a21], [a31, a32], [a41, a42, a43], [a51, a52, a53, a54], [a61, a62, a63, a64, a65]] = rows;
const [a71, a72, a73, a74, a75, a76] = rows[6];
const [g1, g2, g3, g4, g5, g6, g7] = errorWeights;

/** A step this near the end of the stability interval counts as held short by stability. */
const SUSPICIOUS = 0.98 * stabilityInterval;
/** So many suspicious steps, with never so many clear ones in a row between them, make a stiff system. */
const STIFF_AFTER = 15;
const CLEAR_AFTER = 6;

/**
 * A stepper of order 5 for systems that are not stiff, its error estimated by a method of order 4, its dense output of order 4.
 * The last stage of a step is the first of the next: whoever changes the system between steps calls `invalidate`.
 * Every array is allocated here.
 */
export function createExplicit(system: System, options: StepperOptions): OwnedStepper {
  const work = createWorkspace(system.size);
  return createOneStep(system, options, work, createKernel(system, options.norm, work));
}

function createKernel(system: System, norm: 'rms' | 'max', work: Workspace): Kernel {
  const size = system.size;
  const { weight, statistics } = work;
  const k2 = new Float64Array(size);
  const k3 = new Float64Array(size);
  const k4 = new Float64Array(size);
  const k5 = new Float64Array(size);
  const k6 = new Float64Array(size);
  /** The argument of the sixth stage, kept apart for the stiffness test. */
  const sixth = new Float64Array(size);
  const w = new Float64Array(7);
  let k1 = new Float64Array(size);
  let k7 = new Float64Array(size);
  /** What k1 holds: the rates at the start; k7 those at the end of an accepted step; neither. */
  let known: 'start' | 'end' | 'nothing' = 'nothing';
  let faulty: { readonly rates: Float64Array; readonly stage: Float64Array } | null = null;
  let lastStep = 0;
  let rateFelt = 0;
  let suspicious = 0;
  let clear = 0;

  function evaluate(t: number, stage: Float64Array, out: Float64Array): boolean {
    system.rates(t, stage, out);
    statistics.rateEvaluations++;
    if (allFinite(out)) return true;
    faulty = { rates: out, stage };
    return false;
  }

  function sweep2(h: number): void {
    const y = work.state;
    const u = work.candidate;
    const b1 = h * a21;
    for (let i = 0; i < size; i++) u[i] = y[i]! + b1 * k1[i]!;
  }

  function sweep3(h: number): void {
    const y = work.state;
    const u = work.candidate;
    for (let i = 0; i < size; i++) u[i] = y[i]! + h * (a31 * k1[i]! + a32 * k2[i]!);
  }

  function sweep4(h: number): void {
    const y = work.state;
    const u = work.candidate;
    for (let i = 0; i < size; i++) u[i] = y[i]! + h * (a41 * k1[i]! + a42 * k2[i]! + a43 * k3[i]!);
  }

  function sweep5(h: number): void {
    const y = work.state;
    const u = work.candidate;
    for (let i = 0; i < size; i++) {
      u[i] = y[i]! + h * (a51 * k1[i]! + a52 * k2[i]! + a53 * k3[i]! + a54 * k4[i]!);
    }
  }

  function sweep6(h: number): void {
    const y = work.state;
    for (let i = 0; i < size; i++) {
      sixth[i] = y[i]! + h * (a61 * k1[i]! + a62 * k2[i]! + a63 * k3[i]! + a64 * k4[i]! + a65 * k5[i]!);
    }
  }

  function sweep7(h: number): void {
    const y = work.state;
    const u = work.candidate;
    for (let i = 0; i < size; i++) {
      u[i] = y[i]! + h * (a71 * k1[i]! + a72 * k2[i]! + a73 * k3[i]! + a74 * k4[i]! + a75 * k5[i]! + a76 * k6[i]!);
    }
  }

  function errorAt(i: number, h: number): number {
    return (
      h * (g1 * k1[i]! + g2 * k2[i]! + g3 * k3[i]! + g4 * k4[i]! + g5 * k5[i]! + g6 * k6[i]! + g7 * k7[i]!) * weight[i]!
    );
  }

  /** The error norm, and on the way |k7 - k6| / |y7 - g6|: the rate that the last two stages, at one time, felt between them. */
  function conclude(h: number): number {
    const u = work.candidate;
    let sum = 0;
    let largest = 0;
    let lost = 0;
    let change = 0;
    let distance = 0;
    for (let i = 0; i < size; i++) {
      const q6 = k6[i]!;
      const q7 = k7[i]!;
      const scale = weight[i]!;
      const e = h * (g1 * k1[i]! + g2 * k2[i]! + g3 * k3[i]! + g4 * k4[i]! + g5 * k5[i]! + g6 * q6 + g7 * q7) * scale;
      sum += e * e;
      lost += e - e;
      const magnitude = Math.abs(e);
      if (magnitude > largest) largest = magnitude;
      const r = (q7 - q6) * scale;
      const d = (u[i]! - sixth[i]!) * scale;
      change += r * r;
      distance += d * d;
    }
    rateFelt = distance > 0 ? Math.sqrt(change / distance) : 0;
    return norm === 'rms' ? Math.sqrt(sum / Math.max(1, work.controlled)) : largest + lost;
  }

  /**
   * With the end state known, y(theta) = (1-theta) y0 + theta y1 + sum_j w_j k_j: from b_j(theta) = sum_m r_jm theta^m and
   * b_j(1) = sum_m r_jm follows w_j = -h theta (1-theta) (r_j2 + r_j3 (1 + theta) + r_j4 (1 + theta + theta^2)).
   */
  function weighStages(theta: number, h: number): void {
    const third = 1 + theta;
    const fourth = 1 + theta * third;
    for (let j = 0; j < 7; j++) {
      const row = dense[j]!;
      w[j] = -h * theta * (1 - theta) * (row[1] + row[2] * third + row[3] * fourth);
    }
  }

  return {
    name: 'explicit',
    errorOrder: TSIT5.order,

    prepare(t) {
      if (known === 'end') {
        const rates = k7;
        k7 = k1;
        k1 = rates;
      } else if (known === 'nothing') {
        system.rates(t, work.state, k1);
        statistics.rateEvaluations++;
      }
      known = 'start';
    },
    rates: () => k1,
    scratch: () => [k2, k3],

    attempt(t, h, end) {
      faulty = null;
      lastStep = h;
      if (!allFinite(k1)) {
        faulty = { rates: k1, stage: work.state };
        return NaN;
      }
      sweep2(h);
      if (!evaluate(t + nodes[1] * h, work.candidate, k2)) return NaN;
      sweep3(h);
      if (!evaluate(t + nodes[2] * h, work.candidate, k3)) return NaN;
      sweep4(h);
      if (!evaluate(t + nodes[3] * h, work.candidate, k4)) return NaN;
      sweep5(h);
      if (!evaluate(t + nodes[4] * h, work.candidate, k5)) return NaN;
      sweep6(h);
      if (!evaluate(end, sixth, k6)) return NaN;
      sweep7(h);
      if (!evaluate(end, work.candidate, k7)) return NaN;
      return conclude(h);
    },

    // Hairer & Wanner, Solving ODEs II, section IV.2, "Automatic stiffness detection".
    stiffness(h) {
      if (h * rateFelt > SUSPICIOUS) {
        clear = 0;
        suspicious++;
        return suspicious >= STIFF_AFTER ? rateFelt : 0;
      }
      clear++;
      if (clear >= CLEAR_AFTER) suspicious = 0;
      return 0;
    },

    blame() {
      if (faulty !== null) return suspect(faulty.rates, work.state, faulty.stage, weight);
      let worst = 0;
      for (let i = 1; i < size; i++) {
        if (!(Math.abs(errorAt(i, lastStep)) <= Math.abs(errorAt(worst, lastStep)))) worst = i;
      }
      return worst;
    },

    accepted() {
      known = 'end';
    },
    invalidate() {
      known = 'nothing';
    },
    restart() {
      known = 'nothing';
      suspicious = 0;
      clear = 0;
    },

    interpolate(theta, h, from, to, out) {
      weighStages(theta, h);
      const rest = 1 - theta;
      const [w1, w2, w3, w4] = [w[0]!, w[1]!, w[2]!, w[3]!];
      const [w5, w6, w7] = [w[4]!, w[5]!, w[6]!];
      for (let i = 0; i < size; i++) {
        out[i] =
          rest * from[i]! +
          theta * to[i]! +
          (w1 * k1[i]! + w2 * k2[i]! + w3 * k3[i]! + w4 * k4[i]! + w5 * k5[i]! + w6 * k6[i]! + w7 * k7[i]!);
      }
    },

    interpolateOne(theta, h, from, to, index) {
      weighStages(theta, h);
      const sum =
        w[0]! * k1[index]! +
        w[1]! * k2[index]! +
        w[2]! * k3[index]! +
        w[3]! * k4[index]! +
        w[4]! * k5[index]! +
        w[5]! * k6[index]! +
        w[6]! * k7[index]!;
      return (1 - theta) * from[index]! + theta * to[index]! + sum;
    },
  };
}

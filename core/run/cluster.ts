/**
 * A few dying bubbles that touch one another, integrated apart from the network over one step, between neighbours whose courses
 * are given. See `dying-bubbles.ts` for the laws.
 */
import { TSIT5 } from '../integrate/tableaus/tsit5.ts';
import type { Adjacency } from './adjacency.ts';
import { createDyingBubbles, type Surroundings } from './dying-bubbles.ts';
import { createDyingTrace } from './dying-trace.ts';
import type { NetworkSystem } from './system.ts';

/** One worker serves all clusters in turn: what it finds is read, and copied, before the next is taken. */
export interface Cluster {
  /**
   * Takes its bubbles.
   * @param radius radii of all nodes at the start of the step, m
   * @param amounts amounts of the bubbles at the start, member by member, from `offset` on, mol
   */
  take(group: readonly number[], radius: Float64Array, amounts: readonly number[], offset: number): void;
  /** Over [t, t + h], in a vessel at pressure `ambient`. */
  integrate(t: number, h: number, ambient: number, surroundings: Surroundings): void;
  /** Flows out of the cluster: how many, and the network's unknown that each goes to (they may repeat). */
  readonly flows: number;
  readonly receivers: readonly number[];
  /** What each moved, mol, and how fast at the start and the end, mol/s. */
  readonly moved: readonly number[];
  readonly startFlow: readonly number[];
  readonly endFlow: readonly number[];
  /**
   * The largest amount by which what a flow had moved at an instant of the step differs from what its source would have moved, mol;
   * the source being the quadratic in time with coefficients `fitted`, three a flow.
   */
  deviations(fitted: readonly number[], offset: number, out: number[]): void;
  /** The bubbles' amounts at the end, member * species + k. */
  readonly amount: readonly number[];
  /** When each vanished, s after the start (Infinity: it lives), and with how much, mol, member * species + k. */
  readonly goneAt: readonly number[];
  readonly goneAmount: readonly number[];
  /** What had no neighbour to go to, mol a species. */
  readonly dropped: readonly number[];
  /** Writes the bubbles' amounts at tau after the start into `out`, member * species + k. */
  amountsAt(tau: number, out: number[]): void;
}

const balance = new Float64Array(3);
const { stages: STAGES, rows: ROWS, nodes: TIMES, errorWeights } = TSIT5;
const [b0, b1, b2, b3, b4, b5] = ROWS[6];
const [e0, e1, e2, e3, e4, e5, e6] = errorWeights;
type Seven = [number[], number[], number[], number[], number[], number[], number[]];

/** A lone bubble that would vanish within this many times the step, did it go on as it does, is tried along its radius. */
const NEAR_ITS_END = 1.3;

export function createCluster(
  system: NetworkSystem,
  adjacency: Adjacency,
  linkOpen: readonly Uint8Array[],
  alive: Uint8Array,
  vanishRadius: number,
  tolerance: number,
): Cluster {
  const { state } = system;
  const species = state.species;
  const vanishArea = vanishRadius * vanishRadius;
  const accuracy = 0.1 * tolerance;
  const bubbles = createDyingBubbles(system, adjacency, linkOpen, alive);
  const { width, outerMember, receivers, goneAt, goneAmount, dropped } = bubbles;
  const trace = createDyingTrace();
  let count = 0;
  let outer = 0;
  let quadratures = 0;
  let dimension = 0;

  const initial: number[] = []; // z at the start
  const initialAmount: number[] = [];
  const amount: number[] = []; // n_k of each member at the end
  const z: number[] = [];
  const trial: number[] = [];
  const stages: number[][] = Array.from({ length: STAGES }, () => []);
  const shown: number[] = [];
  const moved: number[] = [];
  const startFlow: number[] = [];
  const endFlow: number[] = [];
  // What the flows had moved at the ends of the substeps.
  let marks = 0;
  const markTime: number[] = [];
  const markMoved: number[] = [];
  /** s; how long the first member would live at its present pace. */
  let initialLife = 0;

  /**
   * One substep of Tsitouras' pair from z, with slopes in stages[0]; the result in `trial`, its slopes in the last stage.
   * @param radius NaN to go along time from tau; else to go along the radius from there, z[0] being time
   * @returns the error norm
   */
  function attempt(tau: number, radius: number, h: number): number {
    for (let s = 1; s < STAGES; s++) {
      const row = ROWS[s]!;
      // Rates do not depend on what the links have moved: those are added up at the end alone.
      for (let d = 0; d < quadratures; d++) {
        let sum = 0;
        for (let r = 0; r < s; r++) sum += row[r]! * stages[r]![d]!;
        trial[d] = z[d]! + h * sum;
      }
      const ahead = TIMES[s]! * h;
      if (
        radius !== radius
          ? !bubbles.rates(tau + ahead, trial, stages[s]!)
          : !slopesAlongRadius(radius + ahead, trial, stages[s]!)
      ) {
        return Infinity;
      }
    }
    const [s0, s1, s2, s3, s4, s5, s6] = stages as Seven;
    for (let d = quadratures; d < dimension; d++) {
      const sum = b0 * s0[d]! + b1 * s1[d]! + b2 * s2[d]! + b3 * s3[d]! + b4 * s4[d]! + b5 * s5[d]!;
      trial[d] = z[d]! + h * sum;
    }
    let worst = 0;
    for (let d = 0; d < dimension; d++) {
      const e = e0 * s0[d]! + e1 * s1[d]! + e2 * s2[d]! + e3 * s3[d]! + e4 * s4[d]! + e5 * s5[d]! + e6 * s6[d]!;
      let size = 1;
      if (d >= quadratures) {
        const link = species === 1 ? d - quadratures : Math.floor((d - quadratures) / species);
        size = initialAmount[outerMember[link]! * species]! * 10;
      } else if (width === 1 || d % width === 0) size = radius !== radius ? initial[d]! : initialLife;
      const ratio = Math.abs(h * e) / (accuracy * size);
      if (!(ratio <= worst)) worst = ratio;
    }
    return worst;
  }

  /** dz/dR of a lone bubble whose z[0] holds the time: dt/dR, and the rest by it. False where it does not shrink. */
  function slopesAlongRadius(R: number, at: number[], out: number[]): boolean {
    const tau = at[0]!;
    at[0] = R * R;
    const found = bubbles.rates(tau, at, out);
    at[0] = tau;
    if (!found || !(out[0]! < 0)) return false;
    const timeSlope = (2 * R) / out[0]!;
    out[0] = timeSlope;
    for (let d = 1; d < dimension; d++) out[d]! *= timeSlope;
    return true;
  }

  /**
   * The whole rest of a lone bubble's life, along its radius: t(R) is smooth down to the end, where R(t) is not, and the end
   * needs no search. False, with nothing done, where it outlives the step or does not shrink all the way.
   */
  function fallAlongRadius(h: number): boolean {
    let R = Math.sqrt(z[0]!);
    z[0] = 0;
    let step = vanishRadius - R;
    let lived = slopesAlongRadius(R, z, stages[0]!);
    while (lived && R > vanishRadius) {
      if (R + 1.01 * step < vanishRadius) step = vanishRadius - R;
      const norm = attempt(NaN, R, step);
      if (!(norm <= 1)) {
        step *= norm === Infinity || Number.isNaN(norm) ? 0.3 : Math.max(0.2, 0.9 * Math.pow(norm, -0.2));
        lived = -step > 1e-12 * R;
        continue;
      }
      if (trial[0]! > h) lived = false;
      trace.add(z[0], trial[0]!, R, step, z, stages, quadratures);
      R += step;
      if (R - vanishRadius < 1e-12 * R) R = vanishRadius;
      accept();
      mark(z[0]);
      step *= norm > 0 ? Math.min(5, 0.9 * Math.pow(norm, -0.2)) : 5;
    }
    if (!lived) {
      marks = 0;
      trace.clear();
      restart();
      bubbles.rates(0, z, stages[0]!);
      return false;
    }
    const tau = z[0];
    z[0] = vanishArea;
    bubbles.handOver(0, tau, z);
    return true;
  }

  function mark(tau: number): void {
    markTime[marks] = tau;
    const base = marks * outer * species;
    for (let q = 0; q < outer * species; q++) markMoved[base + q] = z[quadratures + q]!;
    marks++;
  }

  function accept(): void {
    for (let d = 0; d < dimension; d++) {
      z[d] = trial[d]!;
      stages[0]![d] = stages[STAGES - 1]![d]!;
    }
  }

  function restart(): void {
    for (let d = 0; d < quadratures; d++) z[d] = initial[d]!;
    for (let d = quadratures; d < dimension; d++) z[d] = 0;
  }

  /** All members along time, to the end of the step. */
  function fallAlongTime(h: number): void {
    let tau = 0;
    let step = h;
    while (tau < h) {
      // Never past the end, nor far past the first vanishing.
      let longest = h - tau;
      for (let m = 0; m < count; m++) {
        const fall = -stages[0]![m * width]!;
        if (goneAt[m] !== Infinity || !(fall > 0)) continue;
        const s = z[m * width]!;
        longest = Math.min(longest, Math.min((0.9 * s) / fall, (1.02 * (s - vanishArea)) / fall + 1e-9 * h));
      }
      step = Math.min(step, longest);
      if (h - tau - step < 1e-12 * h) step = h - tau;
      let norm = attempt(tau, NaN, step);
      while (!(norm <= 1)) {
        step *= norm === Infinity || Number.isNaN(norm) ? 0.3 : Math.max(0.2, 0.9 * Math.pow(norm, -0.2));
        if (!(step > 1e-14 * h)) {
          // Outside the laws, where the neighbours are thought to go: no number may come of it, and the step is made shorter.
          z.fill(NaN, 0, dimension);
          stages[0]!.fill(NaN, 0, dimension);
          return;
        }
        norm = attempt(tau, NaN, step);
      }
      // Land on the first vanishing inside this substep: secant steps on s(step) - s_v.
      let first = -1;
      for (let m = 0; m < count; m++) {
        if (
          goneAt[m] === Infinity &&
          trial[m * width]! <= vanishArea &&
          (first < 0 || trial[m * width]! < trial[first * width]!)
        )
          first = m;
      }
      if (first >= 0) {
        for (let pass = 0; pass < 8; pass++) {
          const miss = trial[first * width]! - vanishArea;
          if (Math.abs(miss) < 1e-10 * vanishArea) break;
          step -= miss / stages[STAGES - 1]![first * width]!;
          attempt(tau, NaN, step);
        }
      }
      const end = h - tau - step < 1e-12 * h ? h : tau + step;
      trace.add(tau, end, NaN, step, z, stages, quadratures);
      accept();
      tau = end;
      mark(tau);
      let handed = false;
      for (let m = 0; m < count; m++) {
        if (goneAt[m] === Infinity && z[m * width]! <= vanishArea * (1 + 1e-8)) {
          bubbles.handOver(m, tau, z);
          handed = true;
        }
      }
      if (handed) bubbles.rates(tau, z, stages[0]!);
      step *= norm > 0 ? Math.min(5, 0.9 * Math.pow(norm, -0.2)) : 5;
    }
  }

  return {
    receivers,
    moved,
    startFlow,
    endFlow,
    amount,
    goneAt,
    goneAmount,
    dropped,
    get flows() {
      return outer * species;
    },

    take(group, radius, amounts, offset) {
      bubbles.assign(group);
      ({ count, outer, quadratures, dimension } = bubbles);
      for (let m = 0; m < count; m++) {
        const R = radius[group[m]!]!;
        initial[m * width] = R * R;
        let whole = 0;
        for (let k = 0; k < species; k++) {
          whole += initialAmount[m * species + k] = amounts[offset + m * species + k]!;
        }
        for (let k = 0; species > 1 && k < species; k++) {
          initial[m * width + 1 + k] = initialAmount[m * species + k]! / whole;
        }
      }
    },

    integrate(t, h, ambient, surroundings) {
      bubbles.begin(t, ambient, surroundings);
      trace.clear();
      marks = 0;
      restart();
      bubbles.rates(0, z, stages[0]!);
      for (let q = 0; q < outer * species; q++) startFlow[q] = stages[0]![quadratures + q]!;
      const fall = -stages[0]![0]!;
      initialLife = fall > 0 ? (initial[0]! - vanishArea) / fall : Infinity;
      if (!(count === 1 && initialLife < NEAR_ITS_END * h && fallAlongRadius(h))) fallAlongTime(h);
      for (let q = 0; q < outer * species; q++) {
        moved[q] = z[quadratures + q]!;
        endFlow[q] = count === 1 && goneAt[0] !== Infinity ? 0 : stages[0]![quadratures + q]!;
      }
      for (let m = 0; m < count; m++) {
        if (goneAt[m] === Infinity) amountOf(m, z, amount);
        else for (let k = 0; k < species; k++) amount[m * species + k] = 0;
      }
      close();
    },

    deviations(fitted, offset, out) {
      for (let q = 0; q < outer * species; q++) {
        const [a, b, c] = [fitted[offset + 3 * q]!, fitted[offset + 3 * q + 1]!, fitted[offset + 3 * q + 2]!];
        let worst = 0;
        for (let mark = 0; mark < marks; mark++) {
          const tau = markTime[mark]!;
          const brought = tau * (a + tau * (b / 2 + (tau * c) / 3));
          worst = Math.max(worst, Math.abs(markMoved[mark * outer * species + q]! - brought));
        }
        out[q] = worst;
      }
    },

    amountsAt(tau, out) {
      trace.read(tau, shown);
      for (let m = 0; m < count; m++) {
        shown[m * width] = Math.max(shown[m * width]!, vanishArea);
        if (goneAt[m]! > tau) amountOf(m, shown, out);
        else for (let k = 0; k < species; k++) out[m * species + k] = 0;
      }
    },
  };

  /** The amounts of member m that z tells of. */
  function amountOf(m: number, from: readonly number[], out: number[]): void {
    bubbles.amountsAt(m, Math.sqrt(from[m * width]!), balance);
    for (let k = 0; k < species; k++) {
      out[m * species + k] = balance[0]! * (species === 1 ? 1 : from[m * width + 1 + k]!);
    }
  }

  /** Makes what the links moved equal what the bubbles lost, to rounding: the quadratures carry the integration's own error. */
  function close(): void {
    for (let k = 0; k < species; k++) {
      let lost = -dropped[k]!;
      for (let m = 0; m < count; m++) lost += initialAmount[m * species + k]! - amount[m * species + k]!;
      let sum = 0;
      let largest = 0;
      for (let e = 0; e < outer; e++) {
        const q = e * species + k;
        sum += moved[q]!;
        if (Math.abs(moved[q]!) > Math.abs(moved[largest * species + k]!)) largest = e;
      }
      if (outer > 0) moved[largest * species + k]! += lost - sum;
    }
  }
}

/**
 * A few dying bubbles that touch one another, integrated apart from the network over one step.
 * Unknowns: s = R^2 of each (and its mole fractions where there are several species), and what each of its outer links has moved.
 * A bubble's amount and pressure are explicit in R, so nothing is solved inside; ds/dt = 2 R n_dot/(dn/dR).
 */
import { TSIT5 } from '../integrate/tableaus/tsit5.ts';
import { amountAndSlopeAtSize } from '../network/shaped.ts';
import { GAS_CONSTANT } from '../quantities/constants.ts';
import type { Adjacency } from './adjacency.ts';
import type { Vanishing } from './carried.ts';
import type { NetworkSystem, SourceTerms } from './system.ts';

/** What the neighbours show, as functions of time: their states now, one step before, and (once known) at the end of the step. */
export interface Surroundings {
  readonly now: NodeView;
  readonly past: NodeView;
  readonly next: NodeView;
  readonly pastStep: number; // 0 where there is no past
  readonly step: number; // 0 where the end is not known yet
}

export interface NodeView {
  readonly partial: Float64Array;
  readonly radius: Float64Array;
}

export interface Cluster {
  /** Unknowns of the network that this cluster's gas goes to (may repeat). */
  readonly receivers: readonly number[];
  /** Takes its bubbles and links; the object is used again for step after step. */
  assign(group: readonly number[]): void;
  /** Starts from the network's state: amounts y, radii as in the node state. */
  load(y: Float64Array): void;
  integrate(t: number, h: number, ambient: number, surroundings: Surroundings): void;
  /** Adds the outer flows of the last pass to the sources, as quadratics over [0, h] with the same total. */
  fit(h: number, sources: SourceTerms): void;
  /** Adds (moved in the last pass - moved by the fitted sources) to `out`, per unknown. */
  addMisplaced(out: Float64Array): void;
  addLosses(start: number, vanished: Vanishing[]): void;
  /** Puts the bubbles' node states to the end of the step. */
  showEnd(): void;
  /** Moves the bubbles' own amounts to the end of the step. */
  finish(y: Float64Array, adjust: (unknown: number, delta: number) => void, dropped: Float64Array): void;
  /** Turns the main system's dense output at tau after the start into the whole state. */
  complete(tau: number, y: Float64Array): void;
}

const balance = new Float64Array(3);
const STAGES = TSIT5.stages;

export function createCluster(
  system: NetworkSystem,
  adjacency: Adjacency,
  linkOpen: readonly Uint8Array[],
  alive: Uint8Array,
  vanishRadius: number,
  tolerance: number,
): Cluster {
  const { network, state, groups } = system;
  const { nodes, films } = network;
  const species = state.species;
  const width = species === 1 ? 1 : 1 + species;
  const vanishArea = vanishRadius * vanishRadius;
  const flow = new Float64Array(species);
  const accuracy = 0.1 * tolerance;

  let members: readonly number[] = [];
  let count = 0;
  // Links, by the place of their bubble in `members`: outer ones lead to the network, inner ones to another member.
  const outerMember: number[] = [];
  const outerEntry: number[] = [];
  const innerFrom: number[] = [];
  const innerTo: number[] = [];
  const innerEntry: number[] = [];
  const receivers: number[] = [];
  let outer = 0;
  let dimension = 0;
  let quadratures = 0; // offset of the first, = count * width

  const initial: number[] = []; // z at the start
  const initialAmount: number[] = [];
  const amount: number[] = []; // n_k of each member at the end
  const goneAt: number[] = [];
  const goneAmount: number[] = [];
  const droppedHere: number[] = [];
  const z: number[] = [];
  const trial: number[] = [];
  const stages: number[][] = Array.from({ length: STAGES }, () => []);
  const moved: number[] = [];
  const startFlow: number[] = [];
  const endFlow: number[] = [];
  const fitted: number[] = []; // 3 numbers an outer flow
  const predicted: number[] = [];
  // Accepted substeps of the last pass: time, then z and dz/dt of the members.
  const recordTime: number[] = [];
  const recordValue: number[] = [];
  const recordSlope: number[] = [];
  let records = 0;
  // Slopes of amount against radius, and amounts, of the last evaluation.
  const amountSlope: number[] = [];
  const wholeAmount: number[] = [];
  let ambientPressure = 0;
  let around: Surroundings | null = null;
  let startTime = 0;

  /** The state that node j shows at time tau after the start, written into the node state for the link kernels to read. */
  function show(j: number, tau: number): void {
    const { now, past, next, pastStep, step } = around!;
    for (let q = j * species; q < (j + 1) * species; q++) {
      state.partial[q] = course(now.partial[q]!, past.partial[q]!, next.partial[q]!, pastStep, step, tau);
    }
    if (now.radius[j] !== Infinity) {
      state.radius[j] = course(now.radius[j]!, past.radius[j]!, next.radius[j]!, pastStep, step, tau);
    }
  }

  function amountsAt(m: number, R: number): void {
    const i = members[m]!;
    if (films[nodes.film[i]!]!.constantTension) {
      // n = c' (P R + g) R^2, dn/dR = c' R (3 P R + 2 g), p = P + g/R (see network/sphere.ts)
      const P = ambientPressure + nodes.head[i]!;
      const g = 2 * nodes.faces[i]! * state.tension[i]!;
      const c = (4 * Math.PI) / (3 * GAS_CONSTANT * network.temperature);
      balance[0] = c * (P * R + g) * R * R;
      balance[1] = c * R * (3 * P * R + 2 * g);
      balance[2] = P + g / R;
    } else {
      amountAndSlopeAtSize(state, i, ambientPressure, R, balance);
    }
  }

  /** dz/dt; false where a radius is no number (the substep was too long). */
  function rates(tau: number, at: number[], out: number[]): boolean {
    for (let m = 0; m < count; m++) {
      for (let w = 0; w < width; w++) out[m * width + w] = 0;
      if (goneAt[m] !== Infinity) continue;
      const s = at[m * width]!;
      if (!(s > 0)) return false;
      const i = members[m]!;
      const R = Math.sqrt(s);
      amountsAt(m, R);
      wholeAmount[m] = balance[0]!;
      amountSlope[m] = balance[1]!;
      state.radius[i] = R;
      if (species === 1) state.partial[i] = balance[2]!;
      else for (let k = 0; k < species; k++) state.partial[i * species + k] = balance[2]! * at[m * width + 1 + k]!;
    }
    for (let e = 0; e < outer; e++) {
      const m = outerMember[e]!;
      const base = quadratures + e * species;
      if (goneAt[m] !== Infinity) {
        for (let k = 0; k < species; k++) out[base + k] = 0;
        continue;
      }
      const entry = outerEntry[e]!;
      const j = adjacency.other[entry]!;
      show(j, tau);
      const { group, kernel } = groups[adjacency.group[entry]!]!;
      const link = adjacency.link[entry]!;
      kernel.flow(group, link, state, startTime + tau, flow);
      const outward = group.table.from[link] === members[m] ? 1 : -1;
      for (let k = 0; k < species; k++) {
        const q = outward * flow[k]!;
        out[base + k] = q;
        out[m * width + (species === 1 ? 0 : 1 + k)]! -= q;
      }
    }
    for (let e = 0; e < innerEntry.length; e++) {
      const a = innerFrom[e]!;
      const b = innerTo[e]!;
      if (goneAt[a] !== Infinity || goneAt[b] !== Infinity) continue;
      const entry = innerEntry[e]!;
      const { group, kernel } = groups[adjacency.group[entry]!]!;
      const link = adjacency.link[entry]!;
      kernel.flow(group, link, state, startTime + tau, flow);
      const outward = group.table.from[link] === members[a] ? 1 : -1;
      for (let k = 0; k < species; k++) {
        const w = species === 1 ? 0 : 1 + k;
        out[a * width + w]! -= outward * flow[k]!;
        out[b * width + w]! += outward * flow[k]!;
      }
    }
    // So far each member's places hold n_dot_k: turn them into ds/dt and dx_k/dt.
    for (let m = 0; m < count; m++) {
      if (goneAt[m] !== Infinity) continue;
      let total = 0;
      if (species === 1) {
        total = out[m]!;
      } else {
        for (let k = 0; k < species; k++) total += out[m * width + 1 + k]!;
        for (let k = 0; k < species; k++) {
          out[m * width + 1 + k] = (out[m * width + 1 + k]! - at[m * width + 1 + k]! * total) / wholeAmount[m]!;
        }
      }
      out[m * width] = (2 * Math.sqrt(at[m * width]!) * total) / amountSlope[m]!;
    }
    return true;
  }

  /** One substep from z, with rates in stages[0]; the result in `trial`, its rates in the last stage; returns the error norm. */
  function attempt(tau: number, h: number): number {
    const { rows, nodes: times, errorWeights } = TSIT5;
    for (let s = 1; s < STAGES; s++) {
      const row = rows[s]!;
      for (let d = 0; d < dimension; d++) {
        let sum = 0;
        for (let r = 0; r < s; r++) sum += row[r]! * stages[r]![d]!;
        trial[d] = z[d]! + h * sum;
      }
      if (!rates(tau + times[s]! * h, trial, stages[s]!)) return Infinity;
    }
    let worst = 0;
    for (let d = 0; d < dimension; d++) {
      let e = 0;
      for (let s = 0; s < STAGES; s++) e += errorWeights[s]! * stages[s]![d]!;
      let size: number;
      if (d >= quadratures) size = initialAmount[outerMember[Math.floor((d - quadratures) / species)]! * species]! * 10;
      else if (d % width === 0) size = initial[d]!;
      else size = 1;
      const ratio = Math.abs(h * e) / (accuracy * size);
      if (!(ratio <= worst)) worst = ratio;
    }
    return worst;
  }

  function record(tau: number): void {
    recordTime[records] = tau;
    const base = records * quadratures;
    for (let d = 0; d < quadratures; d++) {
      recordValue[base + d] = z[d]!;
      recordSlope[base + d] = stages[0]![d]!;
    }
    records++;
  }

  /** The rest of member m goes in equal parts to what its open links lead to. */
  function handOver(m: number, tau: number): void {
    const i = members[m]!;
    amountsAt(m, Math.sqrt(z[m * width]!));
    const rest = balance[0]!;
    goneAt[m] = tau;
    goneAmount[m] = rest;
    let parts = 0;
    for (let e = 0; e < outer; e++) if (outerMember[e] === m) parts++;
    for (let e = 0; e < innerEntry.length; e++) if (innerOther(e, m) >= 0) parts++;
    for (let k = 0; k < species; k++) {
      const share = rest * (species === 1 ? 1 : z[m * width + 1 + k]!);
      if (parts === 0) droppedHere[k]! += share;
      for (let e = 0; e < outer; e++) if (outerMember[e] === m) z[quadratures + e * species + k]! += share / parts;
    }
    for (let e = 0; e < innerEntry.length; e++) {
      const other = innerOther(e, m);
      if (other >= 0) receive(other, m, rest / parts);
    }
    state.radius[i] = 0;
    z[m * width] = 0;
  }

  function innerOther(e: number, m: number): number {
    const other = innerFrom[e] === m ? innerTo[e]! : innerTo[e] === m ? innerFrom[e]! : -1;
    return other >= 0 && goneAt[other] === Infinity ? other : -1;
  }

  /** Member m takes in `gain` mol of the composition of member `from`: its new radius from its own balance, by Newton. */
  function receive(m: number, from: number, gain: number): void {
    let R = Math.sqrt(z[m * width]!);
    amountsAt(m, R);
    const before = balance[0]!;
    const target = before + gain;
    for (let pass = 0; pass < 50; pass++) {
      amountsAt(m, R);
      const step = (balance[0]! - target) / balance[1]!;
      R -= step;
      if (Math.abs(step) < 1e-15 * R) break;
    }
    z[m * width] = R * R;
    for (let k = 0; species > 1 && k < species; k++) {
      const at = m * width + 1 + k;
      z[at] = (z[at]! * before + z[from * width + 1 + k]! * gain) / target;
    }
  }

  return {
    receivers,

    assign(group) {
      members = group;
      count = group.length;
      outerMember.length = outerEntry.length = innerFrom.length = innerTo.length = innerEntry.length = receivers.length = 0;
      for (let m = 0; m < count; m++) {
        const i = group[m]!;
        for (let e = adjacency.start[i]!; e < adjacency.start[i + 1]!; e++) {
          if (linkOpen[adjacency.group[e]!]![adjacency.link[e]!] === 0) continue;
          const j = adjacency.other[e]!;
          if (alive[j] === 0) continue;
          const other = count === 1 ? -1 : group.indexOf(j);
          if (other < 0) {
            outerMember.push(m);
            outerEntry.push(e);
            for (let k = 0; k < species; k++) receivers.push(j * species + k);
          } else if (m < other) {
            innerFrom.push(m);
            innerTo.push(other);
            innerEntry.push(e);
          }
        }
      }
      outer = outerEntry.length;
      quadratures = count * width;
      dimension = quadratures + outer * species;
    },

    load(y) {
      for (let m = 0; m < count; m++) {
        const i = members[m]!;
        initial[m * width] = state.radius[i]! * state.radius[i]!;
        let whole = 0;
        for (let k = 0; k < species; k++) whole += initialAmount[m * species + k] = y[i * species + k]!;
        for (let k = 0; species > 1 && k < species; k++) initial[m * width + 1 + k] = y[i * species + k]! / whole;
      }
    },

    integrate(t, h, ambient, surroundings) {
      ambientPressure = ambient;
      around = surroundings;
      startTime = t;
      records = 0;
      for (let d = 0; d < quadratures; d++) z[d] = initial[d]!;
      for (let d = quadratures; d < dimension; d++) z[d] = 0;
      for (let m = 0; m < count; m++) {
        goneAt[m] = Infinity;
        goneAmount[m] = 0;
      }
      for (let k = 0; k < species; k++) droppedHere[k] = 0;
      rates(0, z, stages[0]!);
      for (let q = 0; q < outer * species; q++) startFlow[q] = stages[0]![quadratures + q]!;
      record(0);
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
        let norm = attempt(tau, step);
        while (!(norm <= 1)) {
          step *= norm === Infinity || Number.isNaN(norm) ? 0.3 : Math.max(0.2, 0.9 * Math.pow(norm, -0.2));
          if (!(step > 1e-14 * h)) throw new Error('a dying bubble could not be followed to its end');
          norm = attempt(tau, step);
        }
        // Land on the first vanishing inside this substep: secant steps on s(step) - s_v.
        let first = -1;
        for (let m = 0; m < count; m++) {
          if (goneAt[m] === Infinity && trial[m * width]! <= vanishArea && (first < 0 || trial[m * width]! < trial[first * width]!)) first = m;
        }
        if (first >= 0) {
          for (let pass = 0; pass < 8; pass++) {
            const miss = trial[first * width]! - vanishArea;
            if (Math.abs(miss) < 1e-10 * vanishArea) break;
            step -= miss / stages[STAGES - 1]![first * width]!;
            attempt(tau, step);
          }
        }
        for (let d = 0; d < dimension; d++) {
          z[d] = trial[d]!;
          stages[0]![d] = stages[STAGES - 1]![d]!;
        }
        tau += step;
        if (h - tau < 1e-12 * h) tau = h;
        record(tau);
        let handed = false;
        for (let m = 0; m < count; m++) {
          if (goneAt[m] === Infinity && z[m * width]! <= vanishArea * (1 + 1e-8)) {
            handOver(m, tau);
            handed = true;
          }
        }
        if (handed) {
          rates(tau, z, stages[0]!);
          record(tau);
        }
        step *= norm > 0 ? Math.min(5, 0.9 * Math.pow(norm, -0.2)) : 5;
      }
      for (let q = 0; q < outer * species; q++) {
        moved[q] = z[quadratures + q]!;
        endFlow[q] = stages[0]![quadratures + q]!;
      }
      for (let m = 0; m < count; m++) {
        const gone = goneAt[m] !== Infinity;
        if (!gone) amountsAt(m, Math.sqrt(z[m * width]!));
        for (let k = 0; k < species; k++) {
          amount[m * species + k] = gone ? 0 : balance[0]! * (species === 1 ? 1 : z[m * width + 1 + k]!);
        }
      }
      close();
    },

    fit(h, sources) {
      for (let q = 0; q < outer * species; q++) {
        const u = receivers[q]!;
        const a = startFlow[q]!;
        // q(tau) = a + b tau + c tau^2 with q(h) = endFlow and integral = moved.
        const A = moved[q]! / h - a;
        const B = endFlow[q]! - a;
        const c = (-6 * (A - 0.5 * B)) / (h * h);
        const b = (B - c * h * h) / h;
        fitted[3 * q] = a;
        fitted[3 * q + 1] = b;
        fitted[3 * q + 2] = c;
        predicted[q] = moved[q]!;
        let place = sources.place[u]!;
        if (place < 0) {
          place = sources.count++;
          sources.place[u] = place;
          sources.unknown[place] = u;
          sources.coefficients.fill(0, 3 * place, 3 * place + 3);
        }
        sources.coefficients[3 * place]! += a;
        sources.coefficients[3 * place + 1]! += b;
        sources.coefficients[3 * place + 2]! += c;
      }
    },

    addMisplaced(out) {
      for (let q = 0; q < outer * species; q++) out[receivers[q]!]! += moved[q]! - predicted[q]!;
    },

    addLosses(start, vanished) {
      for (let m = 0; m < count; m++) {
        if (goneAt[m] === Infinity) continue;
        vanished.push({ node: members[m]!, time: start + goneAt[m]!, amount: goneAmount[m]! });
      }
    },

    showEnd() {
      for (let m = 0; m < count; m++) {
        const i = members[m]!;
        if (goneAt[m] !== Infinity) {
          state.radius[i] = 0;
          continue;
        }
        const R = Math.sqrt(z[m * width]!);
        amountsAt(m, R);
        state.radius[i] = state.size[i] = R;
        state.pressure[i] = balance[2]!;
        state.sizeSlope[i] = 1 / balance[1]!;
        state.lastAmount[i] = balance[0]!;
        for (let k = 0; species > 1 && k < species; k++) state.partial[i * species + k] = balance[2]! * z[m * width + 1 + k]!;
      }
    },

    finish(y, adjust, dropped) {
      for (let m = 0; m < count; m++) {
        const i = members[m]!;
        for (let k = 0; k < species; k++) adjust(i * species + k, amount[m * species + k]! - y[i * species + k]!);
      }
      for (let k = 0; k < species; k++) dropped[k]! += droppedHere[k]!;
    },

    complete(tau, y) {
      // The record that tau lies behind.
      let r = 0;
      while (r + 2 < records && recordTime[r + 1]! <= tau) r++;
      const t0 = recordTime[r]!;
      const h = recordTime[r + 1]! - t0;
      const x = h > 0 ? Math.min(1, (tau - t0) / h) : 1;
      let lost = 0;
      let lostAtEnd = 0;
      for (let m = 0; m < count; m++) {
        const i = members[m]!;
        const gone = goneAt[m]! <= tau;
        if (!gone) amountsAt(m, Math.sqrt(Math.max(hermite(r, m * width, x, h), vanishArea)));
        for (let k = 0; k < species; k++) {
          const now = gone ? 0 : balance[0]! * (species === 1 ? 1 : hermite(r, m * width + 1 + k, x, h));
          lost += initialAmount[m * species + k]! - now;
          lostAtEnd += initialAmount[m * species + k]! - amount[m * species + k]!;
          y[i * species + k] = now;
        }
      }
      // Gas on its way: each outer link has moved the same share of its total as the cluster has lost of its own.
      const share = lostAtEnd === 0 ? 0 : lost / lostAtEnd;
      for (let k = 0; k < species; k++) {
        let closing = 0;
        for (let m = 0; m < count; m++) closing += initialAmount[m * species + k]! - y[members[m]! * species + k]!;
        for (let e = 0; e < outer; e++) {
          const q = e * species + k;
          const arrived = e === outer - 1 && droppedHere[k] === 0 ? closing : share * moved[q]!;
          closing -= arrived;
          y[receivers[q]!]! += arrived - tau * (fitted[3 * q]! + tau * (fitted[3 * q + 1]! / 2 + (tau * fitted[3 * q + 2]!) / 3));
        }
      }
    },
  };

  function hermite(r: number, d: number, x: number, h: number): number {
    const a = recordValue[r * quadratures + d]!;
    const b = recordValue[(r + 1) * quadratures + d]!;
    const fa = recordSlope[r * quadratures + d]! * h;
    const fb = recordSlope[(r + 1) * quadratures + d]! * h;
    const u = 1 - x;
    return u * a + x * b + x * u * (u * (fa - (b - a)) - x * (fb - (b - a)));
  }

  /** Makes what the links moved equal what the bubbles lost, to rounding: the quadratures carry the integration's own error. */
  function close(): void {
    for (let k = 0; k < species; k++) {
      let lost = -droppedHere[k]!;
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

/**
 * Course of a neighbour's quantity: the parabola through its values one step before, now and at the step's end;
 * the straight line where one of them is not known.
 */
function course(now: number, past: number, next: number, pastStep: number, step: number, tau: number): number {
  if (step === 0) return pastStep === 0 ? now : now + ((now - past) / pastStep) * tau;
  const slope = (next - now) / step;
  if (pastStep === 0) return now + slope * tau;
  const bend = (slope - (now - past) / pastStep) / (step + pastStep);
  return now + tau * (slope + bend * (tau - step));
}

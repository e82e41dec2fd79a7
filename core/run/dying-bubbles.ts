/**
 * The laws of a few dying bubbles that touch one another, seen apart from the network: who they are, what leads out of them, what
 * their neighbours show meanwhile, and how fast everything changes.
 * Unknowns z: s = R^2 of each (and its mole fractions where there are several species), then what each outer link has moved.
 * A bubble's amount and pressure are explicit in R, so nothing is solved inside; ds/dt = 2 R n_dot/(dn/dR).
 */
import { amountAndSlopeAtSize } from '../network/shaped.ts';
import { GAS_CONSTANT } from '../quantities/constants.ts';
import type { Adjacency } from './adjacency.ts';
import type { NetworkSystem } from './system.ts';

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

export interface DyingBubbles {
  /** Unknowns a bubble: s, and with several species its mole fractions. */
  readonly width: number;
  readonly members: readonly number[];
  readonly count: number;
  /** Links that lead out of the group; each moves every species. */
  readonly outer: number;
  /** The member at the near end of each of them. */
  readonly outerMember: readonly number[];
  /** The network's unknown that each outer flow goes to (they may repeat). */
  readonly receivers: readonly number[];
  /** Where in z the moved amounts begin, and the length of z. */
  readonly quadratures: number;
  readonly dimension: number;
  /** When each member vanished, s after the start (Infinity while it lives), and with how much, mol, member * species + k. */
  readonly goneAt: number[];
  readonly goneAmount: number[];
  /** What had no neighbour to go to, mol a species. */
  readonly dropped: number[];
  /** Takes its bubbles and links; the object is used again for step after step. */
  assign(group: readonly number[]): void;
  /** A pass over a step begins: all live, and the neighbours follow these courses. */
  begin(startTime: number, ambient: number, surroundings: Surroundings): void;
  /** dz/dt; false where a radius is no number (the substep was too long). */
  rates(tau: number, at: readonly number[], out: number[]): boolean;
  /** Amount, its slope against R, and pressure of member m at radius R, into `out`. */
  amountsAt(m: number, R: number, out: Float64Array): void;
  /** Member m vanishes at tau: its rest goes in equal parts to what its open links lead to. Changes z. */
  handOver(m: number, tau: number, z: number[]): void;
}

const balance = new Float64Array(3);

export function createDyingBubbles(
  system: NetworkSystem,
  adjacency: Adjacency,
  linkOpen: readonly Uint8Array[],
  alive: Uint8Array,
): DyingBubbles {
  const { network, state, groups } = system;
  const { nodes, films } = network;
  const species = state.species;
  const width = species === 1 ? 1 : 1 + species;
  const flow = new Float64Array(species);

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
  let quadratures = 0;

  const goneAt: number[] = [];
  const goneAmount: number[] = [];
  const dropped: number[] = [];
  // Slopes of amount against radius, and amounts, of the last evaluation.
  const amountSlope: number[] = [];
  const wholeAmount: number[] = [];
  const courses: number[] = []; // 3 coefficients a quantity
  let ambientPressure = 0;
  let startTime = 0;

  /** The parabolas that the neighbours follow in this pass: for each outer link its partial pressures, then its radius. */
  function prepareCourses(surroundings: Surroundings): void {
    const { now, past, next, pastStep, step } = surroundings;
    for (let e = 0; e < outer; e++) {
      const j = adjacency.other[outerEntry[e]!]!;
      const base = 3 * (species + 1) * e;
      for (let k = 0; k < species; k++) {
        const u = j * species + k;
        fitCourse(now.partial[u]!, past.partial[u]!, next.partial[u]!, pastStep, step, courses, base + 3 * k);
      }
      fitCourse(now.radius[j]!, past.radius[j]!, next.radius[j]!, pastStep, step, courses, base + 3 * species);
    }
  }

  /** The state that the far end of outer link e shows at time tau, written into the node state for the link kernels to read. */
  function show(e: number, tau: number): void {
    const j = adjacency.other[outerEntry[e]!]!;
    let at = 3 * (species + 1) * e;
    for (let k = 0; k < species; k++, at += 3) {
      state.partial[j * species + k] = courses[at]! + tau * (courses[at + 1]! + tau * courses[at + 2]!);
    }
    if (state.radius[j] !== Infinity) {
      state.radius[j] = courses[at]! + tau * (courses[at + 1]! + tau * courses[at + 2]!);
    }
  }

  function amountsAt(m: number, R: number, out: Float64Array): void {
    const i = members[m]!;
    if (films[nodes.film[i]!]!.constantTension) {
      // n = c' (P R + g) R^2, dn/dR = c' R (3 P R + 2 g), p = P + g/R (see network/sphere.ts)
      const P = ambientPressure + nodes.head[i]!;
      const g = 2 * nodes.faces[i]! * state.tension[i]!;
      const c = (4 * Math.PI) / (3 * GAS_CONSTANT * network.temperature);
      out[0] = c * (P * R + g) * R * R;
      out[1] = c * R * (3 * P * R + 2 * g);
      out[2] = P + g / R;
    } else {
      amountAndSlopeAtSize(state, i, ambientPressure, R, out);
    }
  }

  function rates(tau: number, at: readonly number[], out: number[]): boolean {
    for (let m = 0; m < count; m++) {
      for (let w = 0; w < width; w++) out[m * width + w] = 0;
      if (goneAt[m] !== Infinity) continue;
      const s = at[m * width]!;
      if (!(s > 0)) return false;
      const i = members[m]!;
      const R = Math.sqrt(s);
      amountsAt(m, R, balance);
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
      show(e, tau);
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

  function handOver(m: number, tau: number, z: number[]): void {
    const i = members[m]!;
    amountsAt(m, Math.sqrt(z[m * width]!), balance);
    const rest = balance[0]!;
    goneAt[m] = tau;
    let parts = 0;
    for (let e = 0; e < outer; e++) if (outerMember[e] === m) parts++;
    for (let e = 0; e < innerEntry.length; e++) if (innerOther(e, m) >= 0) parts++;
    for (let k = 0; k < species; k++) {
      const share = rest * (species === 1 ? 1 : z[m * width + 1 + k]!);
      goneAmount[m * species + k] = share;
      if (parts === 0) dropped[k]! += share;
      for (let e = 0; e < outer; e++) if (outerMember[e] === m) z[quadratures + e * species + k]! += share / parts;
    }
    for (let e = 0; e < innerEntry.length; e++) {
      const other = innerOther(e, m);
      if (other >= 0) receive(other, m, rest / parts, z);
    }
    state.radius[i] = 0;
    z[m * width] = 0;
  }

  function innerOther(e: number, m: number): number {
    const other = innerFrom[e] === m ? innerTo[e]! : innerTo[e] === m ? innerFrom[e]! : -1;
    return other >= 0 && goneAt[other] === Infinity ? other : -1;
  }

  /** Member m takes in `gain` mol of the composition of member `from`: its new radius from its own balance, by Newton. */
  function receive(m: number, from: number, gain: number, z: number[]): void {
    let R = Math.sqrt(z[m * width]!);
    amountsAt(m, R, balance);
    const before = balance[0]!;
    const target = before + gain;
    for (let pass = 0; pass < 50; pass++) {
      amountsAt(m, R, balance);
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
    width,
    receivers,
    outerMember,
    goneAt,
    goneAmount,
    dropped,
    rates,
    amountsAt,
    handOver,
    get members() {
      return members;
    },
    get count() {
      return count;
    },
    get outer() {
      return outer;
    },
    get quadratures() {
      return quadratures;
    },
    get dimension() {
      return quadratures + outer * species;
    },

    assign(group) {
      members = group;
      count = group.length;
      outerMember.length =
        outerEntry.length =
        innerFrom.length =
        innerTo.length =
        innerEntry.length =
        receivers.length =
          0;
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
    },

    begin(start, ambient, surroundings) {
      startTime = start;
      ambientPressure = ambient;
      prepareCourses(surroundings);
      for (let m = 0; m < count; m++) goneAt[m] = Infinity;
      for (let k = 0; k < species; k++) dropped[k] = 0;
    },
  };
}

/**
 * Course of a neighbour's quantity, as coefficients of 1, tau and tau^2 at `out[at]`: the parabola through its values one step
 * before, now and at the step's end; the straight line where one of them is not known.
 */
function fitCourse(
  now: number,
  past: number,
  next: number,
  pastStep: number,
  step: number,
  out: number[],
  at: number,
): void {
  let slope = 0;
  let bend = 0;
  if (step === 0) {
    if (pastStep !== 0) slope = (now - past) / pastStep;
  } else {
    slope = (next - now) / step;
    if (pastStep !== 0) {
      bend = (slope - (now - past) / pastStep) / (step + pastStep);
      slope -= bend * step;
    }
  }
  out[at] = now;
  out[at + 1] = slope;
  out[at + 2] = bend;
}

/**
 * Limits of validity of the laws (physics.md section 4): each is a measured value against the value up to which its law holds.
 * The run watches them and tells when one is exceeded; a check lists those exceeded at rest.
 */
import { BUBBLE } from '../network/network.ts';
import { faceArea } from '../network/geometry.ts';
import { GAS_CONSTANT } from '../quantities/constants.ts';
import { TUBE, tubeViscosity } from '../transfer/tube.ts';
import type { NetworkSystem } from './system.ts';

/** Laminar tube flow ends near this Reynolds number (common practice). */
const REYNOLDS = 2300;
/** Entrance length of laminar tube flow over diameter and Reynolds number (common practice). */
const ENTRANCE = 0.06;
/** Slip at the wall matters above this ratio of mean free path to bore (common practice). */
const KNUDSEN = 0.01;
/** Below this share of the isothermal speed of sound the flow's own inertia is small (common practice). */
const MACH = 0.3;
/** A film thinner than this is no liquid layer any more, m. */
const THINNEST_FILM = 5e-9;
/** Two spheres count as far apart while their radii add up to less than this share of their distance. */
const NEAREST_SPHERES = 0.5;

/** One bound that a law is good up to. */
export interface Bound {
  readonly unit: string;
  /** What is passed, in words. */
  readonly detail: string;
  /** The value at which the law ends; exceeded above it (`below` false) or below it. */
  readonly bound: number;
  readonly below: boolean;
}

/** The bounds of one bubble or one link, whose values are measured together. */
export interface Limits {
  readonly nodes: readonly number[];
  /** Index of the link in its group, and the group; null for a bubble. */
  readonly link: { readonly group: number; readonly index: number } | null;
  readonly bounds: readonly Bound[];
  /** Writes the values at time t, one a bound, from the present node state. */
  measure(t: number, out: Float64Array): void;
}

/** Most bounds that one thing has. */
export const MOST_BOUNDS = 4;

/** Signed distance past a bound, relative: positive where it is exceeded. */
export function excess(bound: Bound, value: number): number {
  const ratio = value / bound.bound - 1;
  return bound.below ? -ratio : ratio;
}

/** What a network can exceed. Things that can exceed nothing are not listed: beds have 10^5 bubbles and films. */
export function networkLimits(system: NetworkSystem): Limits[] {
  return [...bubbleLimits(system), ...linkLimits(system)];
}

function bubbleLimits(system: NetworkSystem): Limits[] {
  const { network, state } = system;
  const { nodes, films } = network;
  const all: Limits[] = [];
  for (let i = 0; i < nodes.bubbleCount; i++) {
    const film = films[nodes.film[i]!]!;
    const thins = nodes.liquid[i]! > 0;
    const bounds: Bound[] = [];
    if (!film.constantTension) {
      bounds.push({
        unit: 'N/m',
        detail: 'tension at or below a hundredth of the clean one: a real film buckles or collapses here',
        bound: 0.01 * film.cleanTension,
        below: true,
      });
    }
    if (thins) {
      bounds.push({
        unit: 'm',
        detail: 'film thinner than 5 nm: no liquid layer is left to carry surfactant, and surface forces rule',
        bound: THINNEST_FILM,
        below: true,
      });
    }
    if (bounds.length === 0) continue;
    all.push({
      nodes: [i],
      link: null,
      bounds,
      measure(_t, out) {
        let at = 0;
        if (!film.constantTension) out[at++] = state.tension[i]!;
        if (thins) out[at] = (2 * nodes.liquid[i]!) / faceArea(nodes.mouth[i]!, state.size[i]!);
      },
    });
  }
  return all;
}

function linkLimits(system: NetworkSystem): Limits[] {
  const all: Limits[] = [];
  system.groups.forEach(({ group }, g) => {
    const { table } = group;
    for (let l = 0; l < table.count; l++) {
      const limits = limitsOf(system, g, l, table.from[l]!, table.to[l]!);
      if (limits !== null) all.push(limits);
    }
  });
  return all;
}

function limitsOf(system: NetworkSystem, g: number, l: number, i: number, j: number): Limits | null {
  const { network, state, groups } = system;
  const { nodes } = network;
  const { table } = groups[g]!.group;
  const common = { nodes: [i, j], link: { group: g, index: l } };
  switch (table.kind) {
    case 'tube':
      return { ...common, ...tubeLimits(system, g, l) };
    case 'film-area':
    case 'film-share': {
      // What cannot change during a run is listed only where it is exceeded.
      const thickness = table.thickness[l]!;
      const extent = table.extent[l]!;
      const shares = table.kind === 'film-share';
      const tooThin = thickness < THINNEST_FILM;
      const mayBeWide = nodes.kind[i] === BUBBLE && nodes.kind[j] === BUBBLE && (!shares || extent > 1);
      const bounds: Bound[] = [];
      if (tooThin) {
        bounds.push({
          unit: 'm',
          detail: 'film thinner than 5 nm: no liquid layer is left to dissolve in',
          bound: THINNEST_FILM,
          below: true,
        });
      }
      if (mayBeWide) {
        bounds.push({
          unit: '1',
          detail: 'contact film wider than the smaller bubble: spheres with a flat contact no longer describe it',
          bound: 1,
          below: false,
        });
      }
      if (bounds.length === 0) return null;
      return {
        ...common,
        bounds,
        measure(_t, out) {
          let at = 0;
          if (tooThin) out[at++] = thickness;
          if (!mayBeWide) return;
          const smaller = Math.min(state.radius[i]!, state.radius[j]!);
          out[at] = shares ? Math.sqrt(extent) : Math.sqrt(extent / Math.PI) / smaller;
        },
      };
    }
    case 'liquid-path': {
      const distance = table.coefficients[l * table.stride + network.species.length]!;
      const detail = 'the two bubbles are too near one another for the shape factor of distant spheres';
      return {
        ...common,
        bounds: [{ unit: '1', detail, bound: NEAREST_SPHERES, below: false }],
        measure(_t, out) {
          out[0] = (state.radius[i]! + state.radius[j]!) / distance;
        },
      };
    }
    case 'pool-path':
      return null;
  }
}

function tubeLimits(system: NetworkSystem, g: number, l: number): Pick<Limits, 'bounds' | 'measure'> {
  const { network, state, groups } = system;
  const { group, kernel } = groups[g]!;
  const { table } = group;
  const species = network.species.length;
  const RT = GAS_CONSTANT * network.temperature;
  const a = table.coefficients[l * table.stride + TUBE.radius]!;
  const length = table.coefficients[l * table.stride + TUBE.length]!;
  const i = table.from[l]!;
  const j = table.to[l]!;
  const flows = new Float64Array(species);
  const share = new Float64Array(species);
  const bounds: Bound[] = [
    {
      unit: '1',
      detail: 'Reynolds number above 2300: the flow is no longer laminar, and Hagen-Poiseuille overstates it',
      bound: REYNOLDS,
      below: false,
    },
    {
      unit: 'm',
      detail: 'entrance length longer than the tube: the flow never becomes Poiseuille flow, and is overstated',
      bound: length,
      below: false,
    },
    {
      unit: '1',
      detail: 'Knudsen number above 0.01: the gas slips at the wall, and the flow is understated',
      bound: KNUDSEN,
      below: false,
    },
    {
      unit: '1',
      detail: "Mach number above 0.3: the gas's inertia matters, and the flow is overstated",
      bound: MACH,
      below: false,
    },
  ];
  return {
    bounds,
    measure(t, out) {
      kernel.flow(group, l, state, t, flows);
      let flow = 0;
      let massFlow = 0;
      for (let k = 0; k < species; k++) {
        flow += flows[k]!;
        massFlow += Math.abs(flows[k]!) * network.molarMass[k]!;
      }
      const up = flow >= 0 ? i : j;
      let molarMass = 0;
      for (let k = 0; k < species; k++) {
        share[k] = state.partial[up * species + k]! / state.pressure[up]!;
        molarMass += share[k]! * network.molarMass[k]!;
      }
      const viscosity = tubeViscosity(network, table, l, share);
      const pressure = Math.min(state.pressure[i]!, state.pressure[j]!);
      const reynolds = (2 * massFlow) / (Math.PI * a * viscosity);
      out[0] = reynolds;
      out[1] = ENTRANCE * reynolds * 2 * a;
      // Mean free path of a gas from its viscosity: lambda = (mu/p) sqrt(pi R T/(2 M)).
      out[2] = ((viscosity / pressure) * Math.sqrt((Math.PI * RT) / (2 * molarMass))) / (2 * a);
      out[3] = (Math.abs(flow) * RT) / (pressure * Math.PI * a * a) / Math.sqrt(RT / molarMass);
    },
  };
}

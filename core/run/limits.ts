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

export interface Limit {
  readonly nodes: readonly number[];
  readonly subject: string;
  readonly partner: string;
  readonly link: string;
  readonly unit: string;
  /** What is passed, in words. */
  readonly detail: string;
  /** The value at which the law ends; exceeded above it (`below` false) or below it. */
  readonly bound: number;
  readonly below: boolean;
  /** The value at time t from the present node state. */
  value(t: number): number;
  /** False while the thing is gone. */
  present(): boolean;
}

/** Signed distance past the limit, relative: positive where it is exceeded. */
export function excess(limit: Limit, t: number): number {
  const ratio = limit.value(t) / limit.bound - 1;
  return limit.below ? -ratio : ratio;
}

/** Every limit of a network. */
export function networkLimits(system: NetworkSystem, alive: Uint8Array, linkOpen: readonly Uint8Array[]): Limit[] {
  return [...bubbleLimits(system, alive), ...linkLimits(system, alive, linkOpen)];
}

function bubbleLimits(system: NetworkSystem, alive: Uint8Array): Limit[] {
  const { network, state } = system;
  const { nodes, films } = network;
  const limits: Limit[] = [];
  for (let i = 0; i < nodes.bubbleCount; i++) {
    if (films[nodes.film[i]!]!.constantTension && !(nodes.liquid[i]! > 0)) continue;
    const subject = network.nodeName(nodes.origin[i]!);
    const common = { nodes: [i], subject, partner: '', link: '', present: (): boolean => alive[i] !== 0 };
    if (!films[nodes.film[i]!]!.constantTension) {
      limits.push({
        ...common,
        unit: 'N/m',
        detail: 'tension at or below a hundredth of the clean one: a real film buckles or collapses here',
        bound: 0.01 * films[nodes.film[i]!]!.cleanTension,
        below: true,
        value: () => state.tension[i]!,
      });
    }
    if (nodes.liquid[i]! > 0) {
      limits.push({
        ...common,
        unit: 'm',
        detail: 'film thinner than 5 nm: no liquid layer is left to carry surfactant, and surface forces rule',
        bound: THINNEST_FILM,
        below: true,
        value: () => (2 * nodes.liquid[i]!) / faceArea(nodes.mouth[i]!, state.size[i]!),
      });
    }
  }
  return limits;
}

function linkLimits(system: NetworkSystem, alive: Uint8Array, linkOpen: readonly Uint8Array[]): Limit[] {
  const { network, state, groups } = system;
  const { nodes } = network;
  const species = network.species.length;
  const RT = GAS_CONSTANT * network.temperature;
  const limits: Limit[] = [];
  groups.forEach(({ group, kernel }, g) => {
    const { table } = group;
    const flows = new Float64Array(species);
    for (let l = 0; l < table.count; l++) {
      const i = table.from[l]!;
      const j = table.to[l]!;
      const common = {
        nodes: [i, j],
        subject: network.nodeName(nodes.origin[i]!),
        partner: network.nodeName(nodes.origin[j]!),
        link: network.linkName(table.origin[l]!),
        below: false,
        present: (): boolean => linkOpen[g]![l] !== 0 && alive[i] !== 0 && alive[j] !== 0,
      };
      const smaller = (): number => Math.min(state.radius[i]!, state.radius[j]!);
      switch (table.kind) {
        case 'tube': {
          const a = table.coefficients[l * table.stride + TUBE.radius]!;
          const length = table.coefficients[l * table.stride + TUBE.length]!;
          const gas = { massFlow: 0, viscosity: 0, molarMass: 0, pressure: 0, flow: 0 };
          const look = (t: number): typeof gas => {
            kernel.flow(group, l, state, t, flows);
            gas.flow = flows.reduce((sum, q) => sum + q, 0);
            gas.massFlow = flows.reduce((sum, q, k) => sum + Math.abs(q) * network.molarMass[k]!, 0);
            const up = gas.flow >= 0 ? i : j;
            gas.pressure = Math.min(state.pressure[i]!, state.pressure[j]!);
            const x = Float64Array.from({ length: species }, (_, k) => state.partial[up * species + k]! / state.pressure[up]!);
            gas.viscosity = tubeViscosity(network, table, l, x);
            gas.molarMass = x.reduce((sum, share, k) => sum + share * network.molarMass[k]!, 0);
            return gas;
          };
          const reynolds = (t: number): number => (2 * look(t).massFlow) / (Math.PI * a * gas.viscosity);
          limits.push(
            {
              ...common,
              unit: '1',
              detail: 'Reynolds number above 2300: the flow is no longer laminar, and Hagen-Poiseuille overstates it',
              bound: REYNOLDS,
              value: reynolds,
            },
            {
              ...common,
              unit: 'm',
              detail: 'entrance length longer than the tube: the flow never becomes Poiseuille flow, and is overstated',
              bound: length,
              value: (t) => ENTRANCE * reynolds(t) * 2 * a,
            },
            {
              ...common,
              unit: '1',
              detail: 'Knudsen number above 0.01: the gas slips at the wall, and the flow is understated',
              bound: KNUDSEN,
              value: (t) => {
                const { viscosity, pressure, molarMass } = look(t);
                // Mean free path of a gas from its viscosity: lambda = (mu/p) sqrt(pi R T/(2 M)).
                return ((viscosity / pressure) * Math.sqrt((Math.PI * RT) / (2 * molarMass))) / (2 * a);
              },
            },
            {
              ...common,
              unit: '1',
              detail: "Mach number above 0.3: the gas's inertia matters, and the flow is overstated",
              bound: MACH,
              value: (t) => {
                const { flow, pressure, molarMass } = look(t);
                return ((Math.abs(flow) * RT) / (pressure * Math.PI * a * a)) / Math.sqrt(RT / molarMass);
              },
            },
          );
          break;
        }
        case 'film-area':
        case 'film-share': {
          // What cannot change during a run is listed only where it is exceeded: networks have 10^5 contact films.
          const thickness = table.thickness[l]!;
          if (thickness < THINNEST_FILM) {
            limits.push({
              ...common,
              unit: 'm',
              detail: 'film thinner than 5 nm: no liquid layer is left to dissolve in',
              bound: THINNEST_FILM,
              below: true,
              value: () => thickness,
            });
          }
          if (nodes.kind[i] !== BUBBLE || nodes.kind[j] !== BUBBLE) break;
          const extent = table.extent[l]!;
          if (table.kind === 'film-share' && !(extent > 1)) break;
          limits.push({
            ...common,
            unit: '1',
            detail: 'contact film wider than the smaller bubble: spheres with a flat contact no longer describe it',
            bound: 1,
            value: () => (table.kind === 'film-area' ? Math.sqrt(extent / Math.PI) / smaller() : Math.sqrt(extent)),
          });
          break;
        }
        case 'liquid-path': {
          const distance = table.coefficients[l * table.stride + species]!;
          limits.push({
            ...common,
            unit: '1',
            detail: 'the two bubbles are too near one another for the shape factor of distant spheres',
            bound: NEAREST_SPHERES,
            value: () => (state.radius[i]! + state.radius[j]!) / distance,
          });
          break;
        }
        case 'pool-path':
          break;
      }
    }
  });
  return limits;
}

/**
 * A compiled network: the checked document as typed arrays. Nodes stand in the order bubbles, cavities, pools, reservoirs,
 * and, where something is fed, one `outside` node that keeps the account of what came in. Nothing else knows offsets.
 */
import type { Film } from '../films/film.ts';
import type { Waveform } from './waveform.ts';

export const NODE_KINDS = ['bubble', 'cavity', 'pool', 'reservoir', 'outside'] as const;
export type NodeKind = (typeof NODE_KINDS)[number];
export const BUBBLE = 0;
export const CAVITY = 1;
export const POOL = 2;
export const RESERVOIR = 3;
export const OUTSIDE = 4;

/**
 * The state vector has one entry per node and species: `node * species + k`, mol.
 * For a reservoir and for `outside` it is an account: what the network has received from it so far, with a minus sign.
 */
export interface NodeTable {
  readonly count: number;
  readonly bubbleCount: number;
  /** Index of each node in the scenario's list (-1 for `outside`): stays with a node when the network is made smaller. */
  readonly origin: Int32Array;
  readonly kind: Uint8Array;
  // Bubbles (entries of other nodes are 0).
  readonly faces: Float64Array;
  /** Radius of the mouth, m; 0 for a free sphere. */
  readonly mouth: Float64Array;
  /** Hydrostatic head, Pa. */
  readonly head: Float64Array;
  readonly wallStiffness: Float64Array; // Pa; 0 without a wall
  readonly wallVolume: Float64Array; // m^3, at rest
  readonly film: Int32Array; // into Network.films
  readonly surfactant: Float64Array; // mol, one face
  readonly liquid: Float64Array; // m^3, one face
  // Other nodes.
  /** Volume of a cavity, m^3 (Infinity for reservoirs and pools, 0 for bubbles: theirs changes). */
  readonly volume: Float64Array;
  /** Of a pool: moles of species k dissolved for each pascal, `H_k V_l`; count * species. */
  readonly capacity: Float64Array;
  /** Mole fractions of a reservoir's gas; count * species. */
  readonly fraction: Float64Array;
  /** Pressure of a reservoir; null for other nodes. */
  readonly drive: readonly (Waveform | null)[];
}

export interface Feed {
  readonly node: number;
  readonly rate: Waveform; // mol/s
  readonly fraction: readonly number[];
}

/** The links of one kind. `coefficients` holds `stride` numbers a link whose meaning the kind's file states. */
export interface LinkTable {
  readonly kind: LinkKind;
  readonly count: number;
  /** Index of each link in the scenario's list; negative for those that were made during the run. */
  readonly origin: Int32Array;
  readonly from: Int32Array;
  readonly to: Int32Array;
  readonly stride: number;
  readonly coefficients: Float64Array;
  /** When the valve of a link is open: rising pairs of instants; null: always. */
  readonly open: readonly (readonly (readonly [number, number])[] | null)[];
  /** Of a film: its thickness, m (NaN where it is not known), and its area, m^2, or share. Empty for other kinds. */
  readonly thickness: Float64Array;
  readonly extent: Float64Array;
}

export type LinkKind = 'tube' | 'film-area' | 'film-share' | 'liquid-path' | 'pool-path';

export interface Network {
  readonly temperature: number; // K
  readonly species: readonly string[];
  readonly molarMass: Float64Array; // kg/mol
  readonly viscosity: Float64Array; // Pa s
  readonly diffusivity: Float64Array; // m^2/s
  readonly ambient: Waveform; // Pa
  readonly films: readonly Film[];
  readonly nodes: NodeTable;
  readonly feeds: readonly Feed[];
  readonly links: readonly LinkTable[];
  /** What a person calls a node or a link of the scenario, by its `origin`. */
  readonly nodeName: (origin: number) => string;
  readonly linkName: (origin: number) => string;
}

/** Number of unknowns. */
export function stateSize(network: Network): number {
  return network.nodes.count * network.species.length;
}

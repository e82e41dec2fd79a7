/**
 * The checked scenario: a file after loading. Every quantity is a number in SI, every default is filled in, every name is
 * known to exist. The network is compiled from this. What a file may hold is defined in document.ts.
 */
import type * as z from 'zod';
import type { criterionDocument } from './document.ts';
import type { waveform } from './fields.ts';

/**
 * A value in time, in SI. Sine: mean + amplitude sin(2 pi t/period + phase), phase in radians. Square: mean + amplitude in
 * the first `duty` of each period, shifted by phase, mean - amplitude in the rest. Table: linear between, held outside.
 */
export type Waveform = Readonly<z.output<ReturnType<typeof waveform>>>;

/** null: the file does not say, and no link of the file asks. */
export interface Gas {
  readonly molarMass: number | null; // kg/mol
  readonly viscosity: number | null; // Pa s
  readonly diffusivity: number | null; // m^2/s, in the liquid
  readonly solubility: number | null; // mol/(m^3 Pa), in the liquid
  /** Where the values come from; null: the file does not say. */
  readonly source: string | null;
}

export type Tension =
  | { readonly law: 'constant'; readonly clean: number }
  | {
      readonly law: 'henry' | 'langmuir' | 'volmer';
      readonly clean: number; // N/m
      readonly saturation: number; // mol/m^2
      readonly szyszkowski?: number; // mol/m^3; there wherever a concentration is asked for
      readonly ions: 1 | 2;
    }
  | {
      readonly law: 'frumkin';
      readonly clean: number;
      readonly saturation: number;
      readonly szyszkowski?: number;
      readonly attraction: number;
      readonly ions: 1 | 2;
    };

export type Loading = { readonly coverage: number } | { readonly concentration: number };

export type Supply =
  | { readonly kind: 'none' }
  /** `thickness` of the whole film at the area at which it is loaded, m. */
  | { readonly kind: 'closed-film'; readonly thickness: number; readonly transport: 'equilibrium' };

export interface Recipe {
  readonly tension: Tension;
  /** null for a pure liquid only. */
  readonly loading: Loading | null;
  readonly supply: Supply;
  readonly micelles: { readonly cmc: number } | null; // mol/m^3
  /** Where the values come from; null: the file does not say. */
  readonly source: string | null;
}

/** A bubble's size: its radius of curvature (on the larger of the two caps that have it) or the height of its cap, m. */
export interface BubbleSize {
  readonly kind: 'radius' | 'height';
  readonly value: number;
}

/** Mole fractions in the order of `Scenario.species`, sum 1. */
export type Composition = readonly number[];

export interface Feed {
  readonly rate: Waveform; // mol/s
  readonly gas: Composition;
}

export type Place = readonly [x: number, y: number, z: number]; // m, z upwards

export interface BubbleNode {
  readonly kind: 'bubble';
  readonly id: string;
  readonly size: BubbleSize;
  readonly faces: 1 | 2;
  /** Half the inner diameter of the mouth, m; null for a free sphere. */
  readonly mouthRadius: number | null;
  /** A key of `Scenario.recipes`. */
  readonly recipe: string;
  readonly gas: Composition;
  readonly at: Place | null;
  /** The liquid head rho g (surfaceHeight - z) adds to the ambient pressure: one face, a place, and a surface height given. */
  readonly hydrostatic: boolean;
  /** `rest` is the size at which the wall carries nothing; stiffness in Pa. */
  readonly wall: { readonly stiffness: number; readonly rest: BubbleSize } | null;
  readonly feed: Feed | null;
}

export interface CavityNode {
  readonly kind: 'cavity';
  readonly id: string;
  readonly volume: number;
  /** At the start, Pa. */
  readonly pressure: number;
  readonly gas: Composition;
  readonly at: Place | null;
  readonly feed: Feed | null;
}

export interface ReservoirNode {
  readonly kind: 'reservoir';
  readonly id: string;
  readonly pressure: Waveform;
  readonly gas: Composition;
  readonly at: Place | null;
}

export interface PoolNode {
  readonly kind: 'pool';
  readonly id: string;
  /** Of liquid, m^3. */
  readonly volume: number;
  /** Dissolved-gas pressure at the start over the ambient pressure at the start. */
  readonly saturation: number;
  /** How the dissolved-gas pressure is shared. */
  readonly gas: Composition;
  readonly at: Place | null;
  readonly feed: Feed | null;
}

export type ScenarioNode = BubbleNode | CavityNode | ReservoirNode | PoolNode;

/** When a valve is open: increasing, disjoint intervals, s; null: always. */
export type Openings = readonly (readonly [from: number, to: number])[];

interface LinkEnds {
  readonly id: string;
  /** Ids of nodes that exist, and differ. */
  readonly from: string;
  readonly to: string;
  readonly open: Openings | null;
}

export interface TubeLink extends LinkEnds {
  readonly kind: 'tube';
  /** Inner diameter, m. */
  readonly bore: number;
  readonly length: number;
  /** Of the gas, in place of the mixture's own, Pa s. */
  readonly viscosity: number | null;
}

/** Exactly one of `thickness` and `permeance` is a number. */
export interface FilmLink extends LinkEnds {
  readonly kind: 'film';
  /** `area` in m^2, or a `share` of pi min(R_i, R_j)^2. */
  readonly contact: { readonly kind: 'area' | 'share'; readonly value: number };
  readonly thickness: number | null;
  /** For every species alike, mol/(m^2 s Pa). */
  readonly permeance: number | null;
  /** Permeability k_ml of each monolayer, m/s; null: no resistance. */
  readonly monolayer: number | null;
}

export interface LiquidLink extends LinkEnds {
  readonly kind: 'liquid';
  /** Between centres, m; null where one end is a pool. */
  readonly distance: number | null;
  /** The transient term of Epstein & Plesset, to a pool only. */
  readonly transient: boolean;
}

export type ScenarioLink = TubeLink | FilmLink | LiquidLink;

export interface RunSettings {
  readonly until: number;
  /** The run also ends at the vanishing that leaves this many bubbles; null: it does not. */
  readonly untilBubbles: number | null;
  readonly frames: number;
  readonly tolerance: number;
  readonly method: 'auto' | 'explicit' | 'stiff';
  readonly vanishRadius: number;
  readonly onVanish: 'drop' | 'join-neighbours';
}

/** As the file gives it. */
export type Criterion = Readonly<z.output<typeof criterionDocument>>;

export interface Scenario {
  readonly format: 'frothwright';
  readonly version: 1;
  readonly title: string;
  readonly notes: string;
  readonly temperature: number;
  readonly ambient: {
    readonly pressure: Waveform;
    readonly liquidDensity: number;
    /** z of the liquid's surface, m; null: no hydrostatic head anywhere. */
    readonly surfaceHeight: number | null;
  };
  /** The gases that some node holds or is fed, in the order of all compositions; each is a key of `gases`. */
  readonly species: readonly string[];
  /** Every gas the file defines or names. */
  readonly gases: Readonly<Record<string, Gas>>;
  readonly recipes: Readonly<Record<string, Recipe>>;
  readonly nodes: readonly ScenarioNode[];
  readonly links: readonly ScenarioLink[];
  readonly run: RunSettings;
  readonly criteria: readonly Criterion[];
}

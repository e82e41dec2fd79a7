/**
 * What a run tells: events, frames and a summary, as plain data. The driver makes them; hosts write or draw them.
 */

/** The names of the contract, in no order. */
export const EVENT_NAMES = [
  'pair-unstable',
  'pair-stable',
  'bubble-vanished',
  'mouth-passed',
  'mouth-regained',
  'split-begins',
  'split-ends',
  'micelles-begin',
  'micelles-end',
  'collapse-begins',
  'collapse-ends',
  'film-ruptured',
  'bubbles-merged',
  'valve-opened',
  'valve-shut',
  'limit-exceeded',
  'criterion-broken',
  'run-ended',
] as const;
export type EventName = (typeof EVENT_NAMES)[number];

/** A row of events.csv. Absent texts are ''; an absent value is NaN. */
export interface RunEvent {
  readonly time: number;
  readonly event: EventName;
  readonly subject: string;
  readonly partner: string;
  readonly link: string;
  readonly value: number;
  readonly unit: string;
  readonly detail: string;
}

/** A bubble's state word in bubbles.csv. */
export const BUBBLE_STATES = ['free', 'cap-above-mouth', 'cap-below-mouth', 'vanished'] as const;

/**
 * The network at one instant. Arrays are views that the next frame overwrites: copy what is to be kept.
 * Bubble arrays have one entry per bubble of the scenario in its order, vanished ones included (radius 0).
 */
export interface Frame {
  readonly time: number;
  readonly bubbleIds: readonly string[];
  readonly radius: Float64Array; // m, of curvature
  readonly volume: Float64Array; // m^3
  readonly pressure: Float64Array; // Pa
  readonly amount: Float64Array; // mol, all species
  readonly tension: Float64Array; // N/m, one face
  readonly elasticity: Float64Array; // N/m, one face
  readonly coverage: Float64Array; // NaN for a pure liquid
  readonly index: Float64Array; // 2 eps / gamma
  readonly state: Uint8Array; // into BUBBLE_STATES
  /** Pairs and links that are alive at this instant. */
  readonly pairs: PairTable;
  readonly series: SeriesRow;
}

export interface PairTable {
  readonly count: number;
  readonly link: readonly string[]; // link id, or via:M
  readonly from: readonly string[];
  readonly to: readonly string[];
  readonly flow: Float64Array; // mol/s, from -> to
  readonly margin: Float64Array; // NaN where the link is no pair
  readonly rate: Float64Array; // 1/s, NaN where the link is no pair
}

export interface SeriesRow {
  readonly time: number;
  readonly bubbles: number;
  readonly R10: number;
  readonly R21: number;
  readonly R32: number;
  readonly growingModes: number;
  readonly fastestRate: number;
  readonly minimumMargin: number;
  readonly gasBalance: number;
}

/** Who listens to a run. */
export interface RunObserver {
  event(event: RunEvent): void;
  frame(frame: Frame): void;
}

export type RunStop =
  | { readonly kind: 'done' }
  | { readonly kind: 'interrupted' }
  /** The solver could not go on: exit status 3. */
  | { readonly kind: 'failed'; readonly sentence: string; readonly node: string; readonly time: number };

export interface RunResult {
  readonly stop: RunStop;
  readonly endTime: number; // s
  readonly method: string;
  readonly steps: number;
  readonly rejected: number;
  readonly rateEvaluations: number;
  readonly eventCounts: Readonly<Partial<Record<EventName, number>>>;
  readonly worstGasBalance: number; // relative
  readonly worstSurfactantBalance: number; // relative
  readonly bubblesLeft: number;
  readonly warnings: readonly string[];
}

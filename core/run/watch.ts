/**
 * What a run watches for. A watch is a set of signed quantities of the network's state; where one passes through zero
 * something happens, and its watch says what. Each kind of happening is one file in `events/`, and one line in its register.
 */
import type { NetworkSystem } from './system.ts';
import type { Pairs } from './pairs.ts';
import type { EventName } from './record.ts';

/** An event without its instant. */
export interface Happening {
  readonly event: EventName;
  readonly subject: string;
  readonly partner: string;
  readonly link: string;
  readonly value: number;
  readonly unit: string;
  readonly detail: string;
}

/** What watches are made from; remade when the network is remade. */
export interface WatchContext {
  readonly system: NetworkSystem;
  /** One entry a node: 0 once vanished. */
  readonly alive: Uint8Array;
  /** One array a group: 1 where the link is there and its valve open. */
  readonly linkOpen: readonly Uint8Array[];
  readonly pairs: Pairs;
}

export interface Watch {
  readonly count: number;
  /** Writes the signed quantities at time t from the present node state (slopes included); NaN where there is nothing to watch. */
  evaluate(t: number, out: Float64Array): void;
  /** One of them alone, from the present state of the nodes it `touches`. */
  value(k: number, t: number): number;
  touches(k: number): readonly number[];
  /** True where `evaluate` reads slopes of the node state. */
  readonly needsSlopes: boolean;
  /**
   * What it means that quantity k has this sign at time t: `positive` after a passage, or at the start (`first`).
   * The node state is that of the instant. null: nothing to tell.
   */
  tell(k: number, t: number, positive: boolean, first: boolean): Happening | null;
  /** A number, its own within the watch, that stays with quantity k when the network is remade: it carries its last sign over. */
  key(k: number): number;
  /** What always holds and cannot change, to be told at the start; what it names goes into `told` and is not told again. */
  standing?(t: number, told: Set<number>): Happening[];
  /** True where only the first passage of each quantity is told. */
  readonly once?: boolean;
}

export type WatchMaker = (context: WatchContext) => Watch | null;

/** A happening with the fields that stay empty filled in. */
export function happening(event: EventName, subject: string, rest: Partial<Happening>): Happening {
  return { event, subject, partner: '', link: '', value: NaN, unit: '', detail: '', ...rest };
}

/** What a search for the instant of a happening needs: the network at any instant of the last step. */
export interface Looking {
  /** Puts node states to time t inside the last step; false where there is none. */
  lookAt(t: number): boolean;
  /** As `lookAt`, for a few nodes and the rigid ones alone: cheap, however large the network. */
  lookAtNodes(t: number, few: readonly number[]): boolean;
  /** The instant in (a, b] at which a quantity of the state of some nodes, fa at a and fb at b, passes zero. */
  passage(
    a: number,
    fa: number,
    b: number,
    fb: number,
    nodes: readonly number[],
    quantity: (t: number) => number,
  ): number;
}

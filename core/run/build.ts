/**
 * Everything of a run that is made anew when the network changes its shape: system, pairs, watches, dying bubbles, stepper.
 */
import { chooseMethod, createStepper, type Method } from '../integrate/choose.ts';
import type { ErrorNorm, OwnedStepper } from '../integrate/owned-stepper.ts';
import type { Network } from '../network/network.ts';
import { subsetNetwork } from '../network/subset.ts';
import type { Waveform } from '../network/waveform.ts';
import { buildAdjacency, type Adjacency } from './adjacency.ts';
import { createCarried, type Carried } from './carried.ts';
import { carriedCandidates, carriesApart } from './candidates.ts';
import { createObservation, type Observation } from './observation.ts';
import { createPairs, type Pairs } from './pairs.ts';
import { isValveOpen, longestWaveStep, movingWaves, nextWaveBreak } from './schedule.ts';
import type { RunSettings } from './settings.ts';
import { createNetworkSystem, type NetworkSystem } from './system.ts';

/** A run is interrupted between steps: a step may not hold more frames than are written in a moment. */
const MOST_FRAMES_A_STEP = 2000;

/** A network with the state it starts from. */
export interface Start {
  readonly network: Network;
  /** mol, node * species + k; accounts at zero. */
  readonly amounts: Float64Array;
  /** Radius of each free sphere, height of each cap, m; one entry a node. */
  readonly sizes: Float64Array;
  /** Size of the pressure differences that drive the network, Pa. */
  readonly pressureSignal: number;
}

/** What stays the same from build to build. */
export interface BuildPlan {
  readonly settings: RunSettings;
  readonly pressureSignal: number;
  readonly norm: ErrorNorm;
  /** Receives gas that had no neighbour to go to, mol a species. */
  readonly dropped: Float64Array;
}

export interface Build {
  readonly network: Network;
  readonly system: NetworkSystem;
  readonly adjacency: Adjacency;
  readonly alive: Uint8Array;
  readonly linkAlive: readonly Uint8Array[];
  readonly linkOpen: readonly Uint8Array[];
  readonly pairs: Pairs;
  readonly carried: Carried | null;
  readonly observation: Observation;
  /** Waveforms that are not constant. */
  readonly waves: readonly Waveform[];
  /** No step is longer, s: a wave is not jumped over, and the run can be interrupted between its frames. */
  readonly longestStep: number;
  method: Method;
  stepper: OwnedStepper;
  bubbles: number;
  gone: number;
  /** Surfactant of bubbles that vanished from this build, mol. */
  surfactantLeft: number;
}

/** The state that a build begins with. */
export interface Beginning {
  readonly network: Network;
  readonly amounts: Float64Array;
  readonly sizes: Float64Array;
  readonly time: number;
  /** 1 for each node that has vanished. */
  readonly gone: Uint8Array;
  /** First step, s; 0: chosen. */
  readonly step: number;
  /** The method of the run so far; null at its start, when it is chosen. */
  readonly method: Method | null;
}

export function construct(plan: BuildPlan, from: Beginning): Build {
  const { network, amounts, sizes, time: t, gone } = from;
  const { until, tolerance, vanishRadius, frames } = plan.settings;
  const system = createNetworkSystem(network, tolerance, plan.pressureSignal);
  system.state.size.set(sizes);
  const waves = movingWaves(network);
  system.segmentEnd = nextWaveBreak(waves, t);
  const alive = Uint8Array.from({ length: network.nodes.count }, (_, i) => 1 - gone[i]!);
  const linkAlive = network.links.map((table) =>
    Uint8Array.from({ length: table.count }, (_, l) =>
      alive[table.from[l]!] === 0 || alive[table.to[l]!] === 0 ? 0 : 1,
    ),
  );
  const linkOpen = network.links.map((table, g) =>
    Uint8Array.from({ length: table.count }, (_, l) => (linkAlive[g]![l] === 1 && isValveOpen(table, l, t) ? 1 : 0)),
  );
  system.setActive(alive, linkOpen);
  const adjacency = buildAdjacency(network);
  const pairs = createPairs(system, linkOpen, until);
  const observation = createObservation({ system, alive, linkOpen, pairs });
  const candidates = carriedCandidates(network);
  // Once a run carries its dying bubbles apart it goes on to do so: the methods differ in when they look, not in what they find.
  const carries = from.method?.carries ?? carriesApart(candidates, alive, plan.settings.onVanish);
  const carried = carries
    ? createCarried(system, adjacency, alive, linkOpen, candidates, vanishRadius, tolerance, plan.norm, plan.dropped)
    : null;
  const method = from.method ?? chooseMethod(system, amounts, until, plan.settings.method, carries);
  const stepper = createStepper(method, system, until, plan.norm, carried);
  stepper.restart(t, amounts, from.step);
  let bubbles = 0;
  for (let i = 0; i < network.nodes.bubbleCount; i++) bubbles += alive[i]!;
  return {
    network,
    system,
    adjacency,
    alive,
    linkAlive,
    linkOpen,
    pairs,
    carried,
    observation,
    method,
    stepper,
    waves,
    longestStep: Math.min(longestWaveStep(waves), (MOST_FRAMES_A_STEP * until) / Math.max(1, frames)),
    bubbles,
    gone: network.nodes.bubbleCount - bubbles,
    surfactantLeft: 0,
  };
}

/** The network of a build made anew, in its present state: without what has gone, or with links that were joined. */
export function rebuild(plan: BuildPlan, build: Build, network: Network, keepAll: boolean): Build {
  const { stepper, alive, linkAlive, system, carried, method } = build;
  const species = network.species.length;
  const common = { time: stepper.time, step: stepper.nextStep, method };
  let next: Build;
  if (keepAll) {
    const gone = alive.map((a) => 1 - a);
    next = construct(plan, {
      ...common,
      network,
      amounts: stepper.state.slice(),
      sizes: system.state.size.slice(),
      gone,
    });
  } else {
    // Accounts and cavities stay; only bubbles go.
    const smaller = subsetNetwork(network, alive, linkAlive);
    const count = smaller.nodeBefore.length;
    const amounts = new Float64Array(count * species);
    const sizes = new Float64Array(count);
    smaller.nodeBefore.forEach((i, q) => {
      for (let k = 0; k < species; k++) amounts[q * species + k] = stepper.state[i * species + k]!;
      sizes[q] = system.state.size[i]!;
    });
    next = construct(plan, { ...common, network: smaller.network, amounts, sizes, gone: new Uint8Array(count) });
  }
  // What is in transit to the nodes after the bubbles keeps its places.
  if (carried && next.carried) next.carried.inTransit.set(carried.inTransit);
  return next;
}

/** A node has vanished: its links go, and its surfactant is put down. */
export function bury(build: Build, node: number): void {
  const { alive, adjacency, linkAlive, linkOpen, network } = build;
  alive[node] = 0;
  build.bubbles--;
  build.gone++;
  build.surfactantLeft += network.nodes.faces[node]! * network.nodes.surfactant[node]!;
  for (let e = adjacency.start[node]!; e < adjacency.start[node + 1]!; e++) {
    linkAlive[adjacency.group[e]!]![adjacency.link[e]!] = 0;
    linkOpen[adjacency.group[e]!]![adjacency.link[e]!] = 0;
  }
}

/** The id of a node. */
export function nameOf({ network }: Build, node: number): string {
  return network.nodeName(network.nodes.origin[node]!);
}

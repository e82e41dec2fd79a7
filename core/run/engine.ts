/**
 * The driver: steps a network from start to end, stands still at everything that happens on the way, and keeps the balance.
 * Observers hear events and frames; what the run did is told by `result`. Pausing (`advance` in slices) changes no number.
 */
import { chooseMethod, createStepper, type Method } from '../integrate/choose.ts';
import type { OwnedStepper } from '../integrate/owned-stepper.ts';
import { BUBBLE, type Network } from '../network/network.ts';
import { activateBubble, setActiveBubbles } from '../network/node-state.ts';
import { subsetNetwork } from '../network/subset.ts';
import type { Waveform } from '../network/waveform.ts';
import { buildAdjacency, type Adjacency } from './adjacency.ts';
import { createCarried, type Carried } from './carried.ts';
import { carriedCandidates, carriesApart } from './candidates.ts';
import { createFrameMaker } from './frames.ts';
import { createLedger, surfactantOf } from './ledger.ts';
import { createMemory, createObservation, type Observation } from './observation.ts';
import { createPairs, type Pairs } from './pairs.ts';
import type { EventName, RunEvent, RunObserver, RunResult, RunStop } from './record.ts';
import { isValveOpen, longestWaveStep, movingWaves, nextValveMove, nextWaveBreak } from './schedule.ts';
import type { RunSettings } from './settings.ts';
import { createNetworkSystem, type NetworkSystem } from './system.ts';
import { findPassage } from './locate.ts';
import { handOver, joinNeighbours } from './vanish.ts';

/** A network is made smaller once this share of its bubbles has gone. */
const GONE_SHARE = 0.5;
/** A run is interrupted between steps: a step may not hold more frames than are written in a moment. */
const MOST_FRAMES_A_STEP = 2000;
const NOTHING = new Float64Array(0);
/** A cap lower than this share of its mouth's radius counts as flat: below it the film is drawn into the mouth. */
const FLATTEST = 1e-3;

export interface Run {
  readonly time: number;
  readonly until: number;
  /** 0 to 1. */
  readonly progress: number;
  readonly finished: boolean;
  /** Does up to this many integrator steps. */
  advance(steps: number): void;
  /** Ends the run at the present time; everything computed is kept. */
  interrupt(): void;
  result(): RunResult;
  /** Radius of curvature, m, of every bubble that lives, at a time inside the last step. */
  radiiAt(t: number): Float64Array;
}

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

/** Everything that is made anew when the network changes its shape. */
interface Build {
  readonly network: Network;
  readonly system: NetworkSystem;
  readonly adjacency: Adjacency;
  readonly alive: Uint8Array;
  /** Scratch of `livingIn`. */
  readonly living: Uint8Array;
  readonly linkAlive: readonly Uint8Array[];
  readonly linkOpen: readonly Uint8Array[];
  readonly pairs: Pairs;
  readonly carried: Carried | null;
  readonly observation: Observation;
  /** Waveforms that are not constant. */
  readonly waves: readonly Waveform[];
  /** No step is longer, s: a wave is not jumped over, and the run can be interrupted between its frames. */
  readonly longestStep: number;
  stepper: OwnedStepper;
  bubbles: number;
  gone: number;
}

/** An instant in a sentence. */
const instant = (t: number): string => `${Number(t.toPrecision(6))} s`;

export function startNetworkRun(start: Start, settings: RunSettings, observer: RunObserver): Run {
  const { until, tolerance, vanishRadius } = settings;
  const species = start.network.species.length;
  const ledger = createLedger(species, start.amounts);
  const frames = settings.frames > 0 ? createFrameMaker(start.network) : null;
  const eventCounts: Partial<Record<EventName, number>> = {};
  const warnings: string[] = [];
  const statistics = { steps: 0, rejected: 0, rateEvaluations: 0 };
  const memory = createMemory();
  const surfactantAtStart = surfactantOf(start.network);
  let surfactantLeft = 0; // of vanished bubbles
  let worstSurfactant = 0;
  let method: Method | null = null;
  let stop: RunStop | null = null;
  let nextFrame = 0;
  let work = new Float64Array(start.amounts.length);
  let build = construct(start.network, start.amounts, start.sizes, 0, null, 0);
  let valveMove = nextValveMove(build.network, 0);
  /** The instant whose node states are at hand inside the last step; NaN: none. */
  let standing = NaN;

  evaluate(0, build.stepper.state);
  build.pairs.refresh(build.system.state, 0);
  emitAll(build.observation.opening(0, memory, true));
  takeFrames(0, () => build.stepper.state);

  // ------------------------------------------------------------------------------------------------- building

  function construct(
    network: Network,
    amounts: Float64Array,
    sizes: Float64Array,
    t: number,
    gone: Uint8Array | null,
    firstStep: number,
  ): Build {
    const system = createNetworkSystem(network, tolerance, start.pressureSignal);
    system.state.size.set(sizes);
    const waves = movingWaves(network);
    system.segmentEnd = nextWaveBreak(waves, t);
    const alive = Uint8Array.from({ length: network.nodes.count }, (_, i) => (gone !== null && gone[i] === 1 ? 0 : 1));
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
    const carries = method === null ? carriesApart(candidates, alive) : method.carries;
    const carried = carries
      ? createCarried(
          system,
          adjacency,
          alive,
          linkOpen,
          candidates,
          vanishRadius,
          tolerance,
          ledger.dropped,
          observation.needsSlopes,
        )
      : null;
    method ??= chooseMethod(system, amounts, until, settings.method, carries);
    const stepper = createStepper(method, system, until, carried);
    stepper.restart(t, amounts, firstStep);
    let bubbles = 0;
    for (let i = 0; i < network.nodes.bubbleCount; i++) bubbles += alive[i]!;
    if (work.length !== system.size) work = new Float64Array(system.size);
    return {
      network,
      system,
      adjacency,
      alive,
      living: new Uint8Array(network.nodes.count),
      linkAlive,
      linkOpen,
      pairs,
      carried,
      observation,
      stepper,
      waves,
      longestStep: Math.min(longestWaveStep(waves), (MOST_FRAMES_A_STEP * until) / Math.max(1, settings.frames)),
      bubbles,
      gone: network.nodes.bubbleCount - bubbles,
    };
  }

  /** The same network made anew: without what has gone, or with links that were joined. */
  function rebuild(network: Network, keepAll: boolean): void {
    countSteps();
    const { stepper, alive, linkAlive, system, carried } = build;
    const t = stepper.time;
    const h = stepper.nextStep;
    // Only bubbles go: what is in transit to the nodes after them keeps its places.
    const inTransit = carried?.inTransit ?? NOTHING;
    if (keepAll) {
      const gone = alive.map((a) => (a === 0 ? 1 : 0));
      build = construct(network, stepper.state.slice(), system.state.size.slice(), t, gone, h);
    } else {
      // Accounts and cavities stay; only bubbles go.
      const smaller = subsetNetwork(network, alive, linkAlive);
      const amounts = new Float64Array(smaller.nodeBefore.length * species);
      const sizes = new Float64Array(smaller.nodeBefore.length);
      smaller.nodeBefore.forEach((i, q) => {
        for (let k = 0; k < species; k++) amounts[q * species + k] = stepper.state[i * species + k]!;
        sizes[q] = system.state.size[i]!;
      });
      build = construct(smaller.network, amounts, sizes, t, null, h);
    }
    if (build.carried) build.carried.inTransit.set(inTransit);
    else inTransit.forEach((delta, q) => build.stepper.adjust(build.system.size - inTransit.length + q, delta));
    if (!evaluate(t, build.stepper.state)) throw new Error('a network that was made smaller has no state');
    build.pairs.refresh(build.system.state, t);
    // What is only smaller has no pair that was not there before.
    emitAll(build.observation.opening(t, memory, keepAll));
  }

  function countSteps(): void {
    const s = build.stepper.statistics;
    statistics.steps += s.steps;
    statistics.rejected += s.rejected;
    statistics.rateEvaluations += s.rateEvaluations;
  }

  // ------------------------------------------------------------------------------------------------- looking

  /** Node states at (t, y); slopes only where something watches them. */
  function evaluate(t: number, y: Float64Array): boolean {
    return build.system.evaluate(t, y, build.observation.needsSlopes);
  }

  /** The whole state at time t inside the last step, in `work`; node states follow. */
  function lookAt(t: number): boolean {
    if (t === standing) return true;
    const { stepper, carried, system } = build;
    stepper.interpolate(t, work);
    if (carried) {
      carried.complete(t, work);
      setActiveBubbles(system.state, livingIn(work));
    }
    const found = evaluate(t, work);
    resumeActive();
    standing = found ? t : NaN;
    return found;
  }

  /** Who lives in a whole state inside the last step: bubbles that are carried apart may have vanished on the way. */
  function livingIn(y: Float64Array): Uint8Array {
    const { carried, alive, living } = build;
    if (carried === null) return alive;
    living.set(alive);
    for (const i of carried.members) {
      let n = 0;
      for (let k = 0; k < species; k++) n += y[i * species + k]!;
      if (n === 0) living[i] = 0;
    }
    return living;
  }

  function emit(event: RunEvent): void {
    eventCounts[event.event] = (eventCounts[event.event] ?? 0) + 1;
    observer.event(event);
  }

  function emitAll(events: readonly RunEvent[]): void {
    for (const event of events) emit(event);
  }

  /** Frames due up to and including time t; `stateAt` gives the whole state at an instant. */
  function takeFrames(t: number, stateAt: (at: number) => Float64Array): boolean {
    if (frames === null) return false;
    let taken = false;
    while (nextFrame <= settings.frames && frameTime(nextFrame) <= t) {
      takeFrame(frameTime(nextFrame), stateAt(frameTime(nextFrame)));
      nextFrame++;
      taken = true;
    }
    return taken;
  }

  function frameTime(index: number): number {
    return index === settings.frames ? until : (until * index) / settings.frames;
  }

  /** From the present state of all that live: surfactant lost or made, relative to what there was; the worst is kept. */
  function noteSurfactant(): void {
    if (!(surfactantAtStart > 0)) return;
    const surfactant = surfactantLeft + build.observation.surfactantHeld() - surfactantAtStart;
    worstSurfactant = Math.max(worstSurfactant, Math.abs(surfactant) / surfactantAtStart);
  }

  function takeFrame(t: number, y: Float64Array): void {
    const { system, linkOpen, pairs } = build;
    // Carried bubbles are to be seen too.
    standing = NaN;
    const alive = livingIn(y);
    setActiveBubbles(system.state, alive);
    if (!system.evaluate(t, y, true)) throw new Error(`no state at frame time ${t}`);
    // Who vanished inside the step is not yet in the books.
    if (build.carried === null) noteSurfactant();
    observer.frame(frames!.make(system, alive, linkOpen, pairs, t, y, ledger.gasBalance(y, NOTHING)));
  }

  // ------------------------------------------------------------------------------------------------- stepping

  function nameOf(i: number): string {
    return build.network.nodeName(build.network.nodes.origin[i]!);
  }

  function step(): void {
    const { system, stepper, carried } = build;
    const t = stepper.time;
    const edge = nextWaveBreak(build.waves, t);
    system.segmentEnd = edge;
    const limit = Math.min(until, edge, valveMove, t + build.longestStep);
    if (carried) carried.plan(t, stepper.state, Math.min(stepper.nextStep, limit - t));
    const outcome = stepper.step(limit);
    if (outcome.kind === 'stiff') {
      takeOver(outcome.fastestRate);
      return;
    }
    if (outcome.kind === 'failed') {
      const node = nameOf(Math.min(Math.floor(outcome.worst / species), build.network.nodes.count - 1));
      const why =
        outcome.reason === 'not-finite'
          ? 'its state has no meaning in the laws it was given'
          : 'no step was short enough to follow it';
      finish({
        kind: 'failed',
        node,
        time: t,
        sentence: `the run could not go on past ${instant(t)} at ${node}: ${why}`,
      });
      return;
    }
    const end = stepper.time;
    // A step with company has its end looked at already.
    standing = carried ? end : NaN;
    const fallen = firstFall(t, end);
    const losses = carried ? carried.losses() : [];
    let stopAt = fallen ? fallen.time : end;
    let enough = false;
    if (settings.untilBubbles !== null && build.bubbles - losses.length <= settings.untilBubbles) {
      const last = losses[Math.max(0, build.bubbles - settings.untilBubbles - 1)];
      if (last && last.time <= stopAt) {
        stopAt = last.time;
        enough = true;
      }
    }
    tellOf(t, stopAt, losses);
    const framed = takeFrames(stopAt, (at) => {
      stepper.interpolate(at, work);
      carried?.complete(at, work);
      return work;
    });
    if (framed) resumeActive();
    if (stopAt < end || fallen) breakOff(stopAt, fallen, losses, enough);
    else settle(losses, enough);
  }

  function resumeActive(): void {
    const { carried, system, alive } = build;
    if (carried === null) return;
    const active = alive.slice();
    for (const i of carried.members) active[i] = 0;
    setActiveBubbles(system.state, active);
  }

  interface Fall {
    readonly node: number;
    readonly time: number;
    readonly kind: 'vanished' | 'flat';
  }

  /** How far bubble i is from its end: from the vanish radius of a free sphere, from flatness of a cap; relative. */
  function room(i: number): number {
    const { nodes } = build.network;
    const { state } = build.system;
    const mouth = nodes.mouth[i]!;
    return mouth > 0 ? state.size[i]! / (FLATTEST * mouth) - 1 : state.size[i]! / vanishRadius - 1;
  }

  /** The first bubble of the main system that vanishes, or is drawn flat, inside the step. */
  function firstFall(t: number, end: number): Fall | null {
    const { system } = build;
    // Bubbles that are carried apart end by themselves; of the rest, one look at the end of the step.
    if (!lookAt(end)) {
      // The end of the step lies beyond a bubble's end: bring the end nearer until every bubble has a state.
      let [low, high] = [t, end];
      while (high - low > 1e-12 * Math.max(end, 1e-300) && high - low > (end - t) * 1e-9) {
        const middle = 0.5 * (low + high);
        if (lookAt(middle)) low = middle;
        else high = middle;
      }
      if (!lookAt(low)) return null;
      end = low;
    }
    let first: Fall | null = null;
    const { state } = system;
    for (let list = 0; list < 2; list++) {
      const [index, count] = list === 0 ? [state.spheres, state.sphereCount] : [state.shaped, state.shapedCount];
      for (let q = 0; q < count; q++) {
        const i = index[q]!;
        if (room(i) > 0) continue;
        const until = first ? first.time : end;
        const at = (when: number): number => (lookAtNodes(when, [i]) ? room(i) : -1);
        const time = passage(t, at(t), until, at(until), [i], () => room(i));
        if (first === null || time < first.time) {
          first = { node: i, time, kind: build.network.nodes.mouth[i]! > 0 ? 'flat' : 'vanished' };
        }
      }
    }
    return first;
  }

  /** As `lookAt`, for a few nodes and what they reach into alone: cheap, however large the network. */
  function lookAtNodes(t: number, few: readonly number[]): boolean {
    const { stepper, system, observation, carried } = build;
    const { state } = system;
    standing = NaN;
    const [spheres, shaped] = [state.sphereCount, state.shapedCount];
    const firstSpheres = state.spheres.slice(0, few.length);
    const firstShaped = state.shaped.slice(0, few.length);
    state.sphereCount = state.shapedCount = 0;
    for (const i of few) {
      if (i >= build.network.nodes.bubbleCount) continue;
      activateBubble(state, i);
      if (carried?.isMember(i) === true) carried.completeOne(t, i, work);
      else for (let k = 0; k < species; k++) work[i * species + k] = stepper.interpolateOne(t, i * species + k);
    }
    for (const i of state.rigid) {
      for (let k = 0; k < species; k++) work[i * species + k] = stepper.interpolateOne(t, i * species + k);
    }
    const found = system.evaluate(t, work, observation.needsSlopes);
    state.spheres.set(firstSpheres);
    state.shaped.set(firstShaped);
    state.sphereCount = spheres;
    state.shapedCount = shaped;
    return found;
  }

  /** The instant in (a, b] at which a quantity of the state of some nodes, fa at a and fb at b, passes zero. */
  function passage(
    a: number,
    fa: number,
    b: number,
    fb: number,
    nodes: readonly number[],
    quantity: (t: number) => number,
  ): number {
    const at = (t: number): number => (lookAtNodes(t, nodes) ? quantity(t) : -1);
    return findPassage(at, a, fa, b, fb, Math.max(4e-16 * b, 1e-3 * tolerance * (b - a)));
  }

  /** Emits what happens in (t, stopAt], in time order. */
  function tellOf(t: number, stopAt: number, losses: readonly { node: number; time: number; amount: number }[]): void {
    const events: RunEvent[] = [];
    for (const { node, time, amount } of losses) {
      if (time <= stopAt) events.push(vanished(node, time, amount, null));
    }
    events.push(...build.observation.passages(t, stopAt, lookAt, passage, lookAtNodes, memory));
    events.sort((a, b) => a.time - b.time);
    emitAll(events);
  }

  function vanished(node: number, time: number, amount: number, receivers: readonly number[] | null): RunEvent {
    const names = (receivers ?? openEnds(node)).map(nameOf);
    const detail =
      names.length === 0
        ? 'no neighbour was left to take its gas: it left the network'
        : `its last gas went to ${names.length > 6 ? `${names.slice(0, 6).join(', ')} and ${names.length - 6} more` : names.join(', ')}`;
    return {
      time,
      event: 'bubble-vanished',
      subject: nameOf(node),
      partner: '',
      link: '',
      value: amount,
      unit: 'mol',
      detail,
    };
  }

  function openEnds(node: number): number[] {
    const { adjacency, alive, linkOpen } = build;
    const ends: number[] = [];
    for (let e = adjacency.start[node]!; e < adjacency.start[node + 1]!; e++) {
      const other = adjacency.other[e]!;
      if (alive[other] !== 0 && linkOpen[adjacency.group[e]!]![adjacency.link[e]!] !== 0) ends.push(other);
    }
    return ends;
  }

  function bury(node: number): void {
    const { alive, adjacency, linkAlive, linkOpen, network } = build;
    alive[node] = 0;
    build.bubbles--;
    build.gone++;
    surfactantLeft += network.nodes.faces[node]! * network.nodes.surfactant[node]!;
    for (let e = adjacency.start[node]!; e < adjacency.start[node + 1]!; e++) {
      linkAlive[adjacency.group[e]!]![adjacency.link[e]!] = 0;
      linkOpen[adjacency.group[e]!]![adjacency.link[e]!] = 0;
    }
  }

  /** The step stands whole: hand over, settle accounts, go on. */
  function settle(losses: readonly { node: number; time: number }[], enough: boolean): void {
    const { stepper, carried } = build;
    if (carried) carried.commit(stepper.time, stepper.state, (unknown, delta) => stepper.adjust(unknown, delta));
    for (const { node } of losses) bury(node);
    carryOn(enough);
  }

  /** The step is cut at `at`: the state there is taken, bubbles that ended are handed over, and the stepper begins anew. */
  function breakOff(
    at: number,
    fallen: Fall | null,
    losses: readonly { node: number; time: number }[],
    enough: boolean,
  ): void {
    const { stepper, carried } = build;
    stepper.interpolate(at, work);
    carried?.complete(at, work);
    const y = work.slice();
    standing = NaN;
    if (carried) carried.cutShort();
    for (const { node, time } of losses) if (time <= at) bury(node);
    if (fallen?.kind === 'flat') {
      stepper.restart(at, y, stepper.nextStep);
      const node = nameOf(fallen.node);
      finish({
        kind: 'failed',
        node,
        time: at,
        sentence: `the run stops at ${instant(at)}: ${node} was drawn flat into its mouth, and a film inside the tube is outside the model`,
      });
      return;
    }
    let network = build.network;
    if (fallen) {
      const { adjacency, alive, linkOpen } = build;
      const { amount, receivers } = handOver(fallen.node, y, species, adjacency, alive, linkOpen, ledger.dropped);
      emit(vanished(fallen.node, at, amount, receivers));
      if (settings.onVanish === 'join-neighbours') {
        network = joinNeighbours(network, fallen.node, adjacency, alive, linkOpen);
      }
      bury(fallen.node);
    }
    if (settings.untilBubbles !== null && build.bubbles <= settings.untilBubbles) enough = true;
    stepper.restart(at, y, 0.1 * (stepper.time - stepper.previousTime));
    build.system.setActive(build.alive, build.linkOpen);
    if (network !== build.network) rebuild(network, true);
    carryOn(enough);
  }

  /** After the state at the end of a step is settled. */
  function carryOn(enough: boolean): void {
    const { stepper, network } = build;
    const t = stepper.time;
    if (build.bubbles < 2000 || stepper.statistics.steps % 16 === 0)
      ledger.gasBalance(stepper.state, build.carried?.inTransit ?? NOTHING);
    if (t >= until || enough) {
      finish({ kind: 'done' });
      return;
    }
    if (build.gone > GONE_SHARE * network.nodes.bubbleCount && network.nodes.bubbleCount > 64) {
      rebuild(network, false);
    }
    if (t >= valveMove) moveValves(t);
    else if (t >= build.system.segmentEnd) build.stepper.invalidate();
    // A search for an instant leaves what it looked at there: bubbles that were carried too.
    if (standing !== t) setActiveBubbles(build.system.state, build.alive);
    if (standing !== t && !evaluate(t, build.stepper.state)) {
      finish({
        kind: 'failed',
        node: '',
        time: t,
        sentence: `the run could not go on past ${instant(t)}: the state there has no meaning in the laws`,
      });
      return;
    }
    build.observation.remember(t);
  }

  function moveValves(t: number): void {
    const { network, linkAlive, linkOpen, stepper, pairs, system, alive } = build;
    valveMove = nextValveMove(network, t);
    network.links.forEach((table, g) => {
      for (let l = 0; l < table.count; l++) {
        if (linkAlive[g]![l] === 0 || table.open[l] === null) continue;
        const open = isValveOpen(table, l, t) ? 1 : 0;
        if (open === linkOpen[g]![l]) continue;
        linkOpen[g]![l] = open;
        emit({
          time: t,
          event: open === 1 ? 'valve-opened' : 'valve-shut',
          subject: nameOf(table.from[l]!),
          partner: nameOf(table.to[l]!),
          link: network.linkName(table.origin[l]!),
          value: NaN,
          unit: '',
          detail: open === 1 ? 'gas can pass from here on' : 'no gas passes from here on',
        });
      }
    });
    system.setActive(alive, linkOpen);
    build.carried?.restart();
    stepper.restart(t, stepper.state.slice(), 0);
    evaluate(t, stepper.state);
    pairs.refresh(system.state, t);
    emitAll(build.observation.opening(t, memory, true));
  }

  /** The explicit method met stiffness: nothing of the step is kept, and the stiff method goes on from its start. */
  function takeOver(fastestRate: number): void {
    const { stepper } = build;
    const t = stepper.time;
    const time = (1 / fastestRate).toPrecision(2);
    if (settings.method === 'explicit') {
      finish({
        kind: 'failed',
        node: '',
        time: t,
        sentence: `the explicit method was asked for, but the network is stiff at ${instant(t)} (it adjusts within ${time} s): use method auto or stiff`,
      });
      return;
    }
    warnings.push(
      `from ${instant(t)} on the stiff method did the run: the network had turned stiff (it adjusts within ${time} s)`,
    );
    countSteps();
    method = { name: 'stiff', carries: method!.carries };
    build.stepper = createStepper(method, build.system, until, build.carried);
    build.stepper.restart(t, stepper.state.slice(), 0);
  }

  function finish(how: RunStop): void {
    if (stop !== null) return;
    stop = how;
    const { stepper, system, alive, carried } = build;
    const t = stepper.time;
    carried?.deliver((unknown, delta) => stepper.adjust(unknown, delta));
    setActiveBubbles(system.state, alive);
    const lastFrame = frames !== null && (nextFrame === 0 || frameTime(nextFrame - 1) < t);
    if (lastFrame && system.evaluate(t, stepper.state, true)) takeFrame(t, stepper.state);
    ledger.gasBalance(stepper.state, NOTHING);
    if (system.evaluate(t, stepper.state, false)) noteSurfactant();
    countSteps();
    emit({
      time: t,
      event: 'run-ended',
      subject: how.kind === 'failed' ? how.node : '',
      partner: '',
      link: '',
      value: build.bubbles,
      unit: 'bubbles',
      detail: how.kind === 'done' ? 'as asked' : how.kind === 'interrupted' ? 'stopped by the user' : how.sentence,
    });
  }

  return {
    get time() {
      return build.stepper.time;
    },
    until,
    get progress() {
      const inTime = build.stepper.time / until;
      if (settings.untilBubbles === null) return inTime;
      const all = start.network.nodes.kind.reduce((sum, kind) => sum + (kind === BUBBLE ? 1 : 0), 0);
      return Math.min(1, Math.max(inTime, (all - build.bubbles) / Math.max(1, all - settings.untilBubbles)));
    },
    get finished() {
      return stop !== null;
    },
    advance(steps) {
      for (let s = 0; s < steps && stop === null; s++) step();
    },
    interrupt() {
      finish({ kind: 'interrupted' });
    },

    radiiAt(t) {
      const { system, stepper, alive } = build;
      setActiveBubbles(system.state, alive);
      if (t >= stepper.time) system.evaluate(stepper.time, stepper.state, false);
      else lookAt(t);
      const radii = system.state.radius.filter((_, i) => i < build.network.nodes.bubbleCount && alive[i] !== 0);
      resumeActive();
      return radii;
    },
    result() {
      if (stop === null) throw new Error('the run has not ended');
      return {
        stop,
        endTime: build.stepper.time,
        method: method!.name,
        ...statistics,
        eventCounts,
        worstGasBalance: ledger.worst,
        worstSurfactantBalance: worstSurfactant,
        bubblesLeft: build.bubbles,
        warnings,
      };
    },
  };
}

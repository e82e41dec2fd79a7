/**
 * The driver: steps a network from start to end, stands still at everything that happens on the way, and keeps the balance.
 * Observers hear events and frames; what the run did is told by `result`. Pausing (`advance` in slices) changes no number.
 */
import { createStepper, errorNorm } from '../integrate/choose.ts';
import { BUBBLE } from '../network/network.ts';
import { setActiveBubbles } from '../network/node-state.ts';
import { bury, construct, nameOf, rebuild, type Build, type Start } from './build.ts';
import { firstFall, vanishedAtOnce, type Fall } from './fall.ts';
import { createFrameMaker } from './frames.ts';
import { lookInside } from './inside.ts';
import { createLedger, surfactantOf } from './ledger.ts';
import { createMemory } from './observation.ts';
import type { EventName, RunEvent, RunObserver, RunResult, RunStop } from './record.ts';
import { isValveOpen, nextValveMove, nextWaveBreak } from './schedule.ts';
import type { RunSettings } from './settings.ts';
import { handOver, joinNeighbours, vanishedEvent } from './vanish.ts';

/** A network is made smaller once this share of its bubbles has gone. */
const GONE_SHARE = 0.5;
const NOTHING = new Float64Array(0);

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
  let stop: RunStop | null = null;
  let nextFrame = 0;
  const norm = errorNorm(start.amounts.length);
  const plan = { settings, pressureSignal: start.pressureSignal, norm, dropped: ledger.dropped };
  let build = construct(plan, {
    network: start.network,
    amounts: start.amounts,
    sizes: start.sizes,
    time: 0,
    gone: new Uint8Array(start.network.nodes.count),
    step: 0,
    method: null,
  });
  let inside = lookInside(build, tolerance);
  let valveMove = nextValveMove(build.network, 0);

  takeStock(0, true);
  takeFrames(0, () => build.stepper.state);

  /** The network changes its shape, and everything that is made from it. */
  function remake(next: Build): void {
    countSteps();
    surfactantLeft += build.surfactantLeft;
    build = next;
    inside = lookInside(build, tolerance);
  }

  function countSteps(): void {
    const s = build.stepper.statistics;
    statistics.steps += s.steps;
    statistics.rejected += s.rejected;
    statistics.rateEvaluations += s.rateEvaluations;
  }

  /**
   * Sees the network as it is from time t on and tells what of that was not told: with slopes, which margins are made of.
   * @param fresh false where nothing can be standing that was not before
   */
  function takeStock(t: number, fresh: boolean): void {
    if (!build.system.evaluate(t, build.stepper.state, true)) throw new Error(`the network has no state at ${t} s`);
    build.pairs.refresh(build.system.state, t);
    emitAll(build.observation.opening(t, memory, fresh));
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
    const surfactant = surfactantLeft + build.surfactantLeft + build.observation.surfactantHeld() - surfactantAtStart;
    worstSurfactant = Math.max(worstSurfactant, Math.abs(surfactant) / surfactantAtStart);
  }

  function takeFrame(t: number, y: Float64Array): void {
    const { system, linkOpen, pairs } = build;
    // Carried bubbles are to be seen too.
    inside.standing = NaN;
    const alive = inside.livingIn(y);
    setActiveBubbles(system.state, alive);
    if (!system.evaluate(t, y, true)) throw new Error(`no state at frame time ${t}`);
    // Who vanished inside the step is not yet in the books.
    const lost = build.carried?.droppedBy(t) ?? NOTHING;
    if (build.carried === null) noteSurfactant();
    observer.frame(frames!.make(system, alive, linkOpen, pairs, t, y, ledger.gasBalance(y, lost)));
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
      const gone = vanishedAtOnce(build, outcome.worst, inside.work);
      if (gone) {
        breakOff(t, gone, [], false);
        return;
      }
      const node = nameOf(build, Math.min(Math.floor(outcome.worst / species), build.network.nodes.count - 1));
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
    inside.standing = carried ? end : NaN;
    const fallen = firstFall(build, inside, t, end, vanishRadius);
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
    if (takeFrames(stopAt, (at) => inside.read(at))) inside.resumeActive();
    if (stopAt < end || fallen) breakOff(stopAt, fallen, losses, enough);
    else settle(losses, enough);
  }

  /** Emits what happens in (t, stopAt], in time order. */
  function tellOf(t: number, stopAt: number, losses: readonly { node: number; time: number; amount: number }[]): void {
    const events: RunEvent[] = [];
    for (const { node, time, amount } of losses) {
      if (time <= stopAt) events.push(vanishedEvent(build, node, time, amount, null));
    }
    for (const event of build.observation.passages(t, stopAt, inside, memory)) events.push(event);
    events.sort((a, b) => a.time - b.time);
    emitAll(events);
  }

  /** The step stands whole: hand over, settle accounts, go on. */
  function settle(losses: readonly { node: number; time: number }[], enough: boolean): void {
    const { stepper, carried } = build;
    if (carried) carried.commit(stepper.time, stepper.state, (unknown, delta) => stepper.adjust(unknown, delta));
    for (const { node } of losses) bury(build, node);
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
    const y = inside.read(at).slice();
    inside.standing = NaN;
    if (carried) carried.cutShort();
    for (const { node, time } of losses) if (time <= at) bury(build, node);
    if (fallen?.kind === 'flat') {
      stepper.restart(at, y, stepper.nextStep);
      const node = nameOf(build, fallen.node);
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
      emit(vanishedEvent(build, fallen.node, at, amount, receivers));
      if (settings.onVanish === 'join-neighbours') {
        network = joinNeighbours(network, fallen.node, adjacency, alive, linkOpen);
      }
      bury(build, fallen.node);
    }
    if (settings.untilBubbles !== null && build.bubbles <= settings.untilBubbles) enough = true;
    stepper.restart(at, y, 0.1 * (stepper.time - stepper.previousTime));
    build.system.setActive(build.alive, build.linkOpen);
    if (network !== build.network) {
      remake(rebuild(plan, build, network, true));
      takeStock(at, true);
    }
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
    // Valves first: a network made anew has them where they stand, and would tell of none.
    if (t >= valveMove) moveValves(t);
    else if (t >= build.system.segmentEnd) build.stepper.invalidate();
    if (build.gone > GONE_SHARE * network.nodes.bubbleCount && network.nodes.bubbleCount > 64) {
      remake(rebuild(plan, build, network, false));
      // What is only smaller has no pair that was not there before.
      takeStock(t, false);
    }
    // A search for an instant leaves what it looked at there: bubbles that were carried too.
    if (inside.standing !== t) setActiveBubbles(build.system.state, build.alive);
    if (inside.standing !== t && !build.system.evaluate(t, build.stepper.state, build.observation.needsSlopes)) {
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
    const { network, linkAlive, linkOpen, stepper, system, alive } = build;
    valveMove = nextValveMove(network, t);
    network.links.forEach((table, g) => {
      for (let l = 0; l < table.count; l++) {
        if (linkAlive[g]![l] === 0 || table.open[l] === null) continue;
        const opens = isValveOpen(table, l, t);
        if (opens === (linkOpen[g]![l] === 1)) continue;
        linkOpen[g]![l] = opens ? 1 : 0;
        emit({
          time: t,
          event: opens ? 'valve-opened' : 'valve-shut',
          subject: nameOf(build, table.from[l]!),
          partner: nameOf(build, table.to[l]!),
          link: network.linkName(table.origin[l]!),
          value: NaN,
          unit: '',
          detail: opens ? 'gas can pass from here on' : 'no gas passes from here on',
        });
      }
    });
    system.setActive(alive, linkOpen);
    build.carried?.restart();
    stepper.restart(t, stepper.state.slice(), 0);
    takeStock(t, true);
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
    build.method = { name: 'stiff', carries: build.method.carries };
    build.stepper = createStepper(build.method, build.system, until, norm, build.carried);
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
      else inside.lookAt(t);
      const radii = system.state.radius.filter((_, i) => i < build.network.nodes.bubbleCount && alive[i] !== 0);
      inside.resumeActive();
      return radii;
    },
    result() {
      if (stop === null) throw new Error('the run has not ended');
      return {
        stop,
        endTime: build.stepper.time,
        method: build.method.name,
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

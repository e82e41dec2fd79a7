/** A scenario before it runs: its bubbles and pairs, whether the network as drawn is stable, and which laws it is outside of. */
import { chooseMethod } from '../integrate/choose.ts';
import type { Scenario } from '../scenario/schema.ts';
import { carriedCandidates, carriesApart } from './candidates.ts';
import { compileOrThrow } from './drive.ts';
import { watchLimits } from './events/limits.ts';
import { createFrameMaker } from './frames.ts';
import { networkModes } from './modes.ts';
import { createPairs } from './pairs.ts';
import type { Frame } from './record.ts';
import { isValveOpen } from './schedule.ts';
import { createNetworkSystem } from './system.ts';
import type { WatchContext } from './watch.ts';

export interface RestReport {
  readonly frame: Frame;
  readonly growing: {
    readonly count: number;
    readonly fastestRate: number; // 1/s
    readonly feeds: readonly string[];
    readonly starves: readonly string[];
    readonly caveat: string;
  };
  /** Limits of validity that are exceeded. */
  readonly limits: readonly {
    readonly detail: string;
    readonly subject: string;
    readonly link: string;
    readonly value: number;
    readonly unit: string;
  }[];
  /** Links whose valves are shut at the start, by id: nothing passes them in what is reported here. */
  readonly shut: readonly string[];
  /** The method that `auto` would take, or the one that was asked for. */
  readonly method: string;
  /** A bound on how fast anything relaxes or grows, 1/s. */
  readonly fastestRelaxation: number;
}

/**
 * @throws ScenarioFault where the physics finds the scenario impossible
 */
export function atRest(scenario: Scenario): RestReport {
  const { network, amounts, sizes, pressureSignal } = compileOrThrow(scenario);
  const system = createNetworkSystem(network, scenario.run.tolerance, pressureSignal);
  system.state.size.set(sizes);
  const alive = new Uint8Array(network.nodes.count).fill(1);
  const linkOpen = network.links.map((table) =>
    Uint8Array.from({ length: table.count }, (_, l) => (isValveOpen(table, l, 0) ? 1 : 0)),
  );
  system.setActive(alive, linkOpen);
  const bound = system.rateBound(0, amounts);
  const carries = carriesApart(carriedCandidates(network), alive, scenario.run.onVanish);
  const method = chooseMethod(system, amounts, scenario.run.until, scenario.run.method, carries);
  if (!system.evaluate(0, amounts, true)) throw new Error('a compiled scenario has no state');
  const pairs = createPairs(system, linkOpen, scenario.run.until);
  const frame = createFrameMaker(network).make(system, alive, linkOpen, pairs, 0, amounts, 0);
  const modes = networkModes(system, alive, linkOpen, 0);
  const name = (i: number): string => network.nodeName(network.nodes.origin[i]!);
  return {
    frame,
    growing: {
      count: modes.count,
      fastestRate: modes.fastestRate,
      feeds: modes.feeds.map(name),
      starves: modes.starves.map(name),
      caveat: modes.caveat,
    },
    limits: exceeded({ system, alive, linkOpen, pairs }),
    shut: network.links.flatMap((table, g) =>
      Array.from(table.origin, (origin, l) => (linkOpen[g]![l] === 0 ? network.linkName(origin) : '')).filter(
        (link) => link !== '',
      ),
    ),
    method: method.name,
    fastestRelaxation: bound,
  };
}

/** What a network is outside of as it stands. */
function exceeded(context: WatchContext): RestReport['limits'] {
  const watch = watchLimits(context);
  if (watch === null) return [];
  const over = new Float64Array(watch.count);
  watch.evaluate(0, over);
  return Array.from(over.keys())
    .filter((k) => over[k]! > 0)
    .map((k) => watch.tell(k, 0, true, true))
    .filter((told) => told !== null)
    .map(({ subject, link, value, unit, detail }) => ({ subject, link, value, unit, detail }));
}

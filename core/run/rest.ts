/** A scenario before it runs: its bubbles and pairs, whether the network as drawn is stable, and which laws it is outside of. */
import { chooseMethod } from '../integrate2/choose.ts';
import { rateBound } from '../integrate2/rate-bound.ts';
import type { Scenario } from '../scenario/schema.ts';
import { compileOrThrow } from './drive.ts';
import { createFrameMaker } from './frames.ts';
import { excess, networkLimits } from './limits.ts';
import { networkModes } from './modes.ts';
import { createPairs } from './pairs.ts';
import type { Frame } from './record.ts';
import { isValveOpen } from './schedule.ts';
import { createNetworkSystem } from './system.ts';

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
  const bound = rateBound(system, 0, amounts);
  const method = chooseMethod(system, amounts, scenario.run.until, scenario.run.method, false);
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
    limits: networkLimits(system, alive, linkOpen)
      .filter((limit) => limit.present() && excess(limit, 0) > 0)
      .map((limit) => ({ detail: limit.detail, subject: limit.subject, link: limit.link, value: limit.value(0), unit: limit.unit })),
    method: method.name,
    fastestRelaxation: bound,
  };
}

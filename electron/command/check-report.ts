/**
 * What a check found, as plain data in SI: printed as JSON for scripts, made words by check-words.ts for a person.
 */
import type { RestReport } from '../../core/run/rest.ts';
import type { Fault } from '../../core/scenario/fault.ts';
import { BUBBLE_STATES } from '../../core/run/record.ts';
import type { Scenario } from '../../core/scenario/schema.ts';
import { waveformValue } from '../../core/network/waveform.ts';

export interface BubbleAtRest {
  readonly bubble: string;
  readonly radius_m: number;
  readonly pressure_Pa: number;
  /** Above the ambient pressure at the start. */
  readonly overpressure_Pa: number;
  readonly tension_N_per_m: number;
  readonly elasticity_N_per_m: number;
  readonly coverage: number;
  readonly index: number;
  readonly state: string;
}

export interface PairAtRest {
  readonly link: string;
  readonly from: string;
  readonly to: string;
  readonly flow_mol_per_s: number;
  readonly margin: number;
  readonly rate_per_s: number;
}

export interface CheckReport {
  readonly ok: true;
  readonly scenario: { readonly title: string; readonly file: string; readonly sha256: string };
  readonly temperature_K: number;
  readonly until_s: number;
  /** Numbers of nodes and of links by kind. */
  readonly nodes: Readonly<Record<string, number>>;
  readonly links: Readonly<Record<string, number>>;
  readonly species: readonly string[];
  readonly warnings: readonly Fault[];
  readonly bubbles: readonly BubbleAtRest[];
  /** In rising order of margin: the worst first. Links that are no pair are left out. */
  readonly pairs: readonly PairAtRest[];
  readonly growing: RestReport['growing'];
  readonly limits: RestReport['limits'];
  /** Links shut at the start, by id. */
  readonly shut: readonly string[];
  readonly method: string;
  readonly fastestRelaxation_per_s: number;
}

export function checkReport(
  scenario: Scenario,
  source: { readonly file: string; readonly sha256: string },
  warnings: readonly Fault[],
  rest: RestReport,
): CheckReport {
  const { frame } = rest;
  const ambient = waveformValue(scenario.ambient.pressure, 0);
  const { pairs } = frame;
  return {
    ok: true,
    scenario: { title: scenario.title, ...source },
    temperature_K: scenario.temperature,
    until_s: scenario.run.until,
    nodes: countsByKind(scenario.nodes),
    links: countsByKind(scenario.links),
    species: scenario.species,
    warnings,
    bubbles: frame.bubbleIds.map((bubble, row) => ({
      bubble,
      radius_m: frame.radius[row]!,
      pressure_Pa: frame.pressure[row]!,
      overpressure_Pa: frame.pressure[row]! - ambient,
      tension_N_per_m: frame.tension[row]!,
      elasticity_N_per_m: frame.elasticity[row]!,
      coverage: frame.coverage[row]!,
      index: frame.index[row]!,
      state: BUBBLE_STATES[frame.state[row]!]!,
    })),
    pairs: Array.from({ length: pairs.count }, (_, row) => ({
      link: pairs.link[row]!,
      from: pairs.from[row]!,
      to: pairs.to[row]!,
      flow_mol_per_s: pairs.flow[row]!,
      margin: pairs.margin[row]!,
      rate_per_s: pairs.rate[row]!,
    }))
      .filter((pair) => !Number.isNaN(pair.margin))
      .sort((a, b) => a.margin - b.margin || b.rate_per_s - a.rate_per_s),
    growing: rest.growing,
    shut: rest.shut,
    limits: rest.limits,
    method: rest.method,
    fastestRelaxation_per_s: rest.fastestRelaxation,
  };
}

function countsByKind(items: readonly { readonly kind: string }[]): Record<string, number> {
  const counts: Record<string, number> = {};
  for (const { kind } of items) counts[kind] = (counts[kind] ?? 0) + 1;
  return counts;
}

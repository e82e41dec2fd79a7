/** A scenario as an object, loaded and carried through: what tests of whole runs begin with. */
import { startRun } from '../core/run/drive.ts';
import type { Frame, RunEvent, RunResult } from '../core/run/record.ts';
import { loadScenario } from '../core/scenario/load.ts';
import type { Scenario } from '../core/scenario/schema.ts';

/** What is kept of a frame. */
export interface Kept {
  readonly time: number;
  readonly radius: Readonly<Record<string, number>>;
  readonly pressure: Readonly<Record<string, number>>;
  readonly amount: Readonly<Record<string, number>>;
  readonly margin: Readonly<Record<string, number>>;
  readonly rate: Readonly<Record<string, number>>;
  readonly flow: Readonly<Record<string, number>>;
  readonly R21: number;
  readonly bubbles: number;
  readonly gasBalance: number;
}

export interface Carried {
  readonly events: readonly RunEvent[];
  readonly frames: readonly Kept[];
  readonly result: RunResult;
}

/** @throws with the faults where the document is not sound */
export function scenarioOf(document: object): Scenario {
  const loaded = loadScenario(JSON.stringify({ format: 'frothwright', version: 1, gases: { air: {} }, ...document }));
  if (!loaded.ok) throw new Error(loaded.faults.map((fault) => `${fault.path}: ${fault.message}`).join('\n'));
  return loaded.scenario;
}

/** @param slice steps at a time */
export function carryThrough(document: object, slice = 1000): Carried {
  const events: RunEvent[] = [];
  const frames: Kept[] = [];
  const run = startRun(scenarioOf(document), {
    event: (event) => void events.push({ ...event }),
    frame: (frame) => void frames.push(keep(frame)),
  });
  while (!run.finished) run.advance(slice);
  return { events, frames, result: run.result() };
}

function keep(frame: Frame): Kept {
  const bubbles = (values: Float64Array) => Object.fromEntries(frame.bubbleIds.map((id, row) => [id, values[row]!]));
  const { pairs } = frame;
  const ofPairs = (values: Float64Array) =>
    Object.fromEntries(Array.from({ length: pairs.count }, (_, row) => [pairs.link[row]!, values[row]!]));
  return {
    time: frame.time,
    radius: bubbles(frame.radius),
    pressure: bubbles(frame.pressure),
    amount: bubbles(frame.amount),
    margin: ofPairs(pairs.margin),
    rate: ofPairs(pairs.rate),
    flow: ofPairs(pairs.flow),
    R21: frame.series.R21,
    bubbles: frame.series.bubbles,
    gasBalance: frame.series.gasBalance,
  };
}

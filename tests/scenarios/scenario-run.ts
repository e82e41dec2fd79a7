/**
 * A scenario of scenarios/ carried through by the command's own code, in this process: its files as texts, and its
 * tables as records. What the tests of this folder read, as an engineer would read the files.
 */
import { mkdtempSync, readdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { csvParse } from 'd3-dsv';
import { startRun } from '../../core/run/drive.ts';
import { executeRun } from '../../electron/command/run.ts';
import type { RunSummary } from '../../electron/command/run-summary.ts';
import { fakeTerminal } from '../electron/command/fake-terminal.ts';

const SCENARIOS = 'scenarios';
const ENDING = '.froth.json';

/** The names of all scenarios, without their ending, in the order of the alphabet. */
export const SCENARIO_NAMES: readonly string[] = readdirSync(SCENARIOS)
  .filter((file) => file.endsWith(ENDING))
  .map((file) => file.slice(0, -ENDING.length))
  .sort();

/** The text of a scenario's file. */
export function scenarioText(name: string): string {
  return readFileSync(join(SCENARIOS, `${name}${ENDING}`), 'utf8');
}

export interface EventRow {
  readonly time: number;
  readonly event: string;
  readonly subject: string;
  readonly partner: string;
  readonly link: string;
  readonly value: number;
  readonly unit: string;
  readonly detail: string;
}

/** A row of a table of numbers, by the names of its columns; texts where the field is no number. */
export type Row = Readonly<Record<string, string>>;

export interface ScenarioRun {
  readonly status: number;
  /** What was said on standard error. */
  readonly complaint: string;
  /** The text of every file, by its name. */
  readonly files: Readonly<Record<string, string>>;
  readonly events: readonly EventRow[];
  readonly series: readonly Row[];
  readonly bubbles: readonly Row[];
  readonly pairs: readonly Row[];
  readonly summary: RunSummary;
}

/**
 * Runs a scenario.
 * @param text of the scenario's file
 * @param frames in place of the file's own number; null: the file's own
 */
export async function runScenario(text: string, frames: number | null): Promise<ScenarioRun> {
  const directory = mkdtempSync(join(tmpdir(), 'frothwright-scenario-'));
  try {
    const scenario = join(directory, `run${ENDING}`);
    const out = join(directory, 'results');
    writeFileSync(scenario, text);
    const terminal = fakeTerminal(false);
    const status = await executeRun(
      { kind: 'run', scenario, out, until: null, frames, tables: null, quiet: true, json: false },
      { terminal, version: '0.0.0', startRun },
    );
    const files = Object.fromEntries(readdirSync(out).map((file) => [file, readFileSync(join(out, file), 'utf8')]));
    return {
      status,
      complaint: terminal.said().err,
      files,
      events: csvParse(files['events.csv']!).map(eventOf),
      series: csvParse(files['series.csv']!),
      bubbles: csvParse(files['bubbles.csv']!),
      pairs: csvParse(files['pairs.csv']!),
      summary: JSON.parse(files['summary.json']!) as RunSummary,
    };
  } finally {
    rmSync(directory, { recursive: true, force: true });
  }
}

function eventOf(row: Row): EventRow {
  const text = (column: string): string => row[column] ?? '';
  return {
    time: Number(text('time_s')),
    event: text('event'),
    subject: text('subject'),
    partner: text('partner'),
    link: text('link'),
    value: text('value') === '' ? NaN : Number(text('value')),
    unit: text('unit'),
    detail: text('detail'),
  };
}

/**
 * How a run went: summary.json for scripts, and the closing words for a person at a terminal.
 */
import type { TableName } from '../../core/exports/run-tables.ts';
import { TABLE_NAMES } from '../../core/exports/run-tables.ts';
import type { EventName, RunEvent, RunResult } from '../../core/run/record.ts';
import { humanTime } from './human.ts';
import type { TableOutcome } from './table-writer.ts';
import { tableFile } from './table-writer.ts';

/** What summary.json holds. Lengths of time in s; balances relative. */
export interface RunSummary {
  readonly program: 'frothwright';
  readonly version: string;
  readonly scenario: { readonly title: string; readonly file: string; readonly sha256: string };
  readonly endTime_s: number;
  readonly stop: RunResult['stop'];
  readonly method: string;
  readonly steps: number;
  readonly rejected: number;
  readonly rateEvaluations: number;
  readonly wallTime_s: number;
  readonly bubblesLeft: number;
  readonly events: RunResult['eventCounts'];
  readonly gasBalance: number;
  readonly surfactantBalance: number;
  readonly warnings: readonly string[];
  readonly criteria: readonly (Readonly<Record<string, unknown>> & {
    readonly verdict: 'not judged';
    readonly sentence: string;
  })[];
  /** By file: the number of rows, or why it was not written. */
  readonly tables: Readonly<Record<string, number | string>>;
}

export interface SummaryParts {
  readonly version: string;
  readonly title: string;
  readonly file: string;
  readonly sha256: string;
  readonly result: RunResult;
  /** Of the loader; the run's own come with the result. */
  readonly warnings: readonly string[];
  readonly wallTime: number; // s
  readonly criteria: readonly object[];
  readonly tables: Readonly<Record<TableName, TableOutcome>>;
}

export function runSummary(parts: SummaryParts): RunSummary {
  const { result } = parts;
  return {
    program: 'frothwright',
    version: parts.version,
    scenario: { title: parts.title, file: parts.file, sha256: parts.sha256 },
    endTime_s: result.endTime,
    stop: result.stop,
    method: result.method,
    steps: result.steps,
    rejected: result.rejected,
    rateEvaluations: result.rateEvaluations,
    wallTime_s: parts.wallTime,
    bubblesLeft: result.bubblesLeft,
    events: result.eventCounts,
    gasBalance: result.worstGasBalance,
    surfactantBalance: result.worstSurfactantBalance,
    warnings: [...new Set([...parts.warnings, ...result.warnings])],
    criteria: parts.criteria.map((criterion) => ({
      ...criterion,
      verdict: 'not judged' as const,
      sentence: 'This version does not judge criteria yet; read the measure from the tables.',
    })),
    tables: Object.fromEntries(
      TABLE_NAMES.map((table) => {
        const outcome = parts.tables[table];
        return [tableFile(table), outcome.written ? outcome.rows : `not written: ${outcome.reason}`];
      }),
    ),
  };
}

/** The first events a person asks for, as they happened. */
export interface Highlights {
  firstUnstable: RunEvent | null;
  firstVanished: RunEvent | null;
  lastVanished: RunEvent | null;
}

/** Keeps the events that the closing words name. */
export function noteHighlight(highlights: Highlights, event: RunEvent): void {
  if (event.event === 'pair-unstable') highlights.firstUnstable ??= event;
  if (event.event === 'bubble-vanished') {
    highlights.firstVanished ??= event;
    highlights.lastVanished = event;
  }
}

const EVENT_WORDS: Readonly<Record<EventName, readonly [one: string, many: string]>> = {
  'pair-unstable': ['pair turned unstable', 'pairs turned unstable'],
  'pair-stable': ['pair turned stable', 'pairs turned stable'],
  'bubble-vanished': ['bubble vanished', 'bubbles vanished'],
  'mouth-passed': ['bubble shrank past its mouth', 'times a bubble shrank past its mouth'],
  'mouth-regained': ['bubble regained its mouth', 'times a bubble regained its mouth'],
  'split-begins': ['film split into two surface phases', 'times a film split into two surface phases'],
  'split-ends': ['film became one surface phase again', 'times a film became one surface phase again'],
  'micelles-begin': ['film reached the cmc', 'times a film reached the cmc'],
  'micelles-end': ['film fell below the cmc', 'times a film fell below the cmc'],
  'collapse-begins': ['monolayer began to collapse', 'times a monolayer began to collapse'],
  'collapse-ends': ['monolayer stopped collapsing', 'times a monolayer stopped collapsing'],
  'film-ruptured': ['film ruptured', 'films ruptured'],
  'bubbles-merged': ['pair of bubbles merged', 'pairs of bubbles merged'],
  'valve-opened': ['valve opened', 'times a valve opened'],
  'valve-shut': ['valve shut', 'times a valve shut'],
  'limit-exceeded': ['law used outside its validity', 'laws used outside their validity'],
  'criterion-broken': ['criterion broken', 'criteria broken'],
  'run-ended': ['run ended', 'runs ended'],
};

/** The closing words: what happened, in the order a person asks, and where the files are. Lines end in LF. */
export function closingWords(summary: RunSummary, highlights: Highlights, directory: string): string {
  const lines: string[] = [summary.scenario.title === '' ? summary.scenario.file : summary.scenario.title];
  lines.push(`  ${endSentence(summary)}`);
  for (const [name, words] of Object.entries(EVENT_WORDS)) {
    const count = name === 'run-ended' ? 0 : (summary.events[name as EventName] ?? 0);
    if (count > 0) lines.push(`  ${count} ${count === 1 ? words[0] : words[1]}`);
  }
  const { firstUnstable, firstVanished, lastVanished } = highlights;
  if (firstUnstable !== null) {
    lines.push(`  First unstable pair: ${pairName(firstUnstable)} at ${humanTime(firstUnstable.time)}`);
  }
  if (firstVanished !== null && lastVanished !== null) {
    const last = lastVanished === firstVanished ? '' : `, last: ${vanishing(lastVanished)}`;
    lines.push(`  First to vanish: ${vanishing(firstVanished)}${last}`);
  }
  for (const warning of summary.warnings) lines.push(`  Warning: ${warning}`);
  for (const [file, rows] of Object.entries(summary.tables)) {
    if (typeof rows === 'string' && !rows.includes('not asked')) lines.push(`  ${file} ${rows}`);
  }
  lines.push(`  Files are in ${directory}`);
  return `${lines.join('\n')}\n`;
}

function endSentence(summary: RunSummary): string {
  const left = `${summary.bubblesLeft} ${summary.bubblesLeft === 1 ? 'bubble is' : 'bubbles are'} left`;
  const end = humanTime(summary.endTime_s);
  switch (summary.stop.kind) {
    case 'done':
      return `Ran to ${end} (${summary.steps} steps, ${summary.method}); ${left}.`;
    case 'interrupted':
      return `Stopped by you at ${end}; ${left}.`;
    case 'failed':
      return `The solver could not go on at ${end}; ${left}.`;
  }
}

function pairName(event: RunEvent): string {
  const pair = event.partner === '' ? event.subject : `${event.subject} and ${event.partner}`;
  return event.link === '' ? pair : `${pair} (${event.link})`;
}

function vanishing(event: RunEvent): string {
  return `${event.subject} at ${humanTime(event.time)}`;
}

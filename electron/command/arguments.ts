/**
 * Argv in, task out: what a person asked for as plain data, or the sentence that says why it cannot be understood.
 * Pure: nothing is read, written or run here.
 */
import { parseArgs } from 'node:util';
import type { TableName } from '../../core/exports/run-tables.ts';
import { TABLE_NAMES } from '../../core/exports/run-tables.ts';
import { nearestName } from '../../core/scenario/nearest.ts';
import type { CommandName } from './help.ts';
import { COMMAND_NAMES, LATER_COMMANDS } from './help.ts';
import { readDuration } from './duration.ts';

export interface RunTask {
  readonly kind: 'run';
  readonly scenario: string;
  readonly out: string;
  /** End of the run, s; null: the scenario's. */
  readonly until: number | null;
  /** Number of frames; null: the scenario's. */
  readonly frames: number | null;
  /** The tables to write however long they are; null: all that stay under the row limit. */
  readonly tables: readonly TableName[] | null;
  readonly quiet: boolean;
  readonly json: boolean;
}

export interface CheckTask {
  readonly kind: 'check';
  readonly scenario: string;
  readonly json: boolean;
}

export type Task =
  | RunTask
  | CheckTask
  | { readonly kind: 'schema' }
  | { readonly kind: 'help'; readonly about: CommandName | null }
  | { readonly kind: 'version'; readonly json: boolean }
  | BadUsage;

export interface BadUsage {
  readonly kind: 'bad-usage';
  /** What was given, and what was expected. */
  readonly sentence: string;
  readonly json: boolean;
}

/** The options of each command; `true` marks one that takes a value. */
const COMMAND_OPTIONS: Readonly<Record<CommandName, Readonly<Record<string, boolean>>>> = {
  run: { out: true, until: true, frames: true, tables: true, quiet: false, json: false },
  check: { json: false },
  schema: { json: false },
};

/** As the scenario's own `run.frames`. */
const MOST_FRAMES = 10_000_000;

/** An option of the contract that is not here yet. */
const LATER_OPTIONS: readonly string[] = ['judge'];

/** Understands the words after the program's name. Never throws. */
export function parseArguments(argv: readonly string[]): Task {
  const json = argv.includes('--json');
  try {
    return understand(argv, json);
  } catch (error) {
    if (error instanceof UsageFault) return { kind: 'bad-usage', sentence: error.message, json };
    throw error;
  }
}

class UsageFault extends Error {}

function understand(argv: readonly string[], json: boolean): Task {
  const [first, ...rest] = argv;
  if (first === undefined) throw new UsageFault('a command is needed: run, check or schema. See frothwright --help.');
  if (first === '--help' || first === '-h') return { kind: 'help', about: null };
  if (first === '--version') return { kind: 'version', json };
  if (first === '--json' && rest.length === 1 && rest[0] === '--version') return { kind: 'version', json };
  if (first.startsWith('-')) throw new UsageFault(`the command comes first, before ${first}: run, check or schema.`);
  const command = commandNamed(first);
  const { values, positionals } = readOptions(command, rest);
  if (values.has('help')) return { kind: 'help', about: command };

  if (command === 'schema') {
    if (positionals.length > 0) throw new UsageFault(`schema takes no file; got ${quoted(positionals)}.`);
    return { kind: 'schema' };
  }
  const [scenario, ...others] = positionals;
  if (scenario === undefined || scenario === '') throw new UsageFault(`${command} needs a scenario file.`);
  if (others.length > 0) {
    throw new UsageFault(
      `${command} takes one scenario file; got also ${quoted(others)}. A name or value with spaces goes in quotes.`,
    );
  }
  if (command === 'check') return { kind: 'check', scenario, json };

  const out = values.get('out');
  if (out === undefined) throw new UsageFault('run needs --out DIR, the directory for its files.');
  return {
    kind: 'run',
    scenario,
    out,
    until: optional(values.get('until'), untilValue),
    frames: optional(values.get('frames'), framesValue),
    tables: optional(values.get('tables'), tablesValue),
    quiet: values.has('quiet'),
    json,
  };
}

function commandNamed(word: string): CommandName {
  const command = COMMAND_NAMES.find((name) => name === word);
  if (command !== undefined) return command;
  if (LATER_COMMANDS.includes(word)) {
    throw new UsageFault(`${word} comes with a later version; this one has run, check and schema.`);
  }
  const meant = nearestName(word, COMMAND_NAMES);
  const hint = meant === null ? 'run, check and schema are' : `did you mean ${meant}?`;
  throw new UsageFault(`"${word}" is not a command; ${hint}${meant === null ? ' the commands there are.' : ''}`);
}

/** The options and the other words of a command. */
function readOptions(
  command: CommandName,
  words: readonly string[],
): { values: Map<string, string>; positionals: string[] } {
  const known = COMMAND_OPTIONS[command];
  const options = Object.fromEntries(
    Object.entries({ ...known, help: false }).map(([name, takesValue]) => [
      name,
      { type: takesValue ? ('string' as const) : ('boolean' as const) },
    ]),
  );
  const { tokens } = parseArgs({
    args: [...words],
    options: { ...options, help: { type: 'boolean', short: 'h' } },
    strict: false,
    allowPositionals: true,
    tokens: true,
  });
  const values = new Map<string, string>();
  const positionals: string[] = [];
  for (const token of tokens) {
    if (token.kind === 'positional') positionals.push(token.value);
    if (token.kind !== 'option') continue;
    const { name, rawName, value } = token;
    if (!(name in options)) throw new UsageFault(unknownOption(command, name, rawName));
    if (values.has(name)) throw new UsageFault(`${rawName} is given twice.`);
    if (known[name] !== true) {
      if (value !== undefined) throw new UsageFault(`${rawName} takes no value; got "${value}".`);
      values.set(name, '');
      continue;
    }
    // The word after an option is its value, unless it looks like the next option.
    if (value === undefined || value === '' || (value.startsWith('--') && !token.inlineValue)) {
      throw new UsageFault(`${rawName} needs a value. See frothwright ${command} --help.`);
    }
    values.set(name, value);
  }
  return { values, positionals };
}

function unknownOption(command: CommandName, name: string, rawName: string): string {
  if (LATER_OPTIONS.includes(name)) {
    return `${rawName} comes with a later version; this one reports criteria as not judged.`;
  }
  const known = [...Object.keys(COMMAND_OPTIONS[command]), 'help'];
  const meant = rawName.startsWith('--') ? nearestName(name, known) : null;
  if (meant !== null) return `${command} has no option ${rawName}; did you mean --${meant}?`;
  return `${command} has no option ${rawName}; it takes ${known.map((option) => `--${option}`).join(', ')}.`;
}

function untilValue(text: string): number {
  const duration = readDuration(text);
  if (!duration.ok) throw new UsageFault(`--until: ${duration.sentence}`);
  return duration.seconds;
}

function framesValue(text: string): number {
  const frames = /^\d+$/.test(text) ? Number(text) : Number.NaN;
  if (!(frames <= MOST_FRAMES)) {
    throw new UsageFault(`--frames: "${text}" is not a whole number from 0 to ${MOST_FRAMES}.`);
  }
  return frames;
}

function tablesValue(text: string): TableName[] {
  const names = text.split(',').map((name) => name.trim());
  for (const name of names) {
    if (TABLE_NAMES.some((table) => table === name)) continue;
    const meant = nearestName(name, TABLE_NAMES);
    const hint = meant === null ? '' : ` (did you mean ${meant}?)`;
    throw new UsageFault(`--tables: "${name}" is not a table${hint}; the tables are ${TABLE_NAMES.join(', ')}.`);
  }
  return TABLE_NAMES.filter((table) => names.includes(table));
}

function optional<Value>(text: string | undefined, read: (text: string) => Value): Value | null {
  return text === undefined ? null : read(text);
}

function quoted(words: readonly string[]): string {
  return words.map((word) => `"${word}"`).join(', ');
}

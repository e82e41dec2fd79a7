/**
 * A check in words, for the engineer who must say whether the bank holds: the answer first, then what it rests on.
 */
import type { BubbleAtRest, CheckReport, PairAtRest } from './check-report.ts';
import { faultLine } from './faults.ts';
import { alignedTable, human, humanNumber, humanTime, timeOfRate } from './human.ts';

const BUBBLES_SHOWN = 20;
const PAIRS_SHOWN = 10;
const NAMES_SHOWN = 6;

/** The report as lines that end in LF. */
export function checkWords(report: CheckReport): string {
  const { scenario, warnings } = report;
  const lines = [
    scenario.title === '' ? scenario.file : scenario.title,
    `  ${counted(report.nodes, NODE_WORDS)}; ${counted(report.links, LINK_WORDS)}`,
    `  Gas: ${report.species.join(', ')}. ${human(report.temperature_K, 'temperature')}.`,
    '',
    ...holdWords(report),
    ...section(
      'Warnings',
      warnings.map((warning) => faultLine(warning, scenario.file)),
    ),
    ...section(
      'Laws used outside their validity at rest',
      report.limits.map(
        ({ detail, subject, link, value, unit }) =>
          `${[subject, link].filter((name) => name !== '').join(', ')}: ${detail} (${humanNumber(value)}${unit === '' || unit === '1' ? '' : ` ${unit}`})`,
      ),
    ),
    ...bubbleWords(report.bubbles),
    ...pairWords(report.pairs),
    '',
    methodWords(report),
  ];
  return `${lines.join('\n')}\n`;
}

type Words = Readonly<Record<string, readonly [one: string, many: string]>>;
const NODE_WORDS: Words = {
  bubble: ['bubble', 'bubbles'],
  cavity: ['cavity', 'cavities'],
  reservoir: ['reservoir', 'reservoirs'],
  pool: ['pool', 'pools'],
};
const LINK_WORDS: Words = {
  tube: ['tube', 'tubes'],
  film: ['film', 'films'],
  liquid: ['liquid path', 'liquid paths'],
};

function counted(counts: Readonly<Record<string, number>>, words: Words): string {
  const parts = Object.entries(counts).map(([kind, count]) => {
    const [one, many] = words[kind] ?? [kind, kind];
    return `${count} ${count === 1 ? one : many}`;
  });
  return parts.length === 0 ? 'no links' : parts.join(', ');
}

function holdWords(report: CheckReport): string[] {
  const { growing, shut } = report;
  const provisos = [];
  if (shut.length > 0) provisos.push(`  Judged with shut what is shut at the start: ${names(shut)}.`);
  if (growing.caveat !== '') provisos.push(`  Mind: ${growing.caveat}.`);
  return [...verdictWords(report), ...provisos];
}

function verdictWords({ growing, pairs }: CheckReport): string[] {
  const unstable = pairs.filter((pair) => pair.margin < 1).length;
  if (growing.count === 0) {
    const but =
      unstable === 0
        ? ''
        : ` (${unstable} ${unstable === 1 ? 'pair' : 'pairs'} would run away if alone; the rest of the network holds ${unstable === 1 ? 'it' : 'them'})`;
    return [`At rest the network HOLDS: no disturbance grows${but}.`];
  }
  const modes = growing.count === 1 ? 'one disturbance grows' : `${growing.count} independent disturbances grow`;
  return [
    `At rest the network DOES NOT HOLD: ${modes}, the fastest e-fold in ${timeOfRate(growing.fastestRate)}.`,
    `  It feeds ${names(growing.feeds)} and starves ${names(growing.starves)}.`,
  ];
}

function names(ids: readonly string[]): string {
  if (ids.length === 0) return 'no bubble';
  const shown = ids.slice(0, NAMES_SHOWN).join(', ');
  return ids.length > NAMES_SHOWN ? `${shown} and ${ids.length - NAMES_SHOWN} more` : shown;
}

function bubbleWords(bubbles: readonly BubbleAtRest[]): string[] {
  if (bubbles.length === 0) return [];
  const all = bubbles.length <= BUBBLES_SHOWN;
  const shown = all ? bubbles : [...bubbles].sort((a, b) => a.index - b.index).slice(0, BUBBLES_SHOWN);
  const rows = shown.map((bubble) => [
    bubble.bubble,
    STATE_WORDS[bubble.state] ?? bubble.state,
    human(bubble.radius_m, 'length'),
    human(bubble.overpressure_Pa, 'pressure', 5),
    human(bubble.tension_N_per_m, 'surface-tension'),
    human(bubble.elasticity_N_per_m, 'surface-tension'),
    humanNumber(bubble.coverage),
    humanNumber(bubble.index),
  ]);
  const header = ['bubble', 'shape', 'radius', 'overpressure', 'tension', 'elasticity', 'coverage', 'index'];
  const title = all
    ? 'Bubbles (an index above 1 pushes back when its bubble shrinks)'
    : `Bubbles: the ${BUBBLES_SHOWN} of ${bubbles.length} with the lowest index (above 1 a bubble pushes back when it shrinks)`;
  return section(title, alignedTable(header, rows, 2));
}

const STATE_WORDS: Readonly<Record<string, string>> = {
  free: 'free',
  'cap-above-mouth': 'past hemisphere',
  'cap-below-mouth': 'below hemisphere',
};

function pairWords(pairs: readonly PairAtRest[]): string[] {
  if (pairs.length === 0) return [];
  const rows = pairs
    .slice(0, PAIRS_SHOWN)
    .map((pair) => [pair.link, pair.from, pair.to, humanNumber(pair.margin), fate(pair), timeOfRate(pair.rate_per_s)]);
  const title =
    pairs.length <= PAIRS_SHOWN
      ? 'Pairs, the worst first (a margin below 1 runs away)'
      : `Pairs: the worst ${PAIRS_SHOWN} of ${pairs.length} (a margin below 1 runs away)`;
  return section(title, alignedTable(['link', 'from', 'to', 'margin', 'alone it', 'e-fold in'], rows, 3));
}

/** A trapped gas can hold a pair (margin above 1) that creeps apart at the pace at which that gas leaks. */
function fate({ margin, rate_per_s: rate }: PairAtRest): string {
  if (margin < 1) return 'runs away';
  return rate > 0 ? 'creeps apart' : 'evens out';
}

function methodWords({ method, fastestRelaxation_per_s: rate, until_s: until }: CheckReport): string {
  const pace =
    rate > 0
      ? `: the fastest part of the network adjusts in ${timeOfRate(rate)}, the run lasts ${humanTime(until)}`
      : '';
  return `A run would use the ${method} method${pace}.`;
}

function section(title: string, lines: readonly string[]): string[] {
  return lines.length === 0 ? [] : ['', title, ...lines.map((line) => `  ${line}`)];
}

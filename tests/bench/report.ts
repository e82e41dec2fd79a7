/** The bench's table: what each problem took, how near it came, and how that stands to the peers and to what is wanted. */
import type { Measurement } from './child.ts';
import type { PeerMeasurement } from './peers.ts';
import { MOST_MEMORY, TWO_BUBBLES, type Entry } from './table.ts';

export interface Row {
  readonly entry: Entry;
  readonly ours: Measurement;
  /** Least and greatest of the rounds' medians, s. */
  readonly spread: readonly [number, number];
  readonly others: Readonly<Record<string, PeerMeasurement | { readonly failed: string }>>;
}

export function reportText(
  rows: readonly Row[],
  command: { readonly wall_s: number; readonly spread: readonly [number, number] } | null,
  withPeers: boolean,
): string {
  const header = ['problem', 'time', 'rounds', 'first run', 'steps', 'off by', 'memory'];
  if (withPeers) header.push('scipy', 'times faster', 'wanted', 'cvode', 'time over', 'wanted');
  const lines = rows.map((row) => [...ownCells(row), ...(withPeers ? peerCells(row) : [])]);
  const widths = header.map((title, c) => Math.max(title.length, ...lines.map((line) => line[c]!.length)));
  const text = [header, ...lines].map((line) => line.map((cell, c) => cell.padStart(widths[c]!)).join('  ')).join('\n');
  const closing = [
    '',
    'time: median of repeated runs in one process, over the rounds; first run: the same with the compiling in it.',
    ...(withPeers ? ['Each at the loosest tolerance with which it comes within what "off by" may be.'] : []),
    ...(command === null ? [] : [commandText(command)]),
    ...rows.filter(({ entry }) => entry.name === MOST_MEMORY.name).map(memoryText),
  ];
  return rows.length === 0 ? `${closing.slice(2).join('\n')}\n` : `${text}\n${closing.join('\n')}\n`;
}

function ownCells({ entry, ours, spread }: Row): string[] {
  return [
    entry.name,
    seconds(ours.wall_s),
    `${seconds(spread[0])}..${seconds(spread[1])}`,
    seconds(ours.first_s),
    String(ours.steps),
    ours.accuracy.toExponential(1),
    `${ours.peak_rss_mb.toFixed(0)} MB`,
  ];
}

function peerCells({ entry, ours, others }: Row): string[] {
  const { scipy, cvode } = others;
  return [
    ...against(scipy, (peer) => peer.wall_s / ours.wall_s, entry.targets.timesFasterThanScipy, true),
    ...against(cvode, (peer) => ours.wall_s / peer.wall_s, entry.targets.timeOverCvode, false),
  ];
}

function against(
  peer: PeerMeasurement | { readonly failed: string } | undefined,
  ratio: (peer: PeerMeasurement) => number,
  target: number,
  atLeast: boolean,
): string[] {
  if (peer === undefined) return ['-', '-', String(target)];
  if ('failed' in peer) return ['failed', '-', String(target)];
  const reached = ratio(peer);
  const met = atLeast ? reached >= target : reached <= target;
  return [seconds(peer.wall_s), reached.toPrecision(3), `${target} ${met ? 'met' : 'missed'}`];
}

function commandText({ wall_s: wall, spread }: { wall_s: number; spread: readonly [number, number] }): string {
  const met = wall <= TWO_BUBBLES.within ? 'met' : 'missed';
  return `The command on two bubbles, start to files: ${seconds(wall)} (${seconds(spread[0])}..${seconds(spread[1])}); wanted ${TWO_BUBBLES.within} s: ${met}.`;
}

function memoryText({ entry, ours }: Row): string {
  const met = ours.peak_rss_mb <= MOST_MEMORY.within ? 'met' : 'missed';
  return `Peak memory of ${entry.name}: ${ours.peak_rss_mb.toFixed(0)} MB; wanted ${MOST_MEMORY.within} MB: ${met}.`;
}

export function seconds(value: number): string {
  return value < 1 ? `${(1000 * value).toPrecision(3)} ms` : `${value.toPrecision(3)} s`;
}

/** The bench's table: what each problem took, how near it came, and how that stands to the peers and to what is wanted. */
import type { Failure, Summary } from './measurement.ts';
import { MEMORY, TWO_BUBBLES, type PeerName, type Target } from './targets.ts';
import type { CommandTime } from './two-bubbles.ts';

export interface Row {
  readonly target: Target;
  readonly ours: Summary | Failure;
  /** Of the peers that were run. */
  readonly peers: Readonly<Partial<Record<PeerName, Summary | Failure>>>;
}

export interface Report {
  readonly rows: readonly Row[];
  /** Null where it was not asked for. */
  readonly command: CommandTime | null;
  /** Peers that were asked for, those absent too. */
  readonly withPeers: boolean;
  /** MB of Node with the core loaded and nothing run. */
  readonly memoryOfNothing: number;
}

export function tableText({ rows, command, withPeers, memoryOfNothing }: Report): string {
  const header = ['problem', 'time', 'least to most', 'first run', 'steps', 'off by', 'memory'];
  if (withPeers) header.push('scipy', 'times faster', 'wanted', 'cvode', 'time over', 'wanted');
  const cells = rows.map((row) => [...ownCells(row), ...(withPeers ? peerCells(row) : [])]);
  const widths = header.map((title, c) => Math.max(title.length, ...cells.map((line) => line[c]!.length)));
  const aligned = [header, ...cells].map((line) =>
    line
      .map((cell, c) => cell.padStart(widths[c]!))
      .join('  ')
      .trimEnd(),
  );
  const notes: string[] = [];
  if (rows.length > 0) {
    notes.push(
      'time: median over the rounds, each a new process that repeats the problem; first run: with the compiling in it.',
      'off by: relative distance from the check values.',
      `memory: peak of the whole process; Node with the core loaded and nothing run takes ${memoryOfNothing.toFixed(0)} MB.`,
    );
  }
  notes.push(...rows.flatMap(memoryNote), ...rows.flatMap(failureNotes));
  if (command !== null) notes.push(commandNote(command));
  return [...(rows.length > 0 ? [...aligned, ''] : []), ...notes, ''].join('\n');
}

function ownCells({ target, ours }: Row): string[] {
  if ('failed' in ours) return [target.name, 'failed', '', '', '', '', ''];
  return [
    target.name,
    seconds(ours.wall_s),
    `${seconds(ours.spread_s[0])} to ${seconds(ours.spread_s[1])}`,
    ours.first_s === undefined ? '' : seconds(ours.first_s),
    String(ours.steps),
    offBy(ours, target),
    `${ours.peak_rss_mb.toFixed(0)} MB`,
  ];
}

function peerCells({ target, ours, peers: { scipy, cvode } }: Row): string[] {
  const cells = (peer: Summary | Failure | undefined, ratio: (mine: number, its: number) => number): string[] => {
    if (peer === undefined) return ['absent', ''];
    if ('failed' in peer) return ['failed', ''];
    const time = `${seconds(peer.wall_s)}${peer.accuracy <= target.accuracy ? '' : '*'}`;
    return [time, 'failed' in ours ? '' : ratio(ours.wall_s, peer.wall_s).toPrecision(3)];
  };
  const faster = cells(scipy, (mine, its) => its / mine);
  const over = cells(cvode, (mine, its) => mine / its);
  const { timesFasterThanScipy: least, timeOverCvode: most } = target;
  return [...faster, wanted(least, least / Number(faster[1])), ...over, wanted(most, Number(over[1]) / most)];
}

/** What is wanted, and whether it is met: `missedBy` is the factor that is lacking, 1 or less where it is met. */
function wanted(target: number, missedBy: number): string {
  // A ratio that could not be had is an empty cell, and that is neither.
  if (!Number.isFinite(missedBy) || missedBy === 0) return String(target);
  return `${target} ${missedBy <= 1 ? 'met' : `missed by ${missedBy.toPrecision(3)}`}`;
}

function offBy({ accuracy }: Summary, target: Target): string {
  return `${accuracy.toExponential(1)}${accuracy <= target.accuracy ? '' : ' FAILS'}`;
}

function failureNotes({ target, ours, peers }: Row): string[] {
  const notes = 'failed' in ours ? [`${target.name} failed: ${ours.failed}`] : [];
  for (const [name, peer] of Object.entries(peers)) {
    if ('failed' in peer) notes.push(`${name} on ${target.name}: ${peer.failed}`);
    else if (!(peer.accuracy <= target.accuracy)) {
      const off = peer.accuracy.toExponential(1);
      notes.push(`* ${name} on ${target.name} is off by ${off} at ${peer.tolerance}; ${target.accuracy} is wanted.`);
    }
  }
  return notes;
}

function memoryNote({ target, ours }: Row): string[] {
  if (target.name !== MEMORY.name || 'failed' in ours) return [];
  return [
    `peak memory of ${target.name}, MB: ${ours.peak_rss_mb.toFixed(0)}; wanted ${wanted(MEMORY.within_mb, ours.peak_rss_mb / MEMORY.within_mb)}.`,
  ];
}

function commandNote({ wall_s: wall, spread_s: [least, most] }: CommandTime): string {
  const range = `${seconds(wall)} (${seconds(least)} to ${seconds(most)})`;
  return `${TWO_BUBBLES.name}, the command from start to files, s: ${range}; wanted ${wanted(TWO_BUBBLES.within_s, wall / TWO_BUBBLES.within_s)}.`;
}

export function seconds(value: number): string {
  return value < 1 ? `${(1000 * value).toPrecision(3)} ms` : `${value.toPrecision(3)} s`;
}

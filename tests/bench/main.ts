/**
 * The bench: every problem in processes of its own, checked against its check values, and where asked the peers in between, so that
 * all feel the same machine. Prints a table, or JSON.
 */
import { readArguments, USAGE, type Asked } from './arguments.ts';
import { HOLD, ladder, loosest, type Rung } from './calibrate.ts';
import { summarise, type Check, type Failure, type Measurement, type Summary } from './measurement.ts';
import {
  findPeers,
  memoryOfNothing,
  ours as ourProgram,
  type Peer,
  type PeersFound,
  type Program,
} from './programs.ts';
import { seconds, tableText, type Row } from './table.ts';
import { TARGETS, TWO_BUBBLES, type PeerName, type Target } from './targets.ts';
import { timeCommand, type CommandTime } from './two-bubbles.ts';

const say = (text: string): void => void process.stderr.write(`${text}\n`);

/** `directory` holds the bundle. The exit status: 0; 1 where a problem failed or missed its check values; 2 bad usage. */
export function main(words: readonly string[], root: string, directory: string): number {
  const asked = readArguments(words);
  if ('help' in asked) {
    process.stdout.write(USAGE);
    return 0;
  }
  if ('fault' in asked) {
    say(`bench: ${asked.fault}\n${USAGE}`);
    return 2;
  }
  const ours = ourProgram(directory);
  const found: PeersFound = asked.peers
    ? findPeers(asked.peersIn, root, directory, asked.peerTimeout)
    : { peers: [], absent: {} };
  for (const [name, why] of Object.entries(found.absent)) say(`absent: ${name}: ${why}`);
  const targets = TARGETS.filter(({ name }) => asked.names.includes(name));
  if (asked.calibrate) {
    for (const target of targets) calibrate(target, ours, found.peers, asked.tolerance);
    return 0;
  }
  const rows = targets.map((target) => runRounds(target, ours, found.peers, asked));
  const command = asked.names.includes(TWO_BUBBLES.name) ? timeCommand(root, asked.repeat) : null;
  const report = { rows, command, withPeers: asked.peers, memoryOfNothing: memoryOfNothing(directory) };
  process.stdout.write(asked.json ? jsonText(rows, command, found.absent) : tableText(report));
  return verdict(rows);
}

/** Ours and the peers in turn; one that failed is not run again. */
function runRounds(target: Target, ours: Program, peers: readonly Peer[], { tolerance, repeat }: Asked): Row {
  const own = tolerance ?? target.tolerance;
  const said: Record<string, Measurement[]> = {};
  const failed: Record<string, Failure> = {};
  let check: Check | undefined;
  for (let round = 1; round <= repeat; round++) {
    for (const program of [ours, ...peers]) {
      if (program.name in failed) continue;
      say(`${target.name}, round ${round} of ${repeat}: ${program.name}`);
      const outcome = program.run(target, program.name === 'ours' ? own : target.peers[program.name]);
      if ('failed' in outcome) {
        failed[program.name] = outcome;
        // Without our child's check values no time of a peer means anything.
        if (check === undefined) return { target, ours: outcome, peers: {} };
        continue;
      }
      (said[program.name] ??= []).push(outcome);
      check ??= outcome.check;
    }
  }
  const summary = (name: PeerName | 'ours', at: number): Summary | Failure =>
    failed[name] ?? summarise(said[name]!, check!, at);
  return {
    target,
    ours: summary('ours', own),
    peers: Object.fromEntries(peers.map(({ name }) => [name, summary(name, target.peers[name])])),
  };
}

function calibrate(target: Target, ours: Program, peers: readonly Peer[], from: number | null): void {
  const first = ours.run(target, target.tolerance);
  if ('failed' in first || first.check === undefined) {
    say(`${target.name} failed: ${'failed' in first ? first.failed : 'no check values'}`);
    return;
  }
  const { check } = first;
  for (const program of [ours, ...peers]) {
    const tell = ({ tolerance, outcome }: Rung): void =>
      say(
        `${target.name} ${program.name} at ${tolerance}: ` +
          ('failed' in outcome
            ? outcome.failed
            : `off by ${outcome.accuracy.toExponential(1)}, ${outcome.steps} steps, ${seconds(outcome.wall_s)}`),
      );
    const run = (tolerance: number): Measurement | Failure => program.run(target, tolerance);
    const found = loosest(ladder(from), HOLD[program.name], target.accuracy, check, run, tell);
    const sentence = found === null ? `does not reach ${target.accuracy}` : `reaches ${target.accuracy} at ${found}`;
    process.stdout.write(`${target.name}: ${program.name} ${sentence}\n`);
  }
}

function jsonText(rows: readonly Row[], command: CommandTime | null, absent: PeersFound['absent']): string {
  const missing = Object.fromEntries(Object.entries(absent).map(([name, why]) => [name, { absent: why }]));
  const problems: object[] = rows.map(({ target, ours, peers }) => ({
    problem: target.name,
    ...ours,
    // A peer's own count of memory begins at that of this process, which holds the bundler: it would say nothing of the peer.
    peers: { ...withoutMemory(peers), ...missing },
  }));
  if (command !== null) problems.push({ problem: TWO_BUBBLES.name, ...command });
  return `${JSON.stringify(problems, null, 2)}\n`;
}

function withoutMemory(peers: Row['peers']): object {
  return Object.fromEntries(Object.entries(peers).map(([name, peer]) => [name, { ...peer, peak_rss_mb: undefined }]));
}

function verdict(rows: readonly Row[]): number {
  let status = 0;
  for (const { target, ours } of rows) {
    if ('failed' in ours) say(`bench: ${target.name} failed: ${ours.failed}`);
    else if (!(ours.accuracy <= target.accuracy)) {
      const off = ours.accuracy.toExponential(1);
      say(`bench: ${target.name} is off its check values by ${off}; ${target.accuracy} is wanted`);
    } else continue;
    status = 1;
  }
  return status;
}

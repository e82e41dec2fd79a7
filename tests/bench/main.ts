/**
 * The bench: every problem in a process of its own, checked against its check values, and where asked the peers in between, so that
 * all feel the same machine. Prints a table, or JSON.
 */
import { spawnSync } from 'node:child_process';
import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { pathToFileURL } from 'node:url';
import { parseArgs } from 'node:util';
import { makeProblem, measure, median, type Measurement } from './child.ts';
import { findCvode, findScipy, peersDirectory, type Peer, type PeerMeasurement } from './peers.ts';
import { reportText, type Row } from './report.ts';
import { ENTRIES, TWO_BUBBLES, type Entry } from './table.ts';

const USAGE = `bench [--only NAME,...] [--peers] [--peers-in DIR] [--rounds N] [--tolerance X] [--peer-timeout S] [--json]
  --only NAME,...   these problems alone: ${[...ENTRIES.map((entry) => entry.name), TWO_BUBBLES.name].join(', ')}
  --peers           the programs of other make too, in turn with ours
  --peers-in DIR    where they are (default: FROTHWRIGHT_PEERS, or ../shared/peers beside the checkout)
  --rounds N        rounds of the interleaved runs (default 3)
  --tolerance X     our run tolerance, in place of each problem's own
  --peer-timeout S  seconds after which a peer is given up (default 600)
  --json            the measurements as JSON
`;

/** Seconds that one process goes on repeating its problem. */
const SECONDS_A_PROCESS = 3;

export async function main(words: readonly string[], root: string): Promise<number> {
  if (words[0] === '--child') {
    const { kind, size, tolerance } = JSON.parse(words[1]!) as Entry;
    process.stdout.write(JSON.stringify(measure({ kind, size }, tolerance, SECONDS_A_PROCESS)));
    return 0;
  }
  const { values } = parseArgs({
    args: [...words],
    options: {
      only: { type: 'string' },
      peers: { type: 'boolean', default: false },
      'peers-in': { type: 'string' },
      rounds: { type: 'string', default: '3' },
      tolerance: { type: 'string' },
      'peer-timeout': { type: 'string', default: '600' },
      json: { type: 'boolean', default: false },
      help: { type: 'boolean', short: 'h', default: false },
    },
  });
  if (values.help) {
    process.stdout.write(USAGE);
    return 0;
  }
  const names = values.only?.split(',') ?? [...ENTRIES.map((entry) => entry.name), TWO_BUBBLES.name];
  const unknown = names.filter((name) => name !== TWO_BUBBLES.name && !ENTRIES.some((entry) => entry.name === name));
  if (unknown.length > 0) {
    process.stderr.write(`bench: no problem is called ${unknown.join(', ')}\n${USAGE}`);
    return 2;
  }
  const say = (text: string): void => void process.stderr.write(`${text}\n`);
  const peers = values.peers ? findPeers(values['peers-in'] ?? null, root, say) : [];
  const rows: Row[] = [];
  for (const entry of ENTRIES.filter(({ name }) => names.includes(name))) {
    const ours = values.tolerance === undefined ? entry : { ...entry, tolerance: Number(values.tolerance) };
    say(`${entry.name} ...`);
    rows.push(runProblem(ours, peers, Number(values.rounds), Number(values['peer-timeout']), root));
  }
  const command = names.includes(TWO_BUBBLES.name) ? timeCommand(root) : null;
  if (values.json) {
    const json = rows.map(({ entry, ours, others }) => ({ problem: entry.name, ...ours, peers: others }));
    process.stdout.write(`${JSON.stringify(json, null, 2)}\n`);
  } else process.stdout.write(reportText(rows, command, peers.length > 0));
  const inaccurate = rows.filter(({ entry, ours }) => !(ours.accuracy <= entry.accuracy));
  for (const { entry, ours } of inaccurate) {
    say(
      `bench: ${entry.name} is off its check value by ${ours.accuracy.toExponential(1)}; ${entry.accuracy} is allowed`,
    );
  }
  return Promise.resolve(inaccurate.length > 0 ? 1 : 0);
}

function findPeers(asked: string | null, root: string, say: (text: string) => void): Peer[] {
  const directory = peersDirectory(asked, root);
  const peers: Peer[] = [];
  for (const found of [findScipy(directory), findCvode(directory, root)]) {
    if ('peer' in found) peers.push(found.peer);
    else say(`absent: ${found.absent}`);
  }
  return peers;
}

function runProblem(entry: Entry, peers: readonly Peer[], rounds: number, timeout: number, root: string): Row {
  const { check } = makeProblem({ kind: entry.kind, size: entry.size }, entry.tolerance);
  const ours: Measurement[] = [];
  const others: Record<string, PeerMeasurement[]> = {};
  const failed: Record<string, { failed: string }> = {};
  for (let round = 0; round < rounds; round++) {
    ours.push(inProcess(entry, root));
    for (const peer of peers) {
      if (peer.name in failed) continue;
      const said = peer.measure(entry, check, timeout);
      if ('failed' in said) failed[peer.name] = said;
      else (others[peer.name] ??= []).push(said);
    }
  }
  const medianOf = (pick: (one: Measurement) => number): number => median(ours.map(pick));
  return {
    entry,
    ours: {
      ...ours[0]!,
      first_s: medianOf((one) => one.first_s),
      wall_s: medianOf((one) => one.wall_s),
      cpu_s: medianOf((one) => one.cpu_s),
      peak_rss_mb: Math.max(...ours.map((one) => one.peak_rss_mb)),
    },
    spread: [Math.min(...ours.map((one) => one.wall_s)), Math.max(...ours.map((one) => one.wall_s))],
    others: {
      ...failed,
      ...Object.fromEntries(
        Object.entries(others).map(([name, said]) => [
          name,
          { ...said[0]!, wall_s: median(said.map((one) => one.wall_s)) },
        ]),
      ),
    },
  };
}

function inProcess(entry: Entry, root: string): Measurement {
  const bundle = join(root, 'dist', 'bench', 'bench.mjs');
  const code = `import(${JSON.stringify(pathToFileURL(bundle).href)}).then((bench) => bench.main(process.argv.slice(1), ''))`;
  const words = ['--input-type=module', '--eval', code, '--', '--child', JSON.stringify(entry)];
  const ended = spawnSync(process.execPath, words, { encoding: 'utf8' });
  if (ended.status !== 0) throw new Error(`${entry.name}: ${ended.stderr}`);
  return JSON.parse(ended.stdout) as Measurement;
}

/** The built command on a file of two bubbles, from its start to its end, s. */
function timeCommand(root: string): { readonly wall_s: number; readonly spread: readonly [number, number] } {
  const launcher = join(root, 'electron', 'command', 'frothwright.mjs');
  const scenario = join(root, 'scenarios', 'two-bubbles-pure-water.froth.json');
  const directory = mkdtempSync(join(tmpdir(), 'frothwright-bench-'));
  const times: number[] = [];
  try {
    for (let round = 0; round < 6; round++) {
      const start = performance.now();
      const ended = spawnSync(process.execPath, [launcher, 'run', scenario, '--out', join(directory, 'out')]);
      if (ended.status !== 0) throw new Error(`the command failed: ${ended.stderr.toString()}`);
      // The first builds the command where it is older than its sources.
      if (round > 0) times.push((performance.now() - start) / 1000);
    }
  } finally {
    rmSync(directory, { recursive: true, force: true });
  }
  return { wall_s: median(times), spread: [Math.min(...times), Math.max(...times)] };
}

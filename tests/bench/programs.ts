/**
 * The programs that solve the problems: ours, and of other make, where they are at hand, SciPy by a script and SUNDIALS by a C program
 * that is compiled here. Each prints one line of JSON.
 */
import { spawnSync } from 'node:child_process';
import { existsSync } from 'node:fs';
import { join, resolve } from 'node:path';
import type { Failure, Measurement } from './measurement.ts';
import type { PeerName, Target } from './targets.ts';

type Work = Pick<Target, 'kind' | 'size'>;

export interface Program {
  readonly name: 'ours' | PeerName;
  run(work: Work, tolerance: number): Measurement | Failure;
}
export interface Peer extends Program {
  readonly name: PeerName;
}

const LIBRARIES = [
  'sundials_cvode',
  'sundials_arkode',
  'sundials_sunlinsolklu',
  'sundials_sunmatrixsparse',
  'sundials_nvecserial',
  'klu',
  'm',
];

export function ours(directory: string): Program {
  const child = join(directory, 'child.mjs');
  return {
    name: 'ours',
    run: ({ kind, size }, tolerance) => inProcess(process.execPath, [child, kind, String(size), String(tolerance)]),
  };
}

/** MB that Node takes with the core loaded and nothing run. */
export function memoryOfNothing(directory: string): number {
  const said = inProcess(process.execPath, [join(directory, 'child.mjs'), 'nothing']);
  return 'failed' in said ? NaN : said.peak_rss_mb;
}

/** The peers at hand, and of each that is not, by name, why. */
export interface PeersFound {
  readonly peers: readonly Peer[];
  readonly absent: Readonly<Partial<Record<PeerName, string>>>;
}

/** Looks where it is asked to, where the environment says, or beside the checkout; builds into `directory`. */
export function findPeers(asked: string | null, root: string, directory: string, timeout: number): PeersFound {
  const from = resolve(asked ?? process.env.FROTHWRIGHT_PEERS ?? join(root, '..', 'shared', 'peers'));
  const found = { scipy: findScipy(from, timeout), cvode: findCvode(from, directory, timeout) };
  const peers: Peer[] = [];
  const absent: Partial<Record<PeerName, string>> = {};
  for (const name of ['scipy', 'cvode'] as const) {
    const peer = found[name];
    if (typeof peer === 'string') absent[name] = peer;
    else peers.push(peer);
  }
  return { peers, absent };
}

function findScipy(from: string, timeout: number): Peer | string {
  const script = join(from, 'scipy_peer.py');
  if (!existsSync(script)) return `no ${script}`;
  const imported = spawnSync('python3', ['-c', 'import scipy'], { encoding: 'utf8' });
  if (imported.error !== undefined) return 'no python3';
  if (imported.status !== 0) return 'python3 has no scipy';
  return {
    name: 'scipy',
    run: ({ kind, size }, tolerance) => {
      const words = [script, kind, String(size), '--rtol', String(tolerance), '--atol', String(tolerance)];
      return inProcess('python3', words, timeout);
    },
  };
}

function findCvode(from: string, directory: string, timeout: number): Peer | string {
  const source = join(from, 'cvode_peer.c');
  if (!existsSync(source)) return `no ${source}`;
  const built = join(directory, 'cvode_peer');
  const flags = ['-Ofast', '-march=native', '-I/usr/include/suitesparse', source, '-o', built];
  const compiled = spawnSync('gcc', [...flags, ...LIBRARIES.map((library) => `-l${library}`)], { encoding: 'utf8' });
  if (compiled.error !== undefined) return 'no gcc';
  if (compiled.status !== 0) {
    const why = compiled.stderr.split('\n').find((line) => /error|cannot find/.test(line)) ?? '';
    return `it does not compile (${why.trim()}); on Debian: apt-get install libsundials-dev libsuitesparse-dev`;
  }
  const modes = { pool: 'smooth', contacts: 'erk', cycle: 'bdf' };
  return {
    name: 'cvode',
    run: ({ kind, size }, tolerance) => {
      const words = [kind, String(size), modes[kind], String(tolerance), String(tolerance)];
      return inProcess(built, words, timeout);
    },
  };
}

/** `timeout` in seconds; none when left out. */
function inProcess(command: string, words: readonly string[], timeout?: number): Measurement | Failure {
  const limit = timeout === undefined ? {} : { timeout: timeout * 1000 };
  const ended = spawnSync(command, words, { encoding: 'utf8', ...limit });
  if (ended.error !== undefined) {
    const late = (ended.error as NodeJS.ErrnoException).code === 'ETIMEDOUT';
    return { failed: late ? `not done after ${timeout ?? NaN} s` : ended.error.message };
  }
  if (ended.status !== 0)
    return { failed: faultOf(ended.stderr) ?? `ended with ${ended.signal ?? ended.status ?? ''}` };
  // Python writes NaN, which JSON does not know.
  return JSON.parse(ended.stdout.replace(/\bNaN\b/g, 'null')) as Measurement;
}

/** The sentence among a stack's lines, Node's or Python's. */
function faultOf(text: string): string | undefined {
  const lines = text.split('\n').filter((line) => line.trim() !== '');
  return lines.find((line) => /^\w*(Error|Exception|failed)\b.*:/.test(line)) ?? lines.at(-1);
}

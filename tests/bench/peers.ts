/**
 * Programs of other make that solve the same problems, where they are at hand: SciPy by a script, SUNDIALS by a C program that is
 * compiled here. Each prints one line of JSON.
 */
import { spawnSync } from 'node:child_process';
import { existsSync, mkdirSync } from 'node:fs';
import { join, resolve } from 'node:path';
import type { Problem } from './problems.ts';
import type { Entry } from './table.ts';

export interface PeerMeasurement {
  readonly wall_s: number;
  readonly steps: number;
  readonly accuracy: number;
  readonly tolerance: string;
  readonly peak_rss_mb: number;
}

export interface Peer {
  readonly name: 'scipy' | 'cvode';
  measure(entry: Entry, check: Problem['check'], timeout: number): PeerMeasurement | { readonly failed: string };
}

/** Where a peer is, or why there is none. */
export type PeerFound = { readonly peer: Peer } | { readonly absent: string };

const LIBRARIES = [
  'sundials_cvode',
  'sundials_arkode',
  'sundials_sunlinsolklu',
  'sundials_sunmatrixsparse',
  'sundials_nvecserial',
  'klu',
  'm',
];

/** Where the peers are looked for: as asked, by the environment, or beside the checkout. */
export function peersDirectory(asked: string | null, root: string): string {
  return resolve(asked ?? process.env.FROTHWRIGHT_PEERS ?? join(root, '..', 'shared', 'peers'));
}

export function findScipy(directory: string): PeerFound {
  const script = join(directory, 'scipy_peer.py');
  if (!existsSync(script)) return { absent: `scipy: no ${script}` };
  if (spawnSync('python3', ['-c', 'import scipy']).status !== 0) return { absent: 'scipy: python3 has no scipy' };
  const words = ({ kind, size, peers }: Entry): string[] => [
    ...[script, kind, String(size)],
    ...['--rtol', peers.scipy, '--atol', peers.scipy],
  ];
  return { peer: peer('scipy', 'python3', words) };
}

export function findCvode(directory: string, root: string): PeerFound {
  const source = join(directory, 'cvode_peer.c');
  if (!existsSync(source)) return { absent: `cvode: no ${source}` };
  const built = join(root, 'dist', 'bench', 'cvode_peer');
  mkdirSync(join(root, 'dist', 'bench'), { recursive: true });
  const flags = ['-Ofast', '-march=native', '-I/usr/include/suitesparse', source, '-o', built];
  const compiled = spawnSync('gcc', [...flags, ...LIBRARIES.map((library) => `-l${library}`)], { encoding: 'utf8' });
  if (compiled.status !== 0) {
    const why = compiled.error?.message ?? compiled.stderr.split('\n').find((line) => line.includes('error')) ?? '';
    return {
      absent: `cvode: it does not compile (${why}); on Debian: apt-get install libsundials-dev libsuitesparse-dev`,
    };
  }
  const modes = { pool: 'smooth', contacts: 'erk', cycle: 'bdf' };
  const words = ({ kind, size, peers }: Entry): string[] => [
    ...[kind, String(size), modes[kind]],
    ...[peers.cvode, peers.cvode],
  ];
  return { peer: peer('cvode', built, words) };
}

function peer(name: Peer['name'], command: string, words: (entry: Entry) => string[]): Peer {
  return {
    name,
    measure(entry, check, timeout) {
      const ended = spawnSync(command, words(entry), { encoding: 'utf8', timeout: timeout * 1000 });
      if (ended.error !== undefined) return { failed: ended.error.message };
      if (ended.status !== 0) return { failed: ended.stderr.trim().split('\n').at(-1) ?? `status ${ended.status}` };
      const said = JSON.parse(ended.stdout) as Record<string, number>;
      return {
        wall_s: said.wall_s!,
        steps: said.steps!,
        accuracy: peerAccuracy(said, check),
        tolerance: entry.peers[name],
        peak_rss_mb: said.peak_rss_mb!,
      };
    },
  };
}

function peerAccuracy(said: Record<string, number>, check: Problem['check']): number {
  const errors =
    check.radii === undefined
      ? [said.t_end! / check.endTime - 1, said.R21_end! / check.R21 - 1]
      : [said.r_min! / check.radii[0] - 1, said.r_max! / check.radii[1] - 1];
  return Math.max(...errors.map(Math.abs));
}

/** One problem, run in a process of its own: several times over, so that the first run shows what compiling costs. */
import { existsSync, readFileSync } from 'node:fs';
import { startNetworkRun } from '../../core/run/engine.ts';
import { contactsProblem, cycleProblem, poolProblem, type Problem } from './problems.ts';
import type { Entry } from './table.ts';

export interface Measurement {
  /** Seconds of the first run in the process, in which the code is compiled. */
  readonly first_s: number;
  /** Median of the runs after it (of the first where there is but one). */
  readonly wall_s: number;
  readonly cpu_s: number;
  readonly steps: number;
  readonly t_end: number;
  readonly R21_end: number;
  readonly left: number;
  /** The worst relative distance from the check values. */
  readonly accuracy: number;
  /** Greatest resident memory by the end of the first run, all of Node included, MB. */
  readonly peak_rss_mb: number;
}

interface Once {
  readonly wall: number;
  readonly cpu: number;
  readonly steps: number;
  readonly endTime: number;
  readonly R21: number;
  readonly left: number;
  readonly accuracy: number;
}

export function median(values: readonly number[]): number {
  const sorted = [...values].sort((a, b) => a - b);
  const middle = Math.floor(sorted.length / 2);
  return sorted.length % 2 === 1 ? sorted[middle]! : (sorted[middle - 1]! + sorted[middle]!) / 2;
}

export function makeProblem({ kind, size }: Pick<Entry, 'kind' | 'size'>, tolerance: number): Problem {
  switch (kind) {
    case 'pool':
      return poolProblem(size, tolerance);
    case 'contacts':
      return contactsProblem(size, tolerance);
    case 'cycle':
      return cycleProblem(size, tolerance);
  }
}

/** Instants a step at which the radii of a cycle's last period are read. */
const READINGS = 16;

function once(problem: Problem): Once {
  const { check } = problem;
  const cpu = process.cpuUsage();
  const start = performance.now();
  const run = startNetworkRun(problem.start, problem.settings, { event: () => undefined, frame: () => undefined });
  let least = Infinity;
  let greatest = 0;
  // Of a cycle the last period is read inside its steps; two seconds long.
  const lastPeriod = check.radii === undefined ? Infinity : check.endTime - 2;
  while (!run.finished) {
    const before = run.time;
    run.advance(check.radii === undefined ? 64 : 1);
    if (run.time <= lastPeriod) continue;
    for (let q = 0; q <= READINGS; q++) {
      const t = before + ((run.time - before) * q) / READINGS;
      if (t < lastPeriod) continue;
      for (const R of run.radiiAt(t)) {
        least = Math.min(least, R);
        greatest = Math.max(greatest, R);
      }
    }
  }
  const wall = (performance.now() - start) / 1000;
  const { user, system } = process.cpuUsage(cpu);
  const result = run.result();
  if (result.stop.kind !== 'done') throw new Error(`${problem.name} did not end: ${JSON.stringify(result.stop)}`);
  let sum = 0;
  let squares = 0;
  for (const R of run.radiiAt(run.time)) {
    sum += R;
    squares += R * R;
  }
  const R21 = squares / sum;
  const errors =
    check.radii === undefined
      ? [result.endTime / check.endTime - 1, R21 / check.R21 - 1]
      : [least / check.radii[0] - 1, greatest / check.radii[1] - 1];
  return {
    wall,
    cpu: (user + system) / 1e6,
    steps: result.steps,
    endTime: result.endTime,
    R21,
    left: result.bubblesLeft,
    accuracy: Math.max(...errors.map(Math.abs)),
  };
}

/** MB. Where /proc tells, it is asked: what the system's own count of a new process begins with is its parent's. */
function peakMemory(): number {
  const status = '/proc/self/status';
  const line = existsSync(status) ? /VmHWM:\s+(\d+) kB/.exec(readFileSync(status, 'utf8')) : null;
  return (line === null ? process.resourceUsage().maxRSS : Number(line[1])) / 1024;
}

/** Runs one problem for about `seconds`, once at least and nine times at most. */
export function measure(entry: Pick<Entry, 'kind' | 'size'>, tolerance: number, seconds: number): Measurement {
  const runs: Once[] = [];
  const start = performance.now();
  let peak = 0;
  do {
    runs.push(once(makeProblem(entry, tolerance)));
    // Runs that follow in the same process only add what was not yet collected.
    if (runs.length === 1) peak = peakMemory();
  } while (runs.length < 9 && performance.now() - start < 1000 * seconds);
  const first = runs[0]!;
  const warm = runs.length > 1 ? runs.slice(1) : runs;
  return {
    first_s: first.wall,
    wall_s: median(warm.map((run) => run.wall)),
    cpu_s: median(warm.map((run) => run.cpu)),
    steps: first.steps,
    t_end: first.endTime,
    R21_end: first.R21,
    left: first.left,
    accuracy: first.accuracy,
    peak_rss_mb: peak,
  };
}

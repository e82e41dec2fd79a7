/**
 * One problem in a process of its own: the entry of that process. It is run again and again for a while: the first run has the
 * compiling in it, which the peers have behind them, and is told apart; the time is the median of those after it. Memory is that of the
 * first run. Asked for `nothing`, it tells the memory of Node with the core loaded and nothing run.
 */
import { existsSync, readFileSync } from 'node:fs';
import { startNetworkRun } from '../../core/run/engine.ts';
import { median, type Measurement } from './measurement.ts';
import { contactsProblem, cycleProblem, poolProblem, type Problem } from './problems.ts';

const makers: Readonly<Record<string, (size: number, tolerance: number) => Problem>> = {
  pool: poolProblem,
  contacts: contactsProblem,
  cycle: cycleProblem,
};

/** The last cycle, s, and the grid on which its radii are read: the peers' own. */
const CYCLE = 2;
const READINGS = 2000;

/** A process goes on for about so many seconds, and for so many runs at most. */
const SECONDS = 3;
const MOST_RUNS = 9;

function measure(kind: string, size: number, tolerance: number): Measurement {
  const begun = performance.now();
  const first = once(kind, size, tolerance);
  const warm: Measurement[] = [];
  while (warm.length + 1 < MOST_RUNS && performance.now() - begun < 1000 * SECONDS)
    warm.push(once(kind, size, tolerance));
  const counted = warm.length > 0 ? warm : [first];
  return {
    ...first,
    first_s: first.wall_s,
    wall_s: median(counted.map((run) => run.wall_s)),
    cpu_s: median(counted.map((run) => run.cpu_s)),
  };
}

function once(kind: string, size: number, tolerance: number): Measurement {
  const make = makers[kind];
  if (make === undefined) throw new Error(`no problem is of the kind ${kind}`);
  const cpu = process.cpuUsage();
  const start = performance.now();
  const { check, settings, start: initial } = make(size, tolerance);
  const run = startNetworkRun(initial, settings, { event: () => undefined, frame: () => undefined });
  const extremes = check.radii === undefined ? null : { r_min: Infinity, r_max: 0 };
  let reading = 0;
  while (!run.finished) {
    run.advance(extremes === null ? 64 : 1);
    if (extremes === null) continue;
    for (; reading <= READINGS; reading++) {
      const t = check.endTime - CYCLE + (CYCLE * reading) / READINGS;
      if (t > run.time) break;
      for (const R of run.radiiAt(t)) {
        extremes.r_min = Math.min(extremes.r_min, R);
        extremes.r_max = Math.max(extremes.r_max, R);
      }
    }
  }
  const result = run.result();
  let sum = 0;
  let squares = 0;
  for (const R of run.radiiAt(run.time)) {
    sum += R;
    squares += R * R;
  }
  const wall = (performance.now() - start) / 1000;
  const { user, system } = process.cpuUsage(cpu);
  if (result.stop.kind !== 'done') throw new Error(`the run did not end: ${JSON.stringify(result.stop)}`);
  return {
    wall_s: wall,
    cpu_s: (user + system) / 1e6,
    steps: result.steps,
    t_end: result.endTime,
    R21_end: squares / sum,
    left: result.bubblesLeft,
    ...extremes,
    peak_rss_mb: peakMemory(),
    check: { ...check, left: settings.untilBubbles ?? initial.network.nodes.bubbleCount },
  };
}

/** MB. Where /proc tells, it is asked: the count of `resourceUsage` begins at that of the process which started this one. */
function peakMemory(): number {
  const status = '/proc/self/status';
  const line = existsSync(status) ? /VmHWM:\s+(\d+) kB/.exec(readFileSync(status, 'utf8')) : null;
  return (line === null ? process.resourceUsage().maxRSS : Number(line[1])) / 1024;
}

const [kind, size, tolerance] = process.argv.slice(2);
process.stdout.write(
  JSON.stringify(
    kind === 'nothing' ? { peak_rss_mb: peakMemory() } : measure(kind ?? '', Number(size), Number(tolerance)),
  ),
);

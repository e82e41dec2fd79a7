/** The built command on a scenario of two bubbles, from the start of its process to its files written. */
import { spawnSync } from 'node:child_process';
import { mkdtempSync, readFileSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { median } from './measurement.ts';

export interface CommandTime {
  readonly wall_s: number;
  readonly spread_s: readonly [number, number];
  readonly steps: number;
  readonly t_end: number;
}

export function timeCommand(root: string, repeat: number): CommandTime {
  const launcher = join(root, 'electron', 'command', 'frothwright.mjs');
  const scenario = join(root, 'scenarios', 'two-bubbles-pure-water.froth.json');
  const directory = mkdtempSync(join(tmpdir(), 'frothwright-bench-'));
  const walls: number[] = [];
  let summary = { steps: NaN, endTime_s: NaN };
  try {
    // The first round builds the command where it is older than its sources, and is not counted.
    for (let round = 0; round <= repeat; round++) {
      const out = join(directory, String(round));
      const start = performance.now();
      const ended = spawnSync(process.execPath, [launcher, 'run', scenario, '--out', out], { encoding: 'utf8' });
      if (round > 0) walls.push((performance.now() - start) / 1000);
      if (ended.status !== 0) throw new Error(`the command failed: ${ended.stderr}`);
      // Reading it is the proof that the files are there.
      summary = JSON.parse(readFileSync(join(out, 'summary.json'), 'utf8')) as typeof summary;
    }
  } finally {
    rmSync(directory, { recursive: true, force: true });
  }
  return {
    wall_s: median(walls),
    spread_s: [Math.min(...walls), Math.max(...walls)],
    steps: summary.steps,
    t_end: summary.endTime_s,
  };
}

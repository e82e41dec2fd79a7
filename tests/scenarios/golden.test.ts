/**
 * Every scenario runs through the command, and its files are compared whole with those under golden/: a changed number is
 * seen, whichever law or method changed it. Frames are fewer than the scenario's own, to keep the files small; the raft's
 * tables a row a bubble are left out for the same reason, and summary.json because it tells of this machine's pace.
 * After a change that is meant: UPDATE_GOLDEN=1 npx vitest run tests/scenarios/golden.test.ts, and read the difference.
 */
import { existsSync, mkdirSync, readdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import { tableDifferences } from './golden-tables.ts';
import { runScenario, SCENARIO_NAMES, scenarioText } from './scenario-run.ts';

const GOLDEN = 'tests/scenarios/golden';
const FRAMES = 10;

const update = process.env.UPDATE_GOLDEN === '1';

function comparedFiles(name: string): readonly string[] {
  const always = ['events.csv', 'series.csv'];
  return name === 'raft-on-pool' ? always : [...always, 'bubbles.csv', 'pairs.csv', 'scenario.froth.json'];
}

/** The tolerance that a scenario was run with. */
function toleranceOf(scenario: string): number {
  return (JSON.parse(scenario) as { run: { tolerance: number } }).run.tolerance;
}

describe('the scenarios that come with the program', () => {
  it('have one golden run each, and no golden run is left of another', () => {
    if (update) {
      for (const name of existsSync(GOLDEN) ? readdirSync(GOLDEN) : []) {
        if (!SCENARIO_NAMES.includes(name)) rmSync(join(GOLDEN, name), { recursive: true });
      }
      for (const name of SCENARIO_NAMES) mkdirSync(join(GOLDEN, name), { recursive: true });
    }
    expect(readdirSync(GOLDEN).sort()).toEqual(SCENARIO_NAMES);
  });

  it.each(SCENARIO_NAMES)('%s gives the checked-in files', async (name) => {
    const { files } = await runScenario(scenarioText(name), FRAMES);
    const tolerance = toleranceOf(files['scenario.froth.json']!);
    for (const file of comparedFiles(name)) {
      const path = join(GOLDEN, name, file);
      const fresh = files[file]!;
      if (update) writeFileSync(path, fresh);
      const golden = readFileSync(path, 'utf8');
      if (file.endsWith('.csv')) expect(tableDifferences(golden, fresh, tolerance), file).toEqual([]);
      else expect(fresh, file).toBe(golden);
    }
  });
});

/**
 * Every scenario of scenarios/ runs through the driver and the tables, and its output is compared as whole files with
 * tests/golden/: a changed number is seen, whichever law or method changed it. Few frames and few bubbles are kept.
 * After a change that is meant: UPDATE_GOLDEN=1 npx vitest run tests/golden.test.ts, and read the difference.
 */
import { existsSync, mkdirSync, readdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import type { Column } from '../core/exports/csv.ts';
import { csvHeader, csvRows } from '../core/exports/csv.ts';
import { BUBBLE_COLUMNS, EVENT_COLUMNS, PAIR_COLUMNS, SERIES_COLUMNS } from '../core/exports/run-tables.ts';
import { startRun } from '../core/run/drive.ts';
import { loadScenario } from '../core/scenario/load.ts';
import { withRunSettings } from '../core/scenario/run-settings.ts';
import { tableDifferences } from './golden-tables.ts';

const SCENARIOS = 'scenarios';
const GOLDEN = 'tests/golden';
const ENDING = '.froth.json';
const FRAMES = 10;
/** Rows of a frame that are kept, evenly spread. */
const ROWS = 12;

const update = process.env.UPDATE_GOLDEN === '1';
const names = readdirSync(SCENARIOS)
  .filter((name) => name.endsWith(ENDING))
  .map((name) => name.slice(0, -ENDING.length))
  .sort();

/** The tables of a scenario's run, thinned. */
function runTables(name: string): Record<string, string> {
  const loaded = loadScenario(readFileSync(join(SCENARIOS, `${name}${ENDING}`), 'utf8'));
  if (!loaded.ok) throw new Error(loaded.faults.map((fault) => `${fault.path}: ${fault.message}`).join('\n'));
  const tables = {
    'events.csv': csvHeader(EVENT_COLUMNS),
    'series.csv': csvHeader(SERIES_COLUMNS),
    'bubbles.csv': csvHeader(BUBBLE_COLUMNS),
    'pairs.csv': csvHeader(PAIR_COLUMNS),
  };
  const run = startRun(withRunSettings(loaded.scenario, { frames: FRAMES }), {
    event(event) {
      tables['events.csv'] += csvRows(EVENT_COLUMNS, event, 0, 1);
    },
    frame(frame) {
      tables['series.csv'] += csvRows(SERIES_COLUMNS, frame, 0, 1);
      tables['bubbles.csv'] += thinned(BUBBLE_COLUMNS, frame, frame.bubbleIds.length);
      tables['pairs.csv'] += thinned(PAIR_COLUMNS, frame, frame.pairs.count);
    },
  });
  while (!run.finished) run.advance(1000);
  return tables;
}

function thinned<Source>(columns: readonly Column<Source>[], source: Source, rows: number): string {
  const stride = Math.max(1, Math.ceil(rows / ROWS));
  let text = '';
  for (let row = 0; row < rows; row += stride) text += csvRows(columns, source, row, row + 1);
  return text;
}

describe('the scenarios that come with the program', () => {
  it('are at least eight, and each golden run belongs to one of them', () => {
    expect(names.length).toBeGreaterThanOrEqual(8);
    if (update) {
      for (const name of existsSync(GOLDEN) ? readdirSync(GOLDEN) : []) {
        if (!names.includes(name)) rmSync(join(GOLDEN, name), { recursive: true });
      }
    }
    expect(readdirSync(GOLDEN).sort()).toEqual(names);
  });

  it.each(names)('%s gives the checked-in tables', (name) => {
    const directory = join(GOLDEN, name);
    for (const [file, fresh] of Object.entries(runTables(name))) {
      const path = join(directory, file);
      if (update) {
        mkdirSync(directory, { recursive: true });
        writeFileSync(path, fresh);
      }
      expect(tableDifferences(readFileSync(path, 'utf8'), fresh), `${name}/${file}`).toEqual([]);
    }
  });
});

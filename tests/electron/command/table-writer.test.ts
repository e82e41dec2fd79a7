/** Tables as they grow during a run, and the ones that grow too long. */
import { readdirSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import { openTables } from '../../../electron/command/table-writer.ts';
import { openFileSet } from '../../../electron/files/file-set.ts';
import type { TableName } from '../../../core/exports/run-tables.ts';
import { sampleFrame } from '../../core/exports/sample-frame.ts';
import { scratchDirectory } from '../scratch.ts';

const FILES = ['events.csv', 'series.csv', 'bubbles.csv', 'pairs.csv'];

function written(asked: readonly TableName[] | null, frames: number, expectedFrames: number, rowLimit: number) {
  const directory = scratchDirectory();
  const files = openFileSet(directory, FILES, 'summary.json');
  const tables = openTables(files, asked, expectedFrames, rowLimit);
  for (let index = 0; index < frames; index += 1) tables.frame(sampleFrame(index, ['A', 'B', 'C']));
  files.publish();
  return { directory, names: readdirSync(directory).sort(), outcomes: tables.outcomes() };
}

function lines(directory: string, name: string): number {
  return readFileSync(join(directory, name), 'utf8').trimEnd().split('\n').length;
}

describe('the tables of a run', () => {
  it('are all written, and their rows counted', () => {
    const { directory, names, outcomes } = written(null, 4, 4, 100);
    expect(names).toEqual([...FILES].sort());
    expect(outcomes).toEqual({
      events: { written: true, rows: 0 },
      series: { written: true, rows: 4 },
      bubbles: { written: true, rows: 12 },
      pairs: { written: true, rows: 8 },
    });
    expect(lines(directory, 'bubbles.csv')).toBe(13); // and the header
  });

  it('are those asked for, and no others', () => {
    const { names, outcomes } = written(['series'], 4, 4, 100);
    expect(names).toEqual(['series.csv']);
    expect(outcomes.bubbles).toEqual({ written: false, reason: 'not asked for by --tables' });
  });

  it('leave out a table that would pass the limit, and say so', () => {
    const { names, outcomes } = written(null, 4, 4, 11); // 12 rows of bubbles
    expect(names).not.toContain('bubbles.csv');
    expect(names).toContain('pairs.csv');
    expect(outcomes.bubbles).toMatchObject({
      written: false,
      reason: expect.stringMatching(/about 12 rows.*--tables/) as string,
    });
  });

  it('keep a table of exactly the limit', () => {
    expect(written(null, 4, 4, 12).names).toContain('bubbles.csv');
  });

  it('leave out a table that passes the limit unforeseen', () => {
    const { names, outcomes } = written(null, 5, 1, 11);
    expect(names).not.toContain('bubbles.csv');
    expect(outcomes.bubbles).toMatchObject({
      written: false,
      reason: expect.stringMatching(/--tables bubbles/) as string,
    });
  });

  it('write a table asked for by name however long it is', () => {
    const { directory, outcomes } = written(['bubbles'], 4, 4, 2);
    expect(outcomes.bubbles).toEqual({ written: true, rows: 12 });
    expect(lines(directory, 'bubbles.csv')).toBe(13);
  });
});

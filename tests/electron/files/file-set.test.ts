/** The files of one result are published together, and an older result does not shine through. */
import { existsSync, mkdirSync, readdirSync, readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import { openFileSet } from '../../../electron/files/file-set.ts';
import { scratchDirectory } from '../scratch.ts';

const NAMES = ['events.csv', 'pairs.csv', 'summary.json'];

describe('the files of a result', () => {
  it('go into a directory that is made with its parents', () => {
    const directory = join(scratchDirectory(), 'trials', 'first');
    const files = openFileSet(directory, NAMES, 'summary.json');
    files.open('events.csv').write('new\n');
    files.open('summary.json').write('{}\n');
    files.publish();
    files.discard();
    expect(readdirSync(directory).sort()).toEqual(['events.csv', 'summary.json']);
  });

  it('replace those of an older result, and an older table that is not written now is removed', () => {
    const directory = scratchDirectory();
    for (const name of NAMES) writeFileSync(join(directory, name), 'old\n');
    const files = openFileSet(directory, NAMES, 'summary.json');
    files.open('events.csv').write('new\n');
    files.open('summary.json').write('{}\n');
    files.publish();
    expect(readdirSync(directory).sort()).toEqual(['events.csv', 'summary.json']);
    expect(readFileSync(join(directory, 'events.csv'), 'utf8')).toBe('new\n');
  });

  it('leave every other file in the directory alone', () => {
    const directory = scratchDirectory();
    writeFileSync(join(directory, 'my notes.txt'), 'mine');
    const files = openFileSet(directory, NAMES, 'summary.json');
    files.open('summary.json').write('{}\n');
    files.publish();
    expect(readFileSync(join(directory, 'my notes.txt'), 'utf8')).toBe('mine');
  });

  it('leave an older result as it was when they are discarded in the middle', () => {
    const directory = scratchDirectory();
    for (const name of NAMES) writeFileSync(join(directory, name), 'old\n');
    const files = openFileSet(directory, NAMES, 'summary.json');
    for (const name of NAMES) files.open(name).write('new\n');
    files.discard();
    expect(readdirSync(directory).sort()).toEqual(NAMES);
    for (const name of NAMES) expect(readFileSync(join(directory, name), 'utf8')).toBe('old\n');
  });

  it('take back the directories that were made for them when they are discarded', () => {
    const scratch = scratchDirectory();
    const files = openFileSet(join(scratch, 'trials', 'first'), NAMES, 'summary.json');
    files.open('events.csv').write('new\n');
    files.discard();
    files.discard(); // once by the second Ctrl-C, once on the way out
    expect(readdirSync(scratch)).toEqual([]);
  });

  it('keep a directory that was made for them but holds something of someone else by now', () => {
    const directory = join(scratchDirectory(), 'first');
    const files = openFileSet(directory, NAMES, 'summary.json');
    writeFileSync(join(directory, 'my notes.txt'), 'mine');
    files.discard();
    expect(readdirSync(directory)).toEqual(['my notes.txt']);
  });

  it('are sealed last: where a table cannot be put in place there is no summary', () => {
    const directory = scratchDirectory();
    writeFileSync(join(directory, 'summary.json'), 'old\n');
    mkdirSync(join(directory, 'pairs.csv')); // a directory cannot be replaced by a file
    const files = openFileSet(directory, NAMES, 'summary.json');
    for (const name of NAMES) files.open(name).write('new\n');
    expect(() => {
      files.publish();
    }).toThrow();
    files.discard();
    expect(existsSync(join(directory, 'summary.json'))).toBe(false);
    expect(readdirSync(directory).filter((name) => name.endsWith('.partial'))).toEqual([]);
  });

  it('cannot go into a file', () => {
    const path = join(scratchDirectory(), 'taken');
    writeFileSync(path, '');
    expect(() => openFileSet(path, NAMES, 'summary.json')).toThrow(/EEXIST/);
  });
});

/** A file is on the disk whole or not at all. */
import { mkdirSync, readdirSync, readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import { openWholeFile, writeWhole } from '../../../electron/files/whole-file.ts';
import { scratchDirectory } from '../scratch.ts';

describe('a file being written', () => {
  it('does not have its name before it is published', () => {
    const directory = scratchDirectory();
    const file = openWholeFile(join(directory, 'events.csv'));
    file.write('time_s\n');
    file.complete();
    expect(readdirSync(directory)).not.toContain('events.csv');
    file.publish();
    expect(readdirSync(directory)).toEqual(['events.csv']);
    expect(readFileSync(join(directory, 'events.csv'), 'utf8')).toBe('time_s\n');
  });

  it('leaves nothing, and an older file as it was, when it is discarded in the middle', () => {
    const directory = scratchDirectory();
    writeFileSync(join(directory, 'events.csv'), 'older\n');
    const file = openWholeFile(join(directory, 'events.csv'));
    file.write('x'.repeat(1_000_000)); // past what is gathered, so part of it is on the disk
    file.discard();
    expect(readdirSync(directory)).toEqual(['events.csv']);
    expect(readFileSync(join(directory, 'events.csv'), 'utf8')).toBe('older\n');
  });

  it('keeps every character of a long text in many pieces', () => {
    const directory = scratchDirectory();
    const path = join(directory, 'bubbles.csv');
    const file = openWholeFile(path);
    const piece = 'Größe µm 泡 🫧\n'.repeat(1000);
    for (let index = 0; index < 100; index += 1) file.write(piece);
    file.complete();
    file.publish();
    expect(readFileSync(path, 'utf8')).toBe(piece.repeat(100));
  });

  it('takes no text after it is complete', () => {
    const file = openWholeFile(join(scratchDirectory(), 'events.csv'));
    file.complete();
    expect(() => {
      file.write('late');
    }).toThrow(/takes no more text/);
    file.discard();
  });

  it('cannot be published before it is complete', () => {
    const file = openWholeFile(join(scratchDirectory(), 'events.csv'));
    expect(() => {
      file.publish();
    }).toThrow(/not complete/);
    file.discard();
  });

  it('leaves no temporary file where its name is taken by a directory', () => {
    const directory = scratchDirectory();
    mkdirSync(join(directory, 'events.csv'));
    expect(() => {
      writeWhole(join(directory, 'events.csv'), 'text');
    }).toThrow();
    expect(readdirSync(directory)).toEqual(['events.csv']);
  });
});

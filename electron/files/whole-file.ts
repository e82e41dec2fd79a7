/**
 * Writing files whole or not at all: text goes to a temporary name in the same directory and takes its own name only
 * when it is complete and on the disk. Synchronous, because a run's rows arrive inside the integrator's steps.
 */
import { closeSync, fsyncSync, openSync, renameSync, rmSync, writeSync } from 'node:fs';
import { randomBytes } from 'node:crypto';
import { basename, dirname, join } from 'node:path';

/** How the temporary name of a file that is not complete ends. */
export const PARTIAL_SUFFIX = '.partial';

/** Characters gathered before the disk is asked: bounds the memory of a table of any length. */
const GATHERED = 1 << 18;

/** A file being written. After `complete` or `discard` it takes no more text. */
export interface WholeFile {
  readonly path: string;
  /** Adds text at the end. Throws the system's error (disk full, ...); `discard` is still due then. */
  write(text: string): void;
  /** Brings everything to the disk under the temporary name. */
  complete(): void;
  /** Gives the completed file its own name, replacing an older file of that name at one stroke. */
  publish(): void;
  /** Removes the temporary file. Does nothing once published; never throws for a file that is gone. */
  discard(): void;
}

/** Opens a file for writing under a temporary name next to `path`. Throws the system's error if it cannot. */
export function openWholeFile(path: string): WholeFile {
  const partial = join(
    dirname(path),
    `.${basename(path)}.${process.pid}-${randomBytes(4).toString('hex')}${PARTIAL_SUFFIX}`,
  );
  let descriptor: number | null = openSync(partial, 'wx');
  let published = false;
  let gathered = '';

  function flush(): void {
    if (descriptor === null) throw new Error(`${path} takes no more text: it is complete or discarded.`);
    if (gathered.length === 0) return;
    const bytes = Buffer.from(gathered, 'utf8');
    gathered = '';
    for (let offset = 0; offset < bytes.length;) offset += writeSync(descriptor, bytes, offset);
  }

  function close(): void {
    if (descriptor === null) return;
    const open = descriptor;
    descriptor = null;
    closeSync(open);
  }

  return {
    path,
    write(text) {
      gathered += text;
      if (gathered.length >= GATHERED || descriptor === null) flush();
    },
    complete() {
      if (descriptor === null) return;
      flush();
      fsyncSync(descriptor);
      close();
    },
    publish() {
      if (descriptor !== null) throw new Error(`${path} is not complete.`);
      renameSync(partial, path);
      published = true;
    },
    discard() {
      if (published) return;
      gathered = '';
      try {
        close();
      } finally {
        rmSync(partial, { force: true });
      }
    },
  };
}

/** Writes one text to a file, whole or not at all. Throws the system's error and leaves no temporary file. */
export function writeWhole(path: string, text: string): void {
  const file = openWholeFile(path);
  try {
    file.write(text);
    file.complete();
    file.publish();
  } finally {
    file.discard();
  }
}

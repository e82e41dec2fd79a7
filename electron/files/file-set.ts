/**
 * The files of one result, published together into one directory: all are complete on the disk before the first takes
 * its name, and files of an earlier result that this one does not have are removed, so that no old table stands beside
 * new ones. The seal is the file that says what the others are; it goes first and comes back last, so that a directory
 * with a seal is a whole result even if the machine stops in between. Other files in the directory are not touched.
 */
import { mkdirSync, readdirSync, rmSync, rmdirSync } from 'node:fs';
import { dirname, join, resolve } from 'node:path';
import type { WholeFile } from './whole-file.ts';
import { openWholeFile } from './whole-file.ts';

export interface FileSet {
  /** Opens a file of the set. Throws if `name` is not one of the set's names, is open already, or cannot be opened. */
  open(name: string): WholeFile;
  /** Gives a file up: it will not be in the result. */
  drop(name: string): void;
  /** Completes all open files, then puts them in place. Throws the system's error; `discard` is still due then. */
  publish(): void;
  /** Removes every temporary file, and the directories that were made for the set if they are empty. */
  discard(): void;
}

/**
 * Makes the directory (and its parents) where it is missing.
 * @param directory where the files go
 * @param names every name the set may hold
 * @param seal the one of `names` that is written last
 * @throws the system's error if the directory cannot be made or is a file
 */
export function openFileSet(directory: string, names: readonly string[], seal: string): FileSet {
  let firstMade = mkdirSync(directory, { recursive: true });
  const open = new Map<string, WholeFile>();

  function removeMadeDirectories(): void {
    if (firstMade === undefined) return;
    const top = resolve(firstMade);
    firstMade = undefined;
    for (let made = resolve(directory); made.length >= top.length; made = dirname(made)) {
      if (readdirSync(made).length > 0) return;
      rmdirSync(made);
    }
  }

  return {
    open(name) {
      if (!names.includes(name)) throw new Error(`${name} is not a file of this result.`);
      if (open.has(name)) throw new Error(`${name} is open already.`);
      const file = openWholeFile(join(directory, name));
      open.set(name, file);
      return file;
    },
    drop(name) {
      open.get(name)?.discard();
      open.delete(name);
    },
    publish() {
      for (const file of open.values()) file.complete();
      rmSync(join(directory, seal), { force: true });
      for (const name of names) if (!open.has(name)) rmSync(join(directory, name), { force: true });
      for (const [name, file] of open) if (name !== seal) file.publish();
      open.get(seal)?.publish();
      open.clear();
    },
    discard() {
      for (const file of open.values()) file.discard();
      open.clear();
      removeMadeDirectories();
    },
  };
}

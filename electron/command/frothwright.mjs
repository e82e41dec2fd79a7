#!/usr/bin/env node
/**
 * The package's `frothwright`: runs the built command, and in a checkout builds it first when a source is newer.
 * Lean on purpose: nothing but a walk of file dates stands between the shell and the command.
 */
import { readdirSync, statSync } from 'node:fs';
import module from 'node:module';
import { dirname, join } from 'node:path';
import { fileURLToPath, pathToFileURL } from 'node:url';

const root = dirname(dirname(dirname(fileURLToPath(import.meta.url))));
const bundle = join(root, 'dist', 'command', 'frothwright.mjs');
const sources = ['core', 'electron', 'package.json', 'vite.command.config.ts'].map((name) => join(root, name));

const built = changedAt(bundle);
if (sources.some((source) => newerThan(source, built))) {
  const { buildCommand } = await import('./build.mjs');
  const outcome = await buildCommand(root, bundle);
  if (!outcome.ok && built === 0) {
    process.stderr.write(`frothwright: ${outcome.sentence}\n`);
    process.exit(1);
  }
}
module.enableCompileCache?.(); // Node 22.1 and later
await import(pathToFileURL(bundle).href);

/** When a file last changed, ms; 0 where there is none. */
function changedAt(path) {
  return statSync(path, { throwIfNoEntry: false })?.mtimeMs ?? 0;
}

/** Whether a file, or anything in a directory, is newer. A directory's own date tells of files that were removed. */
function newerThan(path, instant) {
  const status = statSync(path, { throwIfNoEntry: false });
  if (status === undefined) return false;
  if (status.mtimeMs > instant) return true;
  return status.isDirectory() && readdirSync(path).some((name) => newerThan(join(path, name), instant));
}

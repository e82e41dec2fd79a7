/**
 * Builds the command with vite. Also the package's `prepare`: `node electron/command/build.mjs` builds once after an
 * installation, and does nothing where the development tools were left out.
 */
import { mkdirSync, realpathSync, renameSync, rmSync, utimesSync } from 'node:fs';
import { dirname, join } from 'node:path';
import { fileURLToPath } from 'node:url';

/**
 * Builds into a directory of its own and puts the bundle in place at one stroke, so that a command that is starting
 * meanwhile reads a whole one. The bundle is dated at the start of the build: what was edited since counts as newer.
 * @param {string} root the checkout
 * @param {string} bundle where the bundle goes
 * @returns {Promise<{ ok: true } | { ok: false, sentence: string }>} a fault of the sources is thrown, not returned
 */
export async function buildCommand(root, bundle) {
  let vite;
  try {
    vite = await import('vite');
  } catch (error) {
    if (error.code !== 'ERR_MODULE_NOT_FOUND') throw error;
    return {
      ok: false,
      sentence: 'the command is not built, and vite, which builds it, is not installed: run npm ci.',
    };
  }
  const started = new Date();
  const directory = join(dirname(dirname(bundle)), `command-${process.pid}`);
  try {
    await vite.build({
      root,
      configFile: join(root, 'vite.command.config.ts'),
      logLevel: 'error',
      build: { outDir: directory },
    });
    mkdirSync(dirname(bundle), { recursive: true });
    const made = join(directory, 'frothwright.mjs');
    utimesSync(made, started, started);
    renameSync(made, bundle);
  } finally {
    rmSync(directory, { recursive: true, force: true });
  }
  return { ok: true };
}

if (process.argv[1] !== undefined && fileURLToPath(import.meta.url) === realpathSync(process.argv[1])) {
  const root = dirname(dirname(dirname(fileURLToPath(import.meta.url))));
  const outcome = await buildCommand(root, join(root, 'dist', 'command', 'frothwright.mjs'));
  if (!outcome.ok) process.stdout.write(`${outcome.sentence}\n`);
}

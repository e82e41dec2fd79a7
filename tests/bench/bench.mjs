/**
 * `npm run bench`: bundles the bench with the core it measures into dist/bench/, in a directory of this run's own, so that neither
 * an edit nor another bench meanwhile changes what is measured; runs it and takes the bundle away.
 */
import { rmSync } from 'node:fs';
import { dirname, join } from 'node:path';
import { fileURLToPath, pathToFileURL } from 'node:url';
import { build } from 'vite';

const root = dirname(dirname(dirname(fileURLToPath(import.meta.url))));
const directory = join(root, 'dist', 'bench', String(process.pid));
try {
  await build({
    root,
    configFile: false,
    logLevel: 'error',
    publicDir: false,
    build: {
      ssr: true,
      outDir: directory,
      emptyOutDir: true,
      target: 'node20',
      minify: false,
      rolldownOptions: {
        input: { main: 'tests/bench/main.ts', child: 'tests/bench/child.ts' },
        output: { entryFileNames: '[name].mjs', chunkFileNames: '[name].mjs', format: 'es' },
      },
    },
    ssr: { noExternal: true },
  });
  const { main } = await import(pathToFileURL(join(directory, 'main.mjs')).href);
  process.exitCode = main(process.argv.slice(2), root, directory);
} finally {
  rmSync(directory, { recursive: true, force: true });
}

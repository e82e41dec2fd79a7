/**
 * `npm run bench`: bundles the bench with the core it measures into dist/bench/, and runs it.
 */
import { dirname, join } from 'node:path';
import { fileURLToPath, pathToFileURL } from 'node:url';
import { build } from 'vite';

const root = dirname(dirname(dirname(fileURLToPath(import.meta.url))));
await build({
  root,
  configFile: false,
  logLevel: 'error',
  publicDir: false,
  build: {
    ssr: 'tests/bench/main.ts',
    outDir: 'dist/bench',
    emptyOutDir: true,
    target: 'node20',
    minify: false,
    rolldownOptions: { output: { entryFileNames: 'bench.mjs', format: 'es', codeSplitting: false } },
  },
  ssr: { noExternal: true },
});
const { main } = await import(pathToFileURL(join(root, 'dist', 'bench', 'bench.mjs')).href);
process.exitCode = await main(process.argv.slice(2), root);

/**
 * Builds the command line into one file, dist/command/frothwright.mjs, with everything it needs inside:
 * opening one file instead of a hundred is most of its start-up time.
 */
import { defineConfig } from 'vite';

export default defineConfig({
  publicDir: false,
  build: {
    ssr: 'electron/command/main.ts',
    outDir: 'dist/command',
    emptyOutDir: false,
    target: 'node20',
    minify: false,
    rolldownOptions: { output: { entryFileNames: 'frothwright.mjs', format: 'es', codeSplitting: false } },
  },
  ssr: { noExternal: true },
});

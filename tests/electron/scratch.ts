/** A directory of its own for a test, gone when the test is over. */
import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { onTestFinished } from 'vitest';

export function scratchDirectory(): string {
  const directory = mkdtempSync(join(tmpdir(), 'frothwright-test-'));
  onTestFinished(() => rmSync(directory, { recursive: true, force: true }));
  return directory;
}

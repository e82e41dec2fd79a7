/** From the name of a scenario file to the checked document, or to every fault there is. */
import type { Fault } from '../../core/scenario/fault.ts';
import { loadScenario } from '../../core/scenario/load.ts';
import { readText } from '../files/read-text.ts';
import { faultOutside } from './faults.ts';

/** Faults of the file itself (missing, not UTF-8, ...) have an empty path, as those of the document as a whole. */
export function openScenario(path: string): ReturnType<typeof loadScenario> {
  const read = readText(path);
  if (!read.ok) return { ok: false, faults: [faultOutside('file', '', read.sentence)] satisfies Fault[] };
  return loadScenario(read.text);
}

/**
 * Edits that the command line makes to a checked scenario.
 */
import type { Scenario } from './schema.ts';

/**
 * The scenario with another end or another number of frames.
 * @param changes `until` in s, above 0; `frames` whole, not negative
 */
export function withRunSettings(
  scenario: Scenario,
  changes: { readonly until?: number; readonly frames?: number },
): Scenario {
  return { ...scenario, run: { ...scenario.run, ...changes } };
}

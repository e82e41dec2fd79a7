/** A scenario that loads but cannot start: what only compiling it can find. Hosts treat it as a faulty scenario. */
import type { Fault } from '../scenario/fault.ts';

export class ScenarioFault extends Error {
  readonly faults: readonly Fault[];

  constructor(faults: readonly Fault[]) {
    super(faults.map((fault) => `${fault.path}: ${fault.message}`).join('\n'));
    this.name = 'ScenarioFault';
    this.faults = faults;
  }
}

export function physicsFault(path: string, message: string): Fault {
  return { path, code: 'physics', message, actual: null, expected: '', severity: 'error' };
}

/** From a checked scenario to a run: compiles it, and hands it to the driver. The way in for hosts. */
import { compileScenario, type CompiledStart } from '../network/compile.ts';
import type { Scenario } from '../scenario/schema.ts';
import { startNetworkRun, type Run } from './engine.ts';
import { physicsFault, ScenarioFault } from './faults.ts';
import type { RunObserver } from './record.ts';

export type { Run } from './engine.ts';

/**
 * @throws ScenarioFault where the physics finds the scenario impossible
 */
export function compileOrThrow(scenario: Scenario): CompiledStart {
  const compiled = compileScenario(scenario);
  if ('start' in compiled) return compiled.start;
  throw new ScenarioFault(compiled.faults.map(({ path, message }) => physicsFault(path, message)));
}

/**
 * Starts a run: the observer hears what holds at the start before this returns.
 * @throws ScenarioFault where the physics finds the scenario impossible
 */
export function startRun(scenario: Scenario, observer: RunObserver): Run {
  return startNetworkRun(compileOrThrow(scenario), scenario.run, observer);
}

/**
 * `frothwright check`: is the file sound, and will the network hold at rest? Every fault of the file, or the state at
 * rest with what it means. Nothing is written.
 */
import { createHash } from 'node:crypto';
import { basename } from 'node:path';
import { ScenarioFault } from '../../core/run/faults.ts';
import { atRest } from '../../core/run/rest.ts';
import { canonicalText } from '../../core/scenario/save.ts';
import type { CheckTask } from './arguments.ts';
import { checkReport } from './check-report.ts';
import { checkWords } from './check-words.ts';
import { EXIT_DONE } from './exit-status.ts';
import { jsonText, reportFaults } from './faults.ts';
import { openScenario } from './open-scenario.ts';
import type { Terminal } from './terminal.ts';

/** Carries a check out and gives the exit status. Throws only for internal faults. */
export function executeCheck(task: CheckTask, terminal: Terminal): number {
  const opened = openScenario(task.scenario);
  if (!opened.ok) return reportFaults(terminal, task, opened.faults);
  const { scenario, warnings } = opened;
  try {
    const sha256 = createHash('sha256').update(canonicalText(scenario), 'utf8').digest('hex');
    const report = checkReport(scenario, { file: basename(task.scenario), sha256 }, warnings, atRest(scenario));
    terminal.out(task.json ? jsonText(report) : checkWords(report));
    return EXIT_DONE;
  } catch (error) {
    if (error instanceof ScenarioFault) return reportFaults(terminal, task, error.faults);
    throw error;
  }
}

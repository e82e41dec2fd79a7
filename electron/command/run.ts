/**
 * `frothwright run`: a scenario file becomes a run, and the run files. The run factory comes as an argument, so that
 * what happens when a solver fails, a disk fills or a person presses Ctrl-C is tested without waiting for it.
 */
import { createHash } from 'node:crypto';
import { basename } from 'node:path';
import type { RunObserver, RunResult } from '../../core/run/record.ts';
import type { Run } from '../../core/run/drive.ts';
import { ScenarioFault } from '../../core/run/faults.ts';
import type { Scenario } from '../../core/scenario/schema.ts';
import { canonicalText, saveScenario } from '../../core/scenario/save.ts';
import { withRunSettings } from '../../core/scenario/run-settings.ts';
import { TABLE_NAMES } from '../../core/exports/run-tables.ts';
import type { FileSet } from '../files/file-set.ts';
import { openFileSet } from '../files/file-set.ts';
import { isSystemError, whyUnwritable } from '../files/system-error.ts';
import type { RunTask } from './arguments.ts';
import { EXIT_DONE, EXIT_INTERNAL_FAULT, EXIT_INTERRUPTED, EXIT_NOT_FINISHED } from './exit-status.ts';
import { faultLine, faultOutside, jsonText, reportFaults } from './faults.ts';
import { humanTime } from './human.ts';
import { progressLine } from './progress.ts';
import type { Highlights } from './run-summary.ts';
import { closingWords, noteHighlight, runSummary } from './run-summary.ts';
import { openScenario } from './open-scenario.ts';
import type { TableWriter } from './table-writer.ts';
import { openTables, tableFile } from './table-writer.ts';
import type { Terminal } from './terminal.ts';

export const SUMMARY_FILE = 'summary.json';
export const SCENARIO_FILE = 'scenario.froth.json';
const RESULT_FILES = [...TABLE_NAMES.map(tableFile), SCENARIO_FILE, SUMMARY_FILE];

export interface RunDependencies {
  readonly terminal: Terminal;
  readonly version: string;
  readonly startRun: (scenario: Scenario, observer: RunObserver) => Run;
}

/** A slice of the run between two looks at the signals takes about this long, ms. */
const SLICE = 50;

/** Carries a run through and gives the exit status. Throws only for internal faults, with no file left behind. */
export async function executeRun(task: RunTask, dependencies: RunDependencies): Promise<number> {
  const { terminal, version } = dependencies;
  const opened = openScenario(task.scenario);
  if (!opened.ok) return reportFaults(terminal, task, opened.faults);
  const scenario = withRunSettings(opened.scenario, {
    ...(task.until === null ? {} : { until: task.until }),
    ...(task.frames === null ? {} : { frames: task.frames }),
  });

  let files: FileSet;
  try {
    files = openFileSet(task.out, RESULT_FILES, SUMMARY_FILE);
  } catch (error) {
    if (!isSystemError(error)) throw error;
    return reportFaults(terminal, task, [faultOutside('directory', task.out, whyUnwritable(error))]);
  }
  const signals = watchSignals(terminal, files);
  try {
    const start = terminal.now();
    const tables = openTables(files, task.tables, Math.max(1, scenario.run.frames) + 1);
    const highlights: Highlights = { firstUnstable: null, firstVanished: null, lastVanished: null };
    const run = dependencies.startRun(scenario, observing(tables, highlights));
    const result = await carryThrough(run, task, terminal, signals);
    const summary = runSummary({
      version,
      title: scenario.title,
      file: basename(task.scenario),
      sha256: createHash('sha256').update(canonicalText(scenario), 'utf8').digest('hex'),
      result,
      warnings: opened.warnings.map((warning) => faultLine(warning, task.scenario)),
      wallTime: (terminal.now() - start) / 1000,
      criteria: scenario.criteria,
      tables: tables.outcomes(),
    });
    const summaryText = jsonText(summary);
    files.open(SCENARIO_FILE).write(saveScenario(scenario));
    files.open(SUMMARY_FILE).write(summaryText);
    files.publish();

    if (task.json) terminal.out(summaryText);
    else if (terminal.outIsScreen && !task.quiet) terminal.out(closingWords(summary, highlights, task.out));
    return reportStop(terminal, task, result);
  } catch (error) {
    if (error instanceof ScenarioFault) return reportFaults(terminal, task, error.faults);
    if (!isSystemError(error)) throw error;
    terminal.err(`${task.out}: ${whyUnwritable(error)}\n`);
    return EXIT_INTERNAL_FAULT;
  } finally {
    files.discard();
    signals.stop();
  }
}

/** Advances in slices until the run is finished or a signal ends it. */
async function carryThrough(run: Run, task: RunTask, terminal: Terminal, signals: Signals): Promise<RunResult> {
  const line = progressLine(terminal, !task.quiet);
  try {
    let steps = 8;
    const going = (): boolean => !run.finished;
    while (going()) {
      const before = terminal.now();
      run.advance(steps);
      const spent = terminal.now() - before;
      steps = Math.max(1, Math.round(steps * Math.min(4, SLICE / Math.max(spent, 0.1))));
      line.update(run);
      await terminal.breathe();
      if (signals.received() && going()) run.interrupt();
    }
    return run.result();
  } finally {
    line.clear();
  }
}

interface Signals {
  readonly received: () => boolean;
  readonly stop: () => void;
}

/** The first signal asks the run to end; the second removes the unfinished files and quits. */
function watchSignals(terminal: Terminal, files: FileSet): Signals {
  let count = 0;
  const stop = terminal.onSignal(() => {
    count += 1;
    if (count === 1) return;
    files.discard();
    terminal.quit(EXIT_INTERRUPTED);
  });
  return { received: () => count > 0, stop };
}

function observing(tables: TableWriter, highlights: Highlights): RunObserver {
  return {
    event(event) {
      tables.event(event);
      noteHighlight(highlights, event);
    },
    frame(frame) {
      tables.frame(frame);
    },
  };
}

/** Says on standard error why a run did not come to its end, and gives the status that says the same. */
function reportStop(terminal: Terminal, task: RunTask, result: RunResult): number {
  const { stop } = result;
  switch (stop.kind) {
    case 'done':
      return EXIT_DONE;
    case 'interrupted':
      terminal.err(`Stopped at ${humanTime(result.endTime)} of simulated time; what was computed is in ${task.out}.\n`);
      return EXIT_INTERRUPTED;
    case 'failed':
      terminal.err(`${stop.sentence.replace(/\.?$/, '.')} What was computed is in ${task.out}.\n`);
      return EXIT_NOT_FINISHED;
  }
}

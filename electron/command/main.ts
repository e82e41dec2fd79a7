/**
 * The command line: words in, exit status out. Host of the core on Node; knows no law and no number of its own.
 */
import { version } from '../../package.json';
import { startRun } from '../../core/run/drive.ts';
import { scenarioJsonSchema } from '../../core/scenario/json-schema.ts';
import { parseArguments } from './arguments.ts';
import { executeCheck } from './check.ts';
import { EXIT_BAD_INPUT, EXIT_DONE, EXIT_INTERNAL_FAULT } from './exit-status.ts';
import { faultOutside, jsonText } from './faults.ts';
import { helpText } from './help.ts';
import { executeRun } from './run.ts';
import type { Terminal } from './terminal.ts';
import { processTerminal } from './terminal.ts';

/** Carries out what the words ask for. Never throws. */
async function execute(argv: readonly string[], terminal: Terminal): Promise<number> {
  const task = parseArguments(argv);
  switch (task.kind) {
    case 'run':
      return executeRun(task, { terminal, version, startRun });
    case 'check':
      return executeCheck(task, terminal);
    case 'schema':
      terminal.out(jsonText(scenarioJsonSchema()));
      return EXIT_DONE;
    case 'help':
      terminal.out(helpText(task.about));
      return EXIT_DONE;
    case 'version':
      terminal.out(
        task.json
          ? jsonText({ program: 'frothwright', version })
          : `${version}
`,
      );
      return EXIT_DONE;
    case 'bad-usage':
      if (task.json) terminal.out(jsonText({ ok: false, faults: [faultOutside('usage', '', task.sentence)] }));
      else terminal.err(`frothwright: ${task.sentence}\n`);
      return EXIT_BAD_INPUT;
  }
}

const terminal = processTerminal();
try {
  process.exitCode = await execute(process.argv.slice(2), terminal);
} catch (error) {
  const trace = error instanceof Error ? (error.stack ?? error.message) : String(error);
  terminal.err(`frothwright: an internal fault; nothing was written. Please report it with these lines:\n${trace}\n`);
  process.exitCode = EXIT_INTERNAL_FAULT;
}

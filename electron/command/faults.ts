/**
 * Faults made text, only here at the edge: one a line on standard error, or one JSON document on standard output.
 */
import { basename } from 'node:path';
import type { Fault } from '../../core/scenario/fault.ts';
import { EXIT_BAD_INPUT } from './exit-status.ts';
import type { Terminal } from './terminal.ts';

/** A fault that does not lie in the scenario's text: in a file, a directory or the words of the command. */
export function faultOutside(code: string, path: string, message: string): Fault {
  return { path, code, message, actual: null, expected: '', severity: 'error' };
}

/** `path: message`; a fault of the document as a whole is put down to its file. */
export function faultLine(fault: Fault, file: string): string {
  const place = fault.path === '' ? basename(file) : fault.path;
  return `${place}: ${oneLine(fault.message)}`;
}

/** Reports all faults and gives the exit status. */
export function reportFaults(
  terminal: Terminal,
  task: { readonly scenario: string; readonly json: boolean },
  faults: readonly Fault[],
): number {
  if (task.json) terminal.out(jsonText({ ok: false, faults }));
  else
    terminal.err(
      faults
        .map((fault) => `${faultLine(fault, task.scenario)}${fault.severity === 'warning' ? ' (a warning)' : ''}\n`)
        .join(''),
    );
  return EXIT_BAD_INPUT;
}

/** A JSON document as the command prints and writes it: indented, one line feed at the end. NaN becomes null. */
export function jsonText(document: unknown): string {
  return `${JSON.stringify(document, null, 2)}\n`;
}

function oneLine(message: string): string {
  return message.replaceAll(/\s*[\r\n]+\s*/g, ' ');
}

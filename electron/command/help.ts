/** What the command says about itself: `--help`, and the way on after bad usage. */

export const COMMAND_NAMES = ['run', 'check', 'schema'] as const;
export type CommandName = (typeof COMMAND_NAMES)[number];

/** Commands of the contract that this version does not have yet. */
export const LATER_COMMANDS: readonly string[] = ['fit', 'causes', 'study', 'find', 'report'];

const GENERAL = `Frothwright says whether a foam or a bank of connected bubbles will hold, and what would make it hold.

  frothwright run SCENARIO --out DIR     simulate; events and curves go to DIR
  frothwright check SCENARIO             every fault of the file; will the network hold at rest?
  frothwright schema                     print the JSON Schema of scenario files

  frothwright COMMAND --help             what a command takes
  frothwright --version

With --json a command gives its result, or its faults, as one JSON document on standard output.
Exit status: 0 done; 1 internal fault; 2 bad usage or faulty scenario; 3 the solver could not finish;
130 stopped by Ctrl-C. After 3 and 130 what was computed is in DIR.
`;

const RUN = `frothwright run SCENARIO --out DIR [--until T] [--frames N] [--tables LIST] [--quiet] [--json]

Simulates a scenario (a .froth.json file) and writes into DIR, each file whole or not at all:
  events.csv            what happened and when
  series.csv            mean radii, growing modes and the gas balance, a row a frame
  bubbles.csv           a row a frame and bubble
  pairs.csv             a row a frame and pair
  summary.json          how the run went
  scenario.froth.json   the scenario as run, every default written out

  --out DIR       directory for the files; made if it is missing. Older files of these names are replaced or removed
  --until T       end of the run, in place of the scenario's: "2 h", "90 s", or a number of seconds
  --frames N      number of frames, in place of the scenario's
  --tables LIST   write these tables only, however long: events,series,bubbles,pairs.
                  Left out: all four, but none that would pass five million rows
  --quiet         no progress and no closing words
  --json          print summary.json on standard output

Ctrl-C ends the run and keeps what was computed; a second Ctrl-C quits at once and keeps nothing.
`;

const CHECK = `frothwright check SCENARIO [--json]

Loads a scenario and reports every fault with its place in the file. If there is none: what the network consists of,
the pressure and index of each bubble, which pairs are unstable and how fast, the growing modes and which bubbles they
feed and starve, the laws used outside their validity, and the integration method a run would take.
`;

const SCHEMA = `frothwright schema

Prints the JSON Schema of scenario files, made from the loader's own definitions. An editor that knows it
completes keys and marks faults while a scenario is written.
`;

/** The help text of a command, or of the whole (null). */
export function helpText(command: CommandName | null): string {
  switch (command) {
    case null:
      return GENERAL;
    case 'run':
      return RUN;
    case 'check':
      return CHECK;
    case 'schema':
      return SCHEMA;
  }
}

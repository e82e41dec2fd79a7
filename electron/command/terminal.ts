/**
 * What the command needs from the process it runs in: two streams, a clock, signals and a way out. Tests pass their own.
 */
export interface Terminal {
  /** Standard output. */
  readonly out: (text: string) => void;
  /** Standard error. */
  readonly err: (text: string) => void;
  /** A person, not a pipe or a file, reads the stream. */
  readonly outIsScreen: boolean;
  readonly errIsScreen: boolean;
  /** Characters in a line of the screen. */
  readonly columns: () => number;
  /** Milliseconds since some instant. */
  readonly now: () => number;
  /** Lets waiting signals in; settles as soon as they had their turn. */
  readonly breathe: () => Promise<void>;
  /** Calls `handler` at every Ctrl-C or termination signal until the function it gives back is called. */
  readonly onSignal: (handler: () => void) => () => void;
  /** Ends the process at once. */
  readonly quit: (status: number) => void;
}

/** The terminal of this process. A reader that goes away (`| head`) is no fault: what it did not want is dropped. */
export function processTerminal(): Terminal {
  const { stdout, stderr } = process;
  for (const stream of [stdout, stderr]) {
    stream.on('error', (error: NodeJS.ErrnoException) => {
      if (error.code !== 'EPIPE') throw error;
    });
  }
  return {
    out: (text) => void stdout.write(text),
    err: (text) => void stderr.write(text),
    outIsScreen: stdout.isTTY,
    errIsScreen: stderr.isTTY,
    columns: () => stderr.columns || 80,
    now: () => performance.now(),
    breathe: () => new Promise((resolve) => setImmediate(resolve)),
    onSignal: (handler) => {
      const signals = ['SIGINT', 'SIGTERM', 'SIGHUP'] as const;
      for (const signal of signals) process.on(signal, handler);
      return () => {
        for (const signal of signals) process.off(signal, handler);
      };
    },
    quit: (status) => process.exit(status),
  };
}

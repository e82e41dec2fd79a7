/** A terminal that remembers what was said to it, and lets a test press Ctrl-C. */
import type { Terminal } from '../../../electron/command/terminal.ts';

export interface FakeTerminal extends Terminal {
  readonly said: () => { readonly out: string; readonly err: string };
  readonly pressInterrupt: () => void;
  readonly quitStatus: () => number | null;
}

/**
 * @param screen whether a person reads both streams
 * @param tick milliseconds that pass between two looks at the clock
 */
export function fakeTerminal(screen: boolean, tick = 1): FakeTerminal {
  let out = '';
  let err = '';
  let clock = 0;
  let quitStatus: number | null = null;
  const handlers = new Set<() => void>();
  return {
    out: (text) => {
      out += text;
    },
    err: (text) => {
      err += text;
    },
    outIsScreen: screen,
    errIsScreen: screen,
    columns: () => 80,
    now: () => (clock += tick),
    breathe: () => Promise.resolve(),
    onSignal: (handler) => {
      handlers.add(handler);
      return () => handlers.delete(handler);
    },
    quit: (status) => {
      quitStatus ??= status;
    },
    said: () => ({ out, err }),
    pressInterrupt: () => {
      for (const handler of handlers) handler();
    },
    quitStatus: () => quitStatus,
  };
}

/**
 * The progress line of a run on a terminal: per cent, simulated time, rate and time left, rewritten in place.
 */
import type { Terminal } from './terminal.ts';
import { human, humanTime } from './human.ts';

/** What of a run the line shows. */
export interface Advancing {
  readonly time: number; // s
  readonly until: number; // s
  readonly progress: number; // 0..1
}

export interface ProgressLine {
  /** Shows the present state if the last one is old enough. */
  update(run: Advancing): void;
  /** Wipes the line. */
  clear(): void;
}

const NO_LINE: ProgressLine = { update: () => undefined, clear: () => undefined };

/** Runs shorter than this show nothing, ms. */
const PATIENCE = 400;
/** Between two rewritings, ms. */
const PACE = 150;
/** The rate is taken over about this long, ms: steady enough to read, quick enough to follow a stiff stretch. */
const MEMORY = 3000;

const CARRIAGE_RETURN_AND_WIPE = '\r\u001b[K';

/** A progress line on standard error, or one that shows nothing where no person looks. */
export function progressLine(terminal: Terminal, wanted: boolean): ProgressLine {
  if (!wanted || !terminal.errIsScreen) return NO_LINE;
  const start = terminal.now();
  let shownAt = start + PATIENCE - PACE;
  let shown = false;
  let last = { at: start, time: 0, progress: 0 };
  let timeRate = Number.NaN; // simulated s per ms
  let progressRate = Number.NaN; // per ms

  return {
    update(run) {
      const now = terminal.now();
      if (now - shownAt < PACE) return;
      const elapsed = now - last.at;
      const weight = Math.min(1, elapsed / MEMORY);
      timeRate = blend(timeRate, (run.time - last.time) / elapsed, weight);
      progressRate = blend(progressRate, (run.progress - last.progress) / elapsed, weight);
      last = { at: now, time: run.time, progress: run.progress };
      const left = (1 - run.progress) / progressRate / 1000; // s
      const line =
        `${Math.floor(run.progress * 100)
          .toString()
          .padStart(3)} %  ${human(run.time, 'time', 3)} of ${humanTime(run.until)}` +
        `  ${human(timeRate * 1000, 'time', 3)} a second` +
        (Number.isFinite(left) ? `  ${humanDuration(left)} left` : '');
      terminal.err(CARRIAGE_RETURN_AND_WIPE + line.slice(0, Math.max(0, terminal.columns() - 1)));
      shownAt = now;
      shown = true;
    },
    clear() {
      if (shown) terminal.err(CARRIAGE_RETURN_AND_WIPE);
      shown = false;
    },
  };
}

function blend(old: number, fresh: number, weight: number): number {
  return Number.isNaN(old) ? fresh : old + weight * (fresh - old);
}

/** Wall time as a clock shows it: `0:07`, `12:30`, `3:05:00`. */
export function humanDuration(seconds: number): string {
  const whole = Math.ceil(seconds);
  const hours = Math.floor(whole / 3600);
  const minutes = Math.floor((whole % 3600) / 60);
  const rest = (whole % 60).toString().padStart(2, '0');
  return hours > 0 ? `${hours}:${minutes.toString().padStart(2, '0')}:${rest}` : `${minutes}:${rest}`;
}

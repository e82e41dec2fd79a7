/**
 * Collects the faults of a file while it is read and checked. Many alike are reported once each up to a limit, then counted.
 */
import type { Fault } from './fault.ts';
import { nearestName } from './nearest.ts';
import { showValue } from './path.ts';

export interface FaultList {
  /** An error. `actual` is what stands there, undefined for nothing. */
  error(path: string, code: string, message: string, detail?: FaultDetail): void;
  warn(path: string, code: string, message: string, detail?: FaultDetail): void;
  /** `; did you mean "soap"?`, or '' where no known name is near. */
  suggestion(name: string, known: Iterable<string>): string;
  /** All errors, then all warnings. */
  finish(): { readonly errors: readonly Fault[]; readonly warnings: readonly Fault[] };
}

export interface FaultDetail {
  readonly actual?: unknown;
  readonly expected?: string;
}

/** The same sentence is given at so many places. */
const MOST_ALIKE = 30;
/** Looking for near names in a large file takes time: so many are looked for. */
const MOST_SUGGESTIONS = 200;

export function createFaultList(): FaultList {
  const all: { readonly errors: Fault[]; readonly warnings: Fault[] } = { errors: [], warnings: [] };
  const alike = new Map<string, number>();
  let suggestions = 0;

  function add(severity: Fault['severity'], path: string, code: string, message: string, detail: FaultDetail): void {
    const key = `${severity} ${code} ${message}`;
    const count = (alike.get(key) ?? 0) + 1;
    alike.set(key, count);
    if (count > MOST_ALIKE) return;
    const actual = detail.actual === undefined ? null : showValue(detail.actual);
    const list = severity === 'error' ? all.errors : all.warnings;
    list.push({ path, code, message, actual, expected: detail.expected ?? '', severity });
  }

  return {
    error: (path, code, message, detail = {}) => add('error', path, code, message, detail),
    warn: (path, code, message, detail = {}) => add('warning', path, code, message, detail),
    suggestion(name, known) {
      if (++suggestions > MOST_SUGGESTIONS) return '';
      const near = nearestName(name, known);
      return near === null ? '' : `; did you mean ${JSON.stringify(near)}?`;
    },
    finish() {
      for (const severity of ['error', 'warning'] as const) {
        const list = severity === 'error' ? all.errors : all.warnings;
        for (const fault of [...list]) {
          const more = (alike.get(`${severity} ${fault.code} ${fault.message}`) ?? 0) - MOST_ALIKE;
          if (more <= 0) continue;
          alike.delete(`${severity} ${fault.code} ${fault.message}`);
          list.push({ ...fault, code: 'more-alike', message: `${fault.message} (and at ${more} more places)` });
        }
      }
      return all;
    },
  };
}

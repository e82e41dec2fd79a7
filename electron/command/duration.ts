/** A length of time as a person writes it on the command line: with its unit, or a bare number of seconds. */
import { parseQuantity } from '../../core/quantities/quantity.ts';

export type Duration =
  { readonly ok: true; readonly seconds: number } | { readonly ok: false; readonly sentence: string };

const BARE_NUMBER = /^\s*[+-]?(\d+\.?\d*|\.\d+)(e[+-]?\d+)?\s*$/i;

/** Reads a time longer than nothing, s. */
export function readDuration(text: string): Duration {
  const reading = parseQuantity(BARE_NUMBER.test(text) ? Number(text) : text, 'time');
  if (!reading.ok) return { ok: false, sentence: `${reading.message}.` };
  if (reading.value <= 0)
    return { ok: false, sentence: `"${text}" is no time after the start; it must be more than 0.` };
  return { ok: true, seconds: reading.value };
}

/**
 * Reading a text that a person named: UTF-8, with or without a byte order mark. What can be wrong with a file comes
 * back as a sentence, not as an exception.
 */
import { readFileSync } from 'node:fs';
import { whyUnreadable } from './system-error.ts';

export type ReadText = { readonly ok: true; readonly text: string } | { readonly ok: false; readonly sentence: string };

/** The whole text of a file without its byte order mark, or what is wrong and what to do. */
export function readText(path: string): ReadText {
  let bytes: Uint8Array;
  try {
    bytes = readFileSync(path);
  } catch (error) {
    return { ok: false, sentence: whyUnreadable(error) };
  }
  if (bytes.length === 0) return { ok: false, sentence: 'the file is empty' };
  const [first, second] = bytes;
  if ((first === 0xff && second === 0xfe) || (first === 0xfe && second === 0xff)) {
    return { ok: false, sentence: 'the file is UTF-16; save it as UTF-8' };
  }
  try {
    const text = new TextDecoder('utf-8', { fatal: true }).decode(bytes); // takes the byte order mark off
    return text.trim() === '' ? { ok: false, sentence: 'the file holds nothing but white space' } : { ok: true, text };
  } catch {
    return { ok: false, sentence: `the file is not UTF-8 text${whereNotUtf8(bytes)}; save it as UTF-8` };
  }
}

/** The line of the first byte that is not UTF-8: the longest head that decodes ends there. */
function whereNotUtf8(bytes: Uint8Array): string {
  let good = 0;
  let bad = bytes.length;
  while (bad - good > 1) {
    const middle = (good + bad) >> 1;
    try {
      // `stream` lets a character be cut in two at the end.
      new TextDecoder('utf-8', { fatal: true }).decode(bytes.subarray(0, middle), { stream: true });
      good = middle;
    } catch {
      bad = middle;
    }
  }
  let line = 1;
  for (let index = 0; index < good; index += 1) if (bytes[index] === 0x0a) line += 1;
  return ` (line ${line})`;
}

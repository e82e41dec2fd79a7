/**
 * What JSON.parse does not tell: where exactly a text stops being JSON, in words, and which keys a record holds twice.
 * One pass over the text without recursion, so that deep nesting cannot overflow it.
 */
import { pathTo } from './path.ts';

export interface TextScan {
  /** The first place where the text is not JSON; null where it is. Line and column count from 1. */
  readonly syntax: { readonly line: number; readonly column: number; readonly sentence: string } | null;
  /** Keys that stand twice in one record: JSON would keep the last and lose the first without a word. */
  readonly duplicates: readonly KeyAt[];
  /** Keys named `__proto__`: JavaScript gives them a meaning of its own, so that they may be lost without a word. */
  readonly reserved: readonly KeyAt[];
}

export interface KeyAt {
  readonly path: string;
  readonly key: string;
}

interface Level {
  readonly close: '}' | ']';
  /** Keys so far; null in a list. */
  readonly keys: Set<string> | null;
  key: string;
  index: number;
}

type Want = 'value' | 'value-or-close' | 'key' | 'key-or-close' | 'colon' | 'comma-or-close' | 'end';

const NEEDED: Readonly<Record<Want, string>> = {
  value: 'a value is needed',
  'value-or-close': 'a value or ] is needed',
  key: 'a key in double quotes is needed',
  'key-or-close': 'a key in double quotes or } is needed',
  colon: 'a colon is needed',
  'comma-or-close': 'a comma or the closing bracket is needed',
  end: 'the end of the file is needed',
};

const SPACE = /[ \t\r\n]*/y;
const STRING = /"(?:[^"\\\u0000-\u001f]|\\(?:["\\/bfnrt]|u[0-9a-fA-F]{4}))*"/y;
const SCALAR = /(?:-?(?:0|[1-9]\d*)(?:\.\d+)?(?:[eE][+-]?\d+)?|true|false|null)(?![\w.+-])/y;

export function scanJson(text: string): TextScan {
  const levels: Level[] = [];
  const duplicates: KeyAt[] = [];
  const reserved: KeyAt[] = [];
  let want: Want = 'value';
  let at = 0;

  const match = (pattern: RegExp): string | null => {
    pattern.lastIndex = at;
    const found = pattern.exec(text);
    if (found === null) return null;
    at = pattern.lastIndex;
    return found[0];
  };
  const pathHere = (): string =>
    levels.reduce((path, level) => pathTo(path, level.keys === null ? level.index : level.key), '');
  const stop = (sentence: string): TextScan => ({
    syntax: { ...lineAndColumn(text, at), sentence },
    duplicates,
    reserved,
  });

  for (;;) {
    match(SPACE);
    const level = levels[levels.length - 1];
    const next = text[at];
    if (next === undefined)
      return want === 'end' ? { syntax: null, duplicates, reserved } : stop(`the text ends where ${NEEDED[want]}`);

    if (next === level?.close && want.endsWith('-or-close')) {
      at += 1;
      levels.pop();
      want = levels.length === 0 ? 'end' : 'comma-or-close';
    } else if (want === 'comma-or-close' && next === ',') {
      at += 1;
      level!.index += 1;
      want = level!.keys === null ? 'value' : 'key';
    } else if (want === 'colon' && next === ':') {
      at += 1;
      want = 'value';
    } else if ((want === 'key' || want === 'key-or-close') && next === '"') {
      const written = match(STRING);
      if (written === null)
        return stop('a text begins here that is not closed, or holds a character that must be escaped');
      const key = JSON.parse(written) as string;
      level!.key = key;
      if (level!.keys!.has(key)) duplicates.push({ path: pathHere(), key });
      else if (key === '__proto__') reserved.push({ path: pathHere(), key });
      level!.keys!.add(key);
      want = 'colon';
    } else if ((want === 'value' || want === 'value-or-close') && (next === '{' || next === '[')) {
      at += 1;
      const isRecord = next === '{';
      levels.push({ close: isRecord ? '}' : ']', keys: isRecord ? new Set() : null, key: '', index: 0 });
      want = isRecord ? 'key-or-close' : 'value-or-close';
    } else if ((want === 'value' || want === 'value-or-close') && match(next === '"' ? STRING : SCALAR) !== null) {
      want = levels.length === 0 ? 'end' : 'comma-or-close';
    } else {
      return stop(describeStop(text, at, want));
    }
  }
}

function describeStop(text: string, at: number, want: Want): string {
  const rest = text.slice(at, at + 20);
  if (rest.startsWith('//') || rest.startsWith('/*') || rest.startsWith('#')) {
    return 'a comment stands here, and JSON has none; put remarks into "notes"';
  }
  if (rest.startsWith("'") && want !== 'end') return 'single quotes stand here; JSON takes double quotes';
  if (rest.startsWith('"') && (want === 'value' || want === 'value-or-close')) {
    return 'a text begins here that is not closed, or holds a character that must be escaped';
  }
  if ((want === 'key' && rest.startsWith('}')) || (want === 'value' && rest.startsWith(']'))) {
    return 'a comma stands before this closing bracket; take the comma out';
  }
  const word = /^[\w.+-]+/.exec(rest)?.[0] ?? String.fromCodePoint(rest.codePointAt(0) ?? 0xfffd);
  if ((want === 'key' || want === 'key-or-close') && /^[A-Za-z_]/.test(word)) {
    return `${JSON.stringify(word)} stands here without quotes; a key in double quotes is needed`;
  }
  return `${JSON.stringify(word)} stands here; ${NEEDED[want]}`;
}

function lineAndColumn(text: string, at: number): { readonly line: number; readonly column: number } {
  const before = text.slice(0, at).split(/\r\n|\r|\n/);
  return { line: before.length, column: before[before.length - 1]!.length + 1 };
}

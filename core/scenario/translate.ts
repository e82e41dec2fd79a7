/**
 * Turns the issues of zod into faults: with the path as a person writes it, what stands there, what is needed, and the
 * nearest known word. Relies on the convention of fields.ts that an issue's message says what is needed.
 */
import type * as z from 'zod';
import type { IssueParameters } from './fields.ts';
import type { FaultList } from './fault-list.ts';
import { isRecord, ownValue, pathTo, showValue } from './path.ts';

type Issue = z.core.$ZodIssue;

/**
 * @param issues of a failed parse
 * @param value what was parsed
 * @param base its path
 */
export function reportIssues(issues: readonly Issue[], value: unknown, base: string, list: FaultList): void {
  for (const issue of issues) report(issue, value, base, list);
}

function report(issue: Issue, value: unknown, base: string, list: FaultList): void {
  const path = issue.path.reduce<string>(pathTo, base);
  const actual = dig(value, issue.path);
  switch (issue.code) {
    case 'custom': {
      const { code, expected } = issue.params as unknown as IssueParameters;
      list.error(path, code, issue.message, { actual, expected });
      return;
    }
    case 'unrecognized_keys': {
      const [what = '', ...known] = issue.message.split('|');
      for (const key of issue.keys) reportUnknownKey(pathTo(path, key), key, what, known, list);
      return;
    }
    case 'invalid_union':
      if (issue.discriminator !== undefined) {
        reportWord(path, actual, discriminatorWords(issue), list);
        return;
      }
      for (const branch of meantBranch(issue.errors, actual)) report(branch, actual, path, list);
      if (meantBranch(issue.errors, actual).length === 0) reportNeeded(path, actual, 'type', issue.message, list);
      return;
    case 'invalid_value':
      reportWord(path, actual, issue.values.map(String), list);
      return;
    case 'too_small':
    case 'too_big':
      if (typeof actual === 'number') {
        const message = `${showValue(actual)} is out of range; ${issue.message} is needed`;
        list.error(path, 'range', message, { actual, expected: issue.message });
        return;
      }
      reportNeeded(path, actual, 'range', issue.message, list);
      return;
    default:
      reportNeeded(path, actual, 'type', issue.message, list);
  }
}

/** Says that a key is not known, and which one may be meant. */
export function reportUnknownKey(
  path: string,
  key: string,
  what: string,
  known: readonly string[],
  list: FaultList,
): void {
  const near = list.suggestion(key, known);
  const rest = near === '' ? `; ${what} takes ${known.length === 0 ? 'no keys' : known.join(', ')}` : near;
  list.error(path, 'unknown-key', `${JSON.stringify(key)} is no key of ${what}${rest}`, {
    expected: known.join(', '),
  });
}

/** Says that a word is none of those that can stand here. */
export function reportWord(path: string, actual: unknown, words: readonly string[], list: FaultList): void {
  const needed = words.map((one) => (/^\d+$/.test(one) ? one : JSON.stringify(one))).join(' or ');
  if (typeof actual !== 'string') {
    reportNeeded(path, actual, 'type', needed, list);
    return;
  }
  const near = list.suggestion(actual, words);
  const message = `${showValue(actual)} is not known here; ${needed} is needed${near}`;
  list.error(path, 'unknown-word', message, { actual, expected: needed });
}

function reportNeeded(path: string, actual: unknown, code: string, needed: string, list: FaultList): void {
  const expected = needed.replace(/,$/, '');
  if (actual === undefined) list.error(path, 'missing', `missing; ${needed} is needed`, { expected });
  else list.error(path, code, `${showValue(actual)} stands here; ${needed} is needed`, { actual, expected });
}

/**
 * Which of several forms a value was meant to have, judged by its issues against each: the form that read it and found
 * fault with its content; of forms that differ in their keys, the one with the fewest issues. Empty where none is near.
 */
function meantBranch(branches: readonly (readonly Issue[])[], actual: unknown): readonly Issue[] {
  const isContainer = isRecord(actual) || Array.isArray(actual);
  const candidates = branches.filter((issues) => {
    const atRoot = issues.filter((issue) => issue.path.length === 0);
    if (isContainer) return atRoot.every((issue) => issue.code === 'unrecognized_keys' || issue.code === 'custom');
    return atRoot.some((issue) => issue.code === 'custom' || issue.code === 'too_small' || issue.code === 'too_big');
  });
  return candidates.reduce<readonly Issue[]>(
    (best, issues) => (best.length === 0 || issues.length < best.length ? issues : best),
    [],
  );
}

/** The words that a discriminator can be; zod lists them without typing them. */
function discriminatorWords(issue: Issue): readonly string[] {
  const { options } = issue as { readonly options?: readonly unknown[] };
  return (options ?? []).map(String);
}

function dig(value: unknown, path: readonly PropertyKey[]): unknown {
  let at = value;
  for (const step of path) {
    if (Array.isArray(at)) at = (at as unknown[])[Number(step)];
    else if (isRecord(at)) at = ownValue(at, step);
    else return undefined;
  }
  return at;
}

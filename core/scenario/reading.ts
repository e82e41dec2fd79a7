/**
 * Reads one record of a scenario field by field, so that what is right in it is known even where something else is wrong:
 * the checks behind it can then go on, and all faults of a file come out at once.
 */
import type * as z from 'zod';
import type { FaultList } from './fault-list.ts';
import { isRecord, ownValue, pathTo, showValue } from './path.ts';
import { reportIssues, reportUnknownKey } from './translate.ts';

export interface Reading<Fields> {
  readonly path: string;
  /** As it stands in the file; empty where no record stands there. */
  readonly raw: Readonly<Record<string, unknown>>;
  /** The fields that are without fault, defaults filled in. */
  readonly fields: Readonly<Partial<Fields>>;
}

/** Reads a value that is to be a record of a schema; every fault goes to the list. `what` names it in sentences. */
export function readRecord<Shape extends z.core.$ZodLooseShape>(
  what: string,
  schema: z.ZodObject<Shape>,
  value: unknown,
  path: string,
  list: FaultList,
): Reading<z.output<z.ZodObject<Shape>>> {
  type Fields = z.output<z.ZodObject<Shape>>;
  if (!isRecord(value)) {
    const message =
      value === undefined ? `missing; ${what} is needed` : `${showValue(value)} stands here; ${what} is needed`;
    list.error(path, value === undefined ? 'missing' : 'type', message, { actual: value, expected: what });
    return { path, raw: {}, fields: {} as Partial<Fields> };
  }
  const whole = schema.safeParse(value);
  if (whole.success) return { path, raw: value, fields: whole.data };

  const shape = schema.shape as Readonly<Record<string, z.ZodType>>;
  const fields: Record<string, unknown> = {};
  for (const [key, field] of Object.entries(shape)) {
    const written = ownValue(value, key);
    const parsed = field.safeParse(written);
    if (!parsed.success) reportIssues(parsed.error.issues, written, pathTo(path, key), list);
    else if (parsed.data !== undefined) fields[key] = parsed.data;
  }
  for (const key of Object.keys(value)) {
    if (!Object.hasOwn(shape, key)) reportUnknownKey(pathTo(path, key), key, what, Object.keys(shape), list);
  }
  return { path, raw: value, fields: fields as Partial<Fields> };
}

/** True where the file gives a key, rightly or wrongly. */
export function isGiven(reading: Reading<unknown>, key: string): boolean {
  return Object.hasOwn(reading.raw, key);
}

/**
 * The kinds of field that scenario records are made of: quantities, waveforms, compositions, places, names.
 * Each is a zod schema that gives SI; its `error` text says what is needed, in the words that a fault then uses.
 */
import * as z from 'zod';
import { DIMENSIONS, type DimensionName } from '../quantities/dimensions.ts';
import { formatQuantity } from '../quantities/format.ts';
import { parseQuantity } from '../quantities/quantity.ts';

// No code made at run time: a page with a strict content security policy forbids it.
z.config({ jitless: true });

/** Bounds in SI: `above` and `below` exclude the bound, `from` and `to` include it. */
export interface Range {
  readonly above?: number;
  readonly from?: number;
  readonly below?: number;
  readonly to?: number;
}

/** What a custom issue carries to its fault. */
export interface IssueParameters {
  readonly code: string;
  readonly expected: string;
}

function rangePhrase(name: DimensionName, range: Range): string {
  const bound = (value: number): string => (value === 0 ? '0' : formatQuantity(value, name));
  const parts: string[] = [];
  if (range.above !== undefined) parts.push(`above ${bound(range.above)}`);
  if (range.from !== undefined) parts.push(`of at least ${bound(range.from)}`);
  if (range.below !== undefined) parts.push(`below ${bound(range.below)}`);
  if (range.to !== undefined) parts.push(`of at most ${bound(range.to)}`);
  return [DIMENSIONS[name].phrase, parts.join(' and ')].join(' ').trim();
}

function isInside(value: number, range: Range): boolean {
  return (
    value > (range.above ?? -Infinity) &&
    value >= (range.from ?? -Infinity) &&
    value < (range.below ?? Infinity) &&
    value <= (range.to ?? Infinity)
  );
}

/** A quantity of a dimension: in a file a number in SI or a text with a unit, after loading a number in SI. */
export function quantity(name: DimensionName, range: Range = {}) {
  const needed = rangePhrase(name, range);
  let numeric = z.number();
  if (range.above !== undefined) numeric = numeric.gt(range.above, { error: needed });
  if (range.from !== undefined) numeric = numeric.gte(range.from, { error: needed });
  if (range.below !== undefined) numeric = numeric.lt(range.below, { error: needed });
  if (range.to !== undefined) numeric = numeric.lte(range.to, { error: needed });
  const { siUnit, example } = DIMENSIONS[name];
  return z
    .union([numeric, z.string()], { error: needed })
    .transform((written, context) => {
      const reading = parseQuantity(written, name);
      if (!reading.ok) {
        context.addIssue({ code: 'custom', message: reading.message, params: { ...reading } });
        return z.NEVER;
      }
      if (!isInside(reading.value, range)) {
        const message = `${JSON.stringify(written)} is out of range; ${needed} is needed`;
        context.addIssue({ code: 'custom', message, params: { code: 'range', expected: needed } });
        return z.NEVER;
      }
      return reading.value;
    })
    .meta({
      description: `${needed}: a number${siUnit === '' ? '' : ` in ${siUnit}`}, or a text such as "${example}"`,
    });
}

/** A record with these keys and no others. `what` names it in faults, such as `a tube`. */
export function record<Shape extends z.core.$ZodLooseShape>(what: string, shape: Shape) {
  const known = `${what}|${Object.keys(shape).join('|')}`;
  return z.strictObject(shape, { error: (issue) => (issue.code === 'unrecognized_keys' ? known : what) });
}

/** One of some words. */
export function word<const Words extends readonly [string, ...string[]]>(words: Words) {
  return z.enum(words, { error: words.map((one) => JSON.stringify(one)).join(' or ') });
}

/** A whole number. */
export function count(from: number, to: number) {
  const error = `a whole number from ${from} to ${to}`;
  return z.int({ error }).min(from, { error }).max(to, { error });
}

export function text(what = 'a text') {
  return z.string({ error: what });
}

const NAME_RULE = 'a name of 1 to 100 characters, without control characters, not starting with "via:"';

/** The name of a node, link, gas or recipe. */
export const name = z
  .string({ error: 'a name, as a text,' })
  .regex(/^(?!via:)(?!__proto__$)[^\u0000-\u001f\u007f]{1,100}$/, { error: NAME_RULE });

/** Which is a name and which is not, for the keys of `gases` and `recipes`. */
export function isName(candidate: string): boolean {
  return name.safeParse(candidate).success;
}

/** Shares of gases by name; brought to a sum of 1 when the file is resolved. */
export const composition = z
  .record(z.string(), quantity('number', { from: 0 }), { error: 'shares of gases such as {"air": 1}' })
  .meta({ description: 'mole fractions by the name of the gas; they are brought to a sum of 1' });

const coordinate = quantity('length');

/** A place [x, z] or [x, y, z], z upwards; after loading always [x, y, z]. */
export const place = z
  .union([z.tuple([coordinate, coordinate]), z.tuple([coordinate, coordinate, coordinate])], {
    error: 'a place [x, z] or [x, y, z], z upwards,',
  })
  .transform((at): [number, number, number] => (at.length === 2 ? [at[0], 0, at[1]] : at));

/** Adds a fault of its own words at a key of the record under check. */
export function complain(context: z.RefinementCtx, key: string, message: string, expected: string): void {
  context.addIssue({ code: 'custom', path: [key], message, params: { code: 'contradiction', expected } });
}

/** A quantity that may change in time: a plain quantity or a waveform record. */
export function waveform(dimension: DimensionName) {
  const value = quantity(dimension);
  const positiveTime = quantity('time', { above: 0 });
  const phase = quantity('angle').default(0);
  const waves = z.discriminatedUnion('wave', [
    record('a sine', { wave: z.literal('sine'), mean: value, amplitude: value, period: positiveTime, phase }),
    record('a square wave', {
      wave: z.literal('square'),
      mean: value,
      amplitude: value,
      period: positiveTime,
      phase,
      duty: quantity('number', { above: 0, below: 1 }).default(0.5),
    }),
    record('a ramp', {
      wave: z.literal('ramp'),
      from: value,
      to: value,
      start: quantity('time').default(0),
      over: quantity('time', { from: 0 }),
    }),
    record('a train of pulses', {
      wave: z.literal('pulses'),
      base: value,
      height: value,
      width: positiveTime,
      period: positiveTime,
    }).superRefine((wave, context) => {
      if (wave.width < wave.period) return;
      const sizes = [wave.width, wave.period].map((seconds) => formatQuantity(seconds, 'time'));
      const message = `${sizes[0]} is not below the period of ${sizes[1]}; a width below the period is needed`;
      complain(context, 'width', message, 'a time below the period');
    }),
    record('a table', {
      wave: z.literal('table'),
      times: z.array(quantity('time'), { error: 'a list of times' }).min(1, { error: 'at least one time' }),
      values: z.array(value, { error: 'a list of values' }),
    }).superRefine((wave, context) => {
      if (wave.values.length !== wave.times.length) {
        const message = `${wave.values.length} values for ${wave.times.length} times; as many values as times are needed`;
        complain(context, 'values', message, 'as many values as times');
      }
      if (wave.times.some((time, i) => i > 0 && time <= wave.times[i - 1]!)) {
        complain(context, 'times', 'not in rising order; times that rise are needed', 'times that rise');
      }
    }),
  ]);
  return z.union([value.transform((constant) => ({ wave: 'constant' as const, value: constant })), waves], {
    error: `${DIMENSIONS[dimension].phrase} or a waveform`,
  });
}

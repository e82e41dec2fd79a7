/**
 * How faults name a place in a scenario: `nodes[3].radius`, `gases.tracer.viscosity`, `recipes["my soap"].tension`.
 */

const PLAIN_KEY = /^[A-Za-z_][\w-]*$/;

/** The place one step further in: a key of a record or an index of a list. */
export function pathTo(base: string, step: PropertyKey): string {
  if (typeof step === 'number') return `${base}[${step}]`;
  const key = String(step);
  if (!PLAIN_KEY.test(key)) return `${base}[${JSON.stringify(key)}]`;
  return base === '' ? key : `${base}.${key}`;
}

/** What stands in a file, short enough for a sentence. */
export function showValue(value: unknown): string {
  if (value === null || typeof value === 'number' || typeof value === 'boolean') return String(value);
  if (typeof value === 'string') return JSON.stringify(value.length > 60 ? `${value.slice(0, 60)}…` : value);
  if (Array.isArray(value)) return 'a list';
  return typeof value === 'object' ? 'a record' : `a ${typeof value}`;
}

/** True for a record as JSON has them. */
export function isRecord(value: unknown): value is Readonly<Record<string, unknown>> {
  return typeof value === 'object' && value !== null && !Array.isArray(value);
}

/** What a record holds under a key of its own; undefined where it has none. */
export function ownValue(record: Readonly<Record<string, unknown>>, key: PropertyKey): unknown {
  return Object.hasOwn(record, key) ? record[key as string] : undefined;
}

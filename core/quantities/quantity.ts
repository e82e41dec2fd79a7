/**
 * From what a person writes for a quantity - a number in SI, or a text with a unit - to a number in SI, or to a sentence
 * that says what is wrong. The only place where unit strings are understood.
 */
import { DIMENSIONS, describePowers, hasDimension, type DimensionName } from './dimensions.ts';
import { nearestDouble } from './exact.ts';
import { normaliseUnit, readUnit } from './unit-expression.ts';
import { findTemperatureScale } from './units.ts';

export type QuantityReading =
  | { readonly ok: true; readonly value: number }
  | {
      readonly ok: false;
      readonly code: QuantityFaultCode;
      /** A sentence without a path, such as `"5 mN/m" is a surface tension; a length is needed`. */
      readonly message: string;
      /** What is needed, such as `a length`. */
      readonly expected: string;
    };

export type QuantityFaultCode =
  'not-a-quantity' | 'no-unit' | 'unknown-unit' | 'ambiguous-unit' | 'unreadable-unit' | 'dimension' | 'too-large';

const QUANTITY = /^([+-]?(?:\d+\.?\d*|\.\d+)(?:[eE][+-]?\d+)?)\s*(.*)$/s;
const LONGEST = 200;

/**
 * Reads a quantity.
 * @param input a finite number, taken to be in SI, or a text; anything else is a fault
 * @param name the dimension that is needed
 */
export function parseQuantity(input: unknown, name: DimensionName): QuantityReading {
  if (typeof input === 'number') {
    // Adding 0 turns -0 into 0, which a file cannot tell apart.
    if (Number.isFinite(input)) return { ok: true, value: input + 0 };
    return fault('too-large', name, `${input} is no finite number`);
  }
  if (typeof input !== 'string') return fault('not-a-quantity', name, `${nameOfType(input)} is no quantity`);
  return parseText(input, name);
}

function parseText(input: string, name: DimensionName): QuantityReading {
  const text = input.trim().replace(/^−/, '-');
  const shown = JSON.stringify(input.length > 60 ? `${input.slice(0, 60)}…` : input);
  const match = text.length > LONGEST ? null : QUANTITY.exec(text);
  if (match === null) return fault('not-a-quantity', name, `${shown} is no quantity`, true);
  const [, literal = '', unitText = ''] = match;
  if (/^,\d/.test(unitText)) {
    return fault(
      'not-a-quantity',
      name,
      `${shown} has a comma in its number: write a point for decimals, and no other mark`,
    );
  }
  const unit = normaliseUnit(unitText);
  if (unit === '') {
    if (name === 'number')
      return finished(nearestDouble(literal, { numerator: 1n, denominator: 1n, ten: 0 }), name, shown);
    return fault('no-unit', name, `${shown} has no unit`, true);
  }
  const scale = findTemperatureScale(unit);
  if (scale !== null) {
    if (name !== 'temperature') return fault('dimension', name, `${shown} is a temperature`);
    return finished(nearestDouble(literal, scale.factor, scale.offset), name, shown);
  }
  const reading = readUnit(unit);
  if (!reading.ok) {
    switch (reading.why) {
      case 'unknown-unit':
        return fault('unknown-unit', name, `${shown}: "${reading.symbol}" is no known unit`, true);
      case 'ambiguous-unit':
        return fault(
          'ambiguous-unit',
          name,
          `${shown} has a product behind a slash: put what stands below the line in brackets, or a slash before each`,
        );
      case 'unreadable-unit':
        return fault('unreadable-unit', name, `${shown}: "${unitText.trim()}" cannot be read as a unit`, true);
    }
  }
  if (!hasDimension(name, reading.unit.powers)) {
    return fault('dimension', name, `${shown} is ${describePowers(reading.unit.powers)}`);
  }
  return finished(nearestDouble(literal, reading.unit.factor), name, shown);
}

function finished(value: number, name: DimensionName, shown: string): QuantityReading {
  return Number.isFinite(value) ? { ok: true, value } : fault('too-large', name, `${shown} is too large a number`);
}

function fault(code: QuantityFaultCode, name: DimensionName, what: string, withExample = false): QuantityReading {
  const { phrase, example } = DIMENSIONS[name];
  const message = `${what}; ${phrase} is needed${withExample ? `, such as ${JSON.stringify(example)}` : ''}`;
  return { ok: false, code, message, expected: phrase };
}

function nameOfType(input: unknown): string {
  if (input === null) return 'null';
  if (input === undefined) return 'nothing';
  if (Array.isArray(input)) return 'a list';
  switch (typeof input) {
    case 'boolean':
      return String(input);
    case 'object':
      return 'a record';
    default:
      return `a ${typeof input}`;
  }
}

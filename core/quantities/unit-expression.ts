/**
 * Reads the unit part of a quantity: products, quotients, powers and brackets of the symbols in units.ts.
 * `mol/m^3/Pa`, `mol/m3/Pa`, `mol/(m^3 Pa)`, `mol m^-3 Pa^-1` and `mol·m⁻³·Pa⁻¹` are the same unit.
 */
import { multiply, ONE, power, type Factor } from './exact.ts';
import { findUnit, type Powers, type Unit } from './units.ts';

export type UnitReading =
  | { readonly ok: true; readonly unit: Unit }
  | { readonly ok: false; readonly why: 'unknown-unit'; readonly symbol: string }
  /** A product after a slash without brackets: does it stand above or below the line? */
  | { readonly ok: false; readonly why: 'ambiguous-unit' }
  | { readonly ok: false; readonly why: 'unreadable-unit' };

const SUPERSCRIPTS = '⁰¹²³⁴⁵⁶⁷⁸⁹';

/** One spelling for what has several: signs of micro and degree, superscripts, dots and crosses of multiplication. */
export function normaliseUnit(text: string): string {
  return text
    .trim()
    .replace(/[µμ]/g, 'u')
    .replace(/℃/g, '°C')
    .replace(/℉/g, '°F')
    .replace(/[Å]/g, 'Å')
    .replace(/[º˚]/g, '°')
    .replace(/[⁻⁺]?[⁰¹²³⁴⁵⁶⁷⁸⁹]+/g, (raised) =>
      raised
        .replace('⁻', '^-')
        .replace('⁺', '^')
        .replace(/^(?=[⁰¹²³⁴⁵⁶⁷⁸⁹])/, '^')
        .replace(/[⁰¹²³⁴⁵⁶⁷⁸⁹]/g, (digit) => String(SUPERSCRIPTS.indexOf(digit))),
    )
    .replace(/\*\*/g, '^')
    .replace(/[·⋅×∙]/g, '*')
    .replace(/−/g, '-');
}

type Token = { readonly kind: '*' | '/' | '(' } | { readonly kind: ')'; readonly exponent: number } | SymbolToken;
interface SymbolToken {
  readonly kind: 'symbol';
  readonly name: string;
  readonly exponent: number;
}

const EXPONENT = String.raw`(?:\^?\(([+-]?\d)\)|\^?([+-]?\d))?`;
const TOKEN = new RegExp(
  String.raw`\s*(?:([*.\/(])|(\))${EXPONENT}|((?:cm|mm|in)H2O|[A-Za-zÅ]+|%|°|1(?!\d))${EXPONENT})\s*`,
  'y',
);

function tokens(text: string): Token[] | null {
  const list: Token[] = [];
  TOKEN.lastIndex = 0;
  while (TOKEN.lastIndex < text.length) {
    const match = TOKEN.exec(text);
    if (match === null) return null;
    const [, sign, close, closeBracketed, closeBare, name, bracketed, bare] = match;
    if (sign !== undefined) list.push({ kind: sign === '.' ? '*' : (sign as '*' | '/' | '(') });
    else if (close !== undefined) list.push({ kind: ')', exponent: Number(closeBracketed ?? closeBare ?? 1) });
    else list.push({ kind: 'symbol', name: name!, exponent: Number(bracketed ?? bare ?? 1) });
  }
  return list;
}

interface Level {
  factor: Factor;
  powers: Powers;
  /** A slash stands before: a further product here would be ambiguous. */
  divided: boolean;
  /** What the next factor is raised to: -1 after a slash. */
  next: 1 | -1;
  /** The last token was a factor, so another one right behind it is a product. */
  filled: boolean;
}

function level(): Level {
  return { factor: ONE, powers: [0, 0, 0, 0, 0, 0], divided: false, next: 1, filled: false };
}

/** Multiplies a factor into a level; false where that would be ambiguous. */
function take(into: Level, unit: Unit, exponent: number): boolean {
  if (into.divided && into.next === 1) return false;
  const raised = exponent * into.next;
  into.factor = multiply(into.factor, power(unit.factor, raised));
  into.powers = into.powers.map((old, k) => old + unit.powers[k]! * raised) as unknown as Powers;
  into.next = 1;
  into.filled = true;
  return true;
}

const UNREADABLE: UnitReading = { ok: false, why: 'unreadable-unit' };
const AMBIGUOUS: UnitReading = { ok: false, why: 'ambiguous-unit' };

function read(text: string): UnitReading {
  const list = tokens(text);
  if (list === null || list.length === 0) return UNREADABLE;
  const levels = [level()];
  for (const token of list) {
    const here = levels[levels.length - 1]!;
    switch (token.kind) {
      case '*':
      case '/':
        if (!here.filled) return UNREADABLE;
        here.filled = false;
        here.next = token.kind === '/' ? -1 : 1;
        here.divided ||= token.kind === '/';
        break;
      case '(':
        levels.push(level());
        break;
      case ')': {
        const outer = levels[levels.length - 2];
        if (outer === undefined || !here.filled) return UNREADABLE;
        levels.pop();
        if (!take(outer, here, token.exponent)) return AMBIGUOUS;
        break;
      }
      case 'symbol': {
        const unit = findUnit(token.name);
        if (unit === null) return { ok: false, why: 'unknown-unit', symbol: token.name };
        if (!take(here, unit, token.exponent)) return AMBIGUOUS;
        break;
      }
    }
  }
  const whole = levels[0]!;
  if (levels.length > 1 || !whole.filled) return UNREADABLE;
  return { ok: true, unit: { factor: whole.factor, powers: whole.powers } };
}

/** A file repeats few units many times. */
const REMEMBERED = 200;
const memory = new Map<string, UnitReading>();

/** Reads a unit text that `normaliseUnit` has gone over. */
export function readUnit(normalised: string): UnitReading {
  const known = memory.get(normalised);
  if (known !== undefined) return known;
  const reading = read(normalised);
  if (memory.size >= REMEMBERED) memory.clear();
  memory.set(normalised, reading);
  return reading;
}

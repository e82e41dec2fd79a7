/**
 * Exact decimal arithmetic for units: a literal times a unit's factor, rounded once, to the nearest double.
 * So "50 um", "0.05 mm" and the number 50e-6 are the same double, and a spelling never changes a run.
 */

/** numerator/denominator * 10^ten, exactly. The fraction is positive. */
export interface Factor {
  readonly numerator: bigint;
  readonly denominator: bigint;
  readonly ten: number;
}

/** An integer times a power of ten, exactly: what a decimal literal says. */
export interface Decimal {
  readonly digits: bigint;
  readonly ten: number;
}

export const ONE: Factor = { numerator: 1n, denominator: 1n, ten: 0 };

const LITERAL = /^([+-]?)(\d*)\.?(\d*)(?:[eE]([+-]?\d+))?$/;

/** Reads a decimal literal such as `-1.25e-3`. The text must be one. */
export function readDecimal(literal: string): Decimal {
  const match = LITERAL.exec(literal);
  if (match === null) throw new Error(`not a decimal literal: ${literal}`);
  const [, sign, whole = '', fraction = '', exponent = '0'] = match;
  const digits = BigInt(whole + fraction === '' ? '0' : whole + fraction);
  return { digits: sign === '-' ? -digits : digits, ten: Number(exponent) - fraction.length };
}

/** The factor that a decimal literal such as `0.0254` stands for. */
export function factorOf(literal: string): Factor {
  const { digits, ten } = readDecimal(literal);
  return { numerator: digits, denominator: 1n, ten };
}

export function multiply(a: Factor, b: Factor): Factor {
  return { numerator: a.numerator * b.numerator, denominator: a.denominator * b.denominator, ten: a.ten + b.ten };
}

/** a to a whole power, negative ones included. */
export function power(a: Factor, exponent: number): Factor {
  const times = BigInt(Math.abs(exponent));
  const [up, down] = exponent >= 0 ? [a.numerator, a.denominator] : [a.denominator, a.numerator];
  return { numerator: up ** times, denominator: down ** times, ten: a.ten * exponent };
}

/** Beyond these powers of ten a double is infinite or zero whatever the digits of a text of bounded length. */
const FARTHEST = 2000;

/**
 * The double nearest to (literal + offset) * factor; Infinity when it is too large for one.
 * @param literal a decimal literal of at most a few hundred characters
 * @param offset added first, such as the 459.67 of degF
 */
export function nearestDouble(literal: string, factor: Factor, offset: Decimal | null = null): number {
  if (offset === null && factor.numerator === 1n && factor.denominator === 1n) {
    return shiftedLiteral(literal, factor.ten) + 0;
  }
  const read = readDecimal(literal);
  if (Math.abs(read.ten) > FARTHEST) return Number(literal) + 0;
  const { digits, ten } = offset === null ? read : add(read, offset);
  const shift = ten + factor.ten;
  const numerator = digits * factor.numerator * 10n ** BigInt(Math.max(shift, 0));
  const denominator = factor.denominator * 10n ** BigInt(Math.max(-shift, 0));
  return nearestQuotient(numerator, denominator);
}

/** A power of ten only moves the literal's exponent, and the reading of literals rounds correctly. */
function shiftedLiteral(literal: string, ten: number): number {
  const at = literal.search(/[eE]/);
  const [mantissa, exponent] = at < 0 ? [literal, 0] : [literal.slice(0, at), Number(literal.slice(at + 1))];
  return Number(`${mantissa}e${Math.max(-FARTHEST, Math.min(FARTHEST, exponent)) + ten}`);
}

function add(a: Decimal, b: Decimal): Decimal {
  const ten = Math.min(a.ten, b.ten);
  return { digits: a.digits * 10n ** BigInt(a.ten - ten) + b.digits * 10n ** BigInt(b.ten - ten), ten };
}

/**
 * The double nearest to a quotient of whole numbers. The quotient is taken to at least 64 bits, a last bit standing for
 * all that follows, so that turning it into a double rounds once and correctly (below 2^-1022 a second time).
 */
function nearestQuotient(numerator: bigint, denominator: bigint): number {
  if (numerator === 0n) return 0;
  const size = numerator < 0n ? -numerator : numerator;
  const shift = Math.max(0, 66 - (bitLength(size) - bitLength(denominator)));
  const scaled = size << BigInt(shift);
  const quotient = scaled / denominator;
  const sticky = scaled % denominator === 0n ? 0n : 1n;
  const whole = Number((quotient << 1n) | sticky);
  // In two steps: 2^-shift alone may lie below the smallest double.
  const half = Math.floor((shift + 1) / 2);
  const value = whole * 2 ** -half * 2 ** -(shift + 1 - half);
  return numerator < 0n ? -value : value;
}

function bitLength(value: bigint): number {
  return value.toString(2).length;
}

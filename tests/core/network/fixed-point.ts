/**
 * Numbers of 400 binary places, as whole numbers: exact sums and, for what a bubble is made of, exact products, to tell the
 * rounding of a kernel from an error of its own.
 */
const PLACES = 400n;

/** A double, without rounding. Below 2^-347 its last digits are lost; nothing here is that small. */
export function fixed(x: number): bigint {
  let places = 0n;
  let whole = x;
  while (!Number.isInteger(whole)) {
    whole *= 2;
    places++;
  }
  return (BigInt(whole) << PLACES) >> places;
}

export function times(...factors: readonly bigint[]): bigint {
  return factors.reduce((product, factor) => (product * factor) >> PLACES);
}

/** The ratio of two of them, to double precision. */
export function ratio(above: bigint, below: bigint): number {
  // 2^1000 keeps 53 digits of any ratio met here, and the number below the largest double.
  return Number((above << 1000n) / below) / 2 ** 1000;
}

/** pi to 60 decimals (OEIS A000796). */
export const PI = (BigInt('3141592653589793238462643383279502884197169399375105820974944') << PLACES) / 10n ** 60n;

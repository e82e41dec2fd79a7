/** One quantity has one double, however it is spelt. */
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { factorOf, multiply, nearestDouble, ONE, power } from '../../../core/quantities/exact.ts';
import { parseQuantity } from '../../../core/quantities/quantity.ts';

const literals = fc
  .tuple(fc.integer({ min: -999_999_999, max: 999_999_999 }), fc.integer({ min: -12, max: 6 }))
  .map(([digits, ten]) => ({ digits, ten, text: `${digits}e${ten}` }));

describe('spelling', () => {
  it('in any decimal multiple gives the double that the number itself has', () => {
    const units = [
      ['m', 0],
      ['cm', -2],
      ['mm', -3],
      ['um', -6],
      ['nm', -9],
      ['km', 3],
    ] as const;
    fc.assert(
      fc.property(literals, fc.constantFrom(...units), ({ digits, ten }, [unit, shift]) => {
        const reading = parseQuantity(`${digits}e${ten - shift} ${unit}`, 'length');
        expect(reading).toEqual({ ok: true, value: Number(`${digits}e${ten}`) + 0 });
      }),
    );
  });

  it('in minutes and in seconds gives the same double', () => {
    fc.assert(
      fc.property(fc.integer({ min: 1, max: 1_000_000 }), (thousandths) => {
        const minutes = parseQuantity(`${thousandths}e-3 min`, 'time');
        expect(minutes).toEqual(parseQuantity(`${thousandths * 60} ms`, 'time'));
      }),
    );
  });

  it('in degrees Celsius and in kelvin gives the same double', () => {
    fc.assert(
      fc.property(fc.integer({ min: -27314, max: 200_000 }), (hundredths) => {
        const celsius = parseQuantity(`${hundredths}e-2 degC`, 'temperature');
        expect(celsius).toEqual({ ok: true, value: Number(`${hundredths + 27315}e-2`) });
      }),
    );
  });
});

describe('a quotient', () => {
  it('of doubles that divide exactly is exact', () => {
    fc.assert(
      fc.property(fc.integer({ min: 1, max: 2 ** 26 }), fc.integer({ min: 1, max: 2 ** 26 }), (a, b) => {
        expect(nearestDouble(String(a * b), power(factorOf(String(b)), -1))).toBe(a);
      }),
    );
  });

  it('of whole numbers below 2^53 is the one that the processor rounds to', () => {
    // IEEE 754 division of two exact doubles is correctly rounded, so it must agree.
    fc.assert(
      fc.property(fc.maxSafeInteger(), fc.integer({ min: 1, max: 2 ** 40 }), (a, b) => {
        const factor = multiply(ONE, power(factorOf(String(b)), -1));
        expect(nearestDouble(String(a), factor)).toBe(a / b + 0);
      }),
    );
  });

  it('rounds a tie to even', () => {
    // (2^54 + 2)/2 = 2^53 + 1 lies halfway between two doubles.
    expect(nearestDouble(String(2n ** 54n + 2n), power(factorOf('2'), -1))).toBe(2 ** 53);
    expect(nearestDouble(`${2n ** 54n + 2n}.1`, power(factorOf('2'), -1))).toBe(2 ** 53 + 2);
  });

  it('too large or too small for a double becomes Infinity or 0', () => {
    const inch = factorOf('0.0254');
    expect(nearestDouble('1e999999999', inch)).toBe(Infinity);
    expect(nearestDouble('1e-999999999', inch)).toBe(0);
    expect(nearestDouble('1e-999999999', factorOf('1e-3'))).toBe(0);
    expect(nearestDouble('1e310', power(factorOf('25'), -1))).toBe(Infinity);
    expect(nearestDouble('1e-320', power(factorOf('4'), -1))).toBe(1e-320 / 4);
  });
});

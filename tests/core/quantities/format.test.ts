/** Numbers in SI, written for a person. */
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { DIMENSIONS, type DimensionName } from '../../../core/quantities/dimensions.ts';
import { formatQuantity } from '../../../core/quantities/format.ts';
import { parseQuantity } from '../../../core/quantities/quantity.ts';

describe('a number in a sentence', () => {
  it.each([
    [5e-5, 'length', '50 µm'],
    [1e-3, 'length', '1 mm'],
    [1e-6, 'length', '1 µm'],
    [0.02, 'length', '20 mm'],
    [2.5, 'length', '2.5 m'],
    [-2e-3, 'length', '-2 mm'],
    [0, 'length', '0 m'],
    [101325, 'pressure', '101.325 kPa'],
    [-20, 'pressure', '-20 Pa'],
    [0.072, 'surface-tension', '72 mN/m'],
    [298.15, 'temperature', '25 °C'],
    [7200, 'time', '2 h'],
    [90, 'time', '1.5 min'],
    [0.0005, 'time', '500 µs'],
    [8.2, 'concentration', '8.2 mmol/L'],
    [0.2, 'number', '0.2'],
    [5e-10, 'diffusivity', '5e-10 m^2/s'],
  ] as const)('%d as %s is %s', (value, name, text) => {
    expect(formatQuantity(value, name)).toBe(text);
  });

  it('reads back to itself within its six digits, in every dimension', () => {
    const names = Object.keys(DIMENSIONS) as DimensionName[];
    fc.assert(
      fc.property(fc.constantFrom(...names), fc.double({ min: 1e-9, max: 1e6, noNaN: true }), (name, value) => {
        const reading = parseQuantity(formatQuantity(value, name), name);
        // Six significant digits: half a unit of the sixth; a temperature has them of its degrees Celsius.
        const offset = name === 'temperature' ? 273.15 : 0;
        expect(reading.ok && Math.abs(reading.value - value) <= 5e-6 * (value + offset)).toBe(true);
      }),
    );
  });
});

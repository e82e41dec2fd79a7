/** Quantities as engineers write them, into SI. */
import Qty from 'js-quantities';
import { describe, expect, it } from 'vitest';
import type { DimensionName } from '../../../core/quantities/dimensions.ts';
import { DIMENSIONS } from '../../../core/quantities/dimensions.ts';
import { parseQuantity } from '../../../core/quantities/quantity.ts';

function si(text: string | number, name: DimensionName): number {
  const reading = parseQuantity(text, name);
  if (!reading.ok) throw new Error(reading.message);
  return reading.value;
}

function refusal(text: unknown, name: DimensionName): string {
  const reading = parseQuantity(text, name);
  return reading.ok ? `read as ${reading.value}` : reading.message;
}

/** Every quantity of the contract, and the trade's other spellings. Exact: a spelling must not change a run. */
const SPELLINGS: readonly (readonly [text: string, name: DimensionName, value: number])[] = [
  ['50 um', 'length', 50e-6],
  ['50 µm', 'length', 50e-6],
  ['50 μm', 'length', 50e-6],
  ['0.05 mm', 'length', 50e-6],
  ['0.00005 m', 'length', 50e-6],
  ['5e-5m', 'length', 50e-6],
  ['.05e0 mm', 'length', 50e-6],
  ['50 micron', 'length', 50e-6],
  ['-3 mm', 'length', -3e-3],
  ['+3 mm', 'length', 3e-3],
  ['−3 mm', 'length', -3e-3],
  ['0.1 in', 'length', 0.00254],
  ['12 in', 'length', 0.3048],
  ['1 ft', 'length', 0.3048],
  ['500 Å', 'length', 50e-9],
  ['0 m', 'length', 0],
  ['1 mm^2', 'area', 1e-6],
  ['1 mm2', 'area', 1e-6],
  ['1 mm²', 'area', 1e-6],
  ['2 mL', 'volume', 2e-6],
  ['2 ml', 'volume', 2e-6],
  ['2 cm^3', 'volume', 2e-6],
  ['2 cc', 'volume', 2e-6],
  ['1 L', 'volume', 1e-3],
  ['1 dm³', 'volume', 1e-3],
  ['10 s', 'time', 10],
  ['10 ms', 'time', 0.01],
  ['2 h', 'time', 7200],
  ['2 hours', 'time', 7200],
  ['90 min', 'time', 5400],
  ['3 days', 'time', 259200],
  ['101325 Pa', 'pressure', 101325],
  ['1 atm', 'pressure', 101325],
  ['1013.25 hPa', 'pressure', 101325],
  ['1.01325 bar', 'pressure', 101325],
  ['760 torr', 'pressure', 101325],
  ['20 mbar', 'pressure', 2000],
  ['1 mmHg', 'pressure', 133.322387415],
  ['1 cmH2O', 'pressure', 98.0665],
  ['10 mmH2O', 'pressure', 98.0665],
  ['1 N/m^2', 'pressure', 1],
  ['25 degC', 'temperature', 298.15],
  ['25 °C', 'temperature', 298.15],
  ['25 ℃', 'temperature', 298.15],
  ['25°C', 'temperature', 298.15],
  ['77 degF', 'temperature', 298.15],
  ['298.15 K', 'temperature', 298.15],
  ['-40 degF', 'temperature', 233.15],
  ['72 mN/m', 'surface-tension', 0.072],
  ['72 dyn/cm', 'surface-tension', 0.072],
  ['0.072 J/m^2', 'surface-tension', 0.072],
  ['0.072 kg/s^2', 'surface-tension', 0.072],
  ['5 umol/m^2', 'surface-concentration', 5e-6],
  ['5e-10 mol/cm^2', 'surface-concentration', 5e-6],
  ['0.4 mol/m^3', 'concentration', 0.4],
  ['8.2 mmol/L', 'concentration', 8.2],
  ['8.2 mM', 'concentration', 8.2],
  ['0.0082 mol/dm^3', 'concentration', 8.2],
  ['5e-10 m^2/s', 'diffusivity', 5e-10],
  ['5e-6 cm^2/s', 'diffusivity', 5e-10],
  ['5e-10 m²·s⁻¹', 'diffusivity', 5e-10],
  ['5e-7 mol/m^3/Pa', 'solubility', 5e-7],
  ['5e-7 mol/m3/Pa', 'solubility', 5e-7],
  ['5e-7 mol/(m^3 Pa)', 'solubility', 5e-7],
  ['5e-7 mol/(m^3*Pa)', 'solubility', 5e-7],
  ['5e-7 mol m^-3 Pa^-1', 'solubility', 5e-7],
  ['5e-7 mol·m⁻³·Pa⁻¹', 'solubility', 5e-7],
  ['5e-4 mmol/m^3/Pa', 'solubility', 5e-7],
  ['138 g/mol', 'molar-mass', 0.138],
  ['0.138 kg/mol', 'molar-mass', 0.138],
  ['14 uPa*s', 'viscosity', 14e-6],
  ['14 µPa s', 'viscosity', 14e-6],
  ['14 uPa.s', 'viscosity', 14e-6],
  ['1 cP', 'viscosity', 1e-3],
  ['1 mPas', 'viscosity', 1e-3],
  ['2 nmol/s', 'molar-flow', 2e-9],
  ['120 nmol/min', 'molar-flow', 2e-9],
  ['1000 kg/m^3', 'density', 1000],
  ['1 g/cm^3', 'density', 1000],
  ['1 g/mL', 'density', 1000],
  ['1 mm/s', 'velocity', 1e-3],
  ['1e-9 mol/(m^2 s Pa)', 'permeance', 1e-9],
  ['1e-9 mol/m^2/s/Pa', 'permeance', 1e-9],
  ['180 deg', 'angle', Math.PI],
  ['90°', 'angle', Math.PI / 2],
  ['1 rad', 'angle', 1],
  ['0.2', 'number', 0.2],
  ['20 %', 'number', 0.2],
  ['20%', 'number', 0.2],
  ['100 ppm', 'number', 1e-4],
];

describe('a quantity with its unit', () => {
  it.each(SPELLINGS)('%s as %s is exactly %d in SI', (text, name, value) => {
    expect(si(text, name)).toBe(value);
  });

  it('without a unit is in SI when it is a number', () => {
    expect(si(5e-5, 'length')).toBe(5e-5);
  });

  it('reads back the example that every dimension gives', () => {
    for (const name of Object.keys(DIMENSIONS) as DimensionName[])
      expect(si(DIMENSIONS[name].example, name)).toBeGreaterThan(0);
  });

  it.each([
    ['3 psi', 'pressure', '3 psi', 'Pa'],
    ['3 inHg', 'pressure', '3 inHg', 'Pa'],
    ['3 inH2O', 'pressure', '3 inH2O', 'Pa'],
    ['3 mmHg', 'pressure', '3 mmHg', 'Pa'],
    ['3 torr', 'pressure', '3 torr', 'Pa'],
    ['3 lbf/in^2', 'pressure', '3 lbf/in^2', 'Pa'],
    ['3 mil', 'length', '3 mil', 'm'],
    ['3 week', 'time', '3 week', 's'],
    ['3 lb/ft^3', 'density', '3 lb/ft^3', 'kg/m^3'],
    ['3 P', 'viscosity', '3 poise', 'Pa*s'],
    ['3 St', 'diffusivity', '3 stokes', 'm^2/s'],
  ] as const)('%s agrees with a units library', (text, name, otherText, target) => {
    // 3e-5: the library keeps mmHg and inHg to five digits, and takes water at 4 degC (0.999972 g/mL) for inH2O.
    const other = Qty(otherText).to(target).scalar;
    expect(Math.abs(si(text, name) / other - 1)).toBeLessThan(3e-5);
  });
});

describe('a quantity that cannot be read', () => {
  it.each([
    ['5 mN/m', 'length', '"5 mN/m" is a surface tension; a length is needed'],
    ['5', 'length', '"5" has no unit; a length is needed, such as "50 um"'],
    ['5 fathom', 'length', '"5 fathom": "fathom" is no known unit; a length is needed, such as "50 um"'],
    [
      '0,5 mm',
      'length',
      '"0,5 mm" has a comma in its number: write a point for decimals, and no other mark; a length is needed',
    ],
    ['wide', 'length', '"wide" is no quantity; a length is needed, such as "50 um"'],
    ['', 'length', '"" is no quantity; a length is needed, such as "50 um"'],
    ['NaN m', 'length', '"NaN m" is no quantity; a length is needed, such as "50 um"'],
    ['1e400 m', 'length', '"1e400 m" is too large a number; a length is needed'],
    ['25 degC', 'pressure', '"25 degC" is a temperature; a pressure is needed'],
    ['5 mL/min', 'molar-flow', '"5 mL/min" is a volume flow; a molar flow is needed'],
    ['5 deg', 'number', '"5 deg" is an angle; a plain number is needed'],
    ['5 N m^3', 'length', '"5 N m^3" is a quantity in kg m^4 s^-2; a length is needed'],
    ['5 m/', 'length', '"5 m/": "m/" cannot be read as a unit; a length is needed, such as "50 um"'],
    ['5 (m', 'length', '"5 (m": "(m" cannot be read as a unit; a length is needed, such as "50 um"'],
    [true, 'length', 'true is no quantity; a length is needed'],
    [null, 'time', 'null is no quantity; a time is needed'],
    [Infinity, 'time', 'Infinity is no finite number; a time is needed'],
  ] as const)('%s as %s', (text, name, sentence) => {
    expect(refusal(text, name)).toBe(sentence);
  });

  it('is refused where a product behind a slash could stand above or below the line', () => {
    expect(refusal('5e-7 mol/m^3 Pa', 'solubility')).toBe(
      '"5e-7 mol/m^3 Pa" has a product behind a slash: put what stands below the line in brackets, or a slash before each; a solubility is needed',
    );
    expect(refusal('1 kg/m*s', 'viscosity')).toContain('a product behind a slash');
  });
});

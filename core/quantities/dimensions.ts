/**
 * The dimensions that a scenario asks for, by name: what to call them in a sentence, their SI unit, an example to copy,
 * and the units in which a person likes to read them.
 */
import type { Powers } from './units.ts';

export interface Dimension {
  /** With its article, for sentences. */
  readonly phrase: string;
  /** As this room spells it; '' for a plain number. */
  readonly siUnit: string;
  readonly example: string;
  readonly powers: Powers;
  /** Units for reading, smallest first. */
  readonly display: readonly string[];
}

function dimension(
  phrase: string,
  siUnit: string,
  example: string,
  powers: Powers,
  display: readonly string[],
): Dimension {
  return { phrase, siUnit, example, powers, display };
}

/* prettier-ignore */
export const DIMENSIONS = {
  'length': dimension('a length', 'm', '50 um', [0, 1, 0, 0, 0, 0], ['nm', 'µm', 'mm', 'm']),
  'area': dimension('an area', 'm^2', '1 mm^2', [0, 2, 0, 0, 0, 0], ['µm^2', 'mm^2', 'm^2']),
  'volume': dimension('a volume', 'm^3', '2 mL', [0, 3, 0, 0, 0, 0], ['nL', 'µL', 'mL', 'L', 'm^3']),
  'time': dimension('a time', 's', '10 s', [0, 0, 1, 0, 0, 0], ['ns', 'µs', 'ms', 's', 'min', 'h', 'days']),
  'pressure': dimension('a pressure', 'Pa', '20 mbar', [1, -1, -2, 0, 0, 0], ['mPa', 'Pa', 'kPa', 'MPa']),
  'temperature': dimension('a temperature', 'K', '25 degC', [0, 0, 0, 0, 1, 0], ['°C']),
  'surface-tension': dimension('a surface tension', 'N/m', '72 mN/m', [1, 0, -2, 0, 0, 0], ['mN/m', 'N/m']),
  'surface-concentration': dimension('a surface concentration', 'mol/m^2', '5 umol/m^2', [0, -2, 0, 1, 0, 0], ['nmol/m^2', 'µmol/m^2', 'mmol/m^2', 'mol/m^2']),
  'concentration': dimension('a concentration', 'mol/m^3', '8.2 mmol/L', [0, -3, 0, 1, 0, 0], ['nmol/L', 'µmol/L', 'mmol/L', 'mol/L']),
  'diffusivity': dimension('a diffusivity', 'm^2/s', '5e-10 m^2/s', [0, 2, -1, 0, 0, 0], ['m^2/s']),
  'solubility': dimension('a solubility', 'mol/(m^3 Pa)', '5e-7 mol/m^3/Pa', [-1, -2, 2, 1, 0, 0], ['mol/(m^3 Pa)']),
  'molar-mass': dimension('a molar mass', 'kg/mol', '138 g/mol', [1, 0, 0, -1, 0, 0], ['g/mol']),
  'viscosity': dimension('a viscosity', 'Pa s', '14 uPa*s', [1, -1, -1, 0, 0, 0], ['µPa s', 'mPa s', 'Pa s']),
  'molar-flow': dimension('a molar flow', 'mol/s', '2 nmol/s', [0, 0, -1, 1, 0, 0], ['pmol/s', 'nmol/s', 'µmol/s', 'mmol/s', 'mol/s']),
  'density': dimension('a density', 'kg/m^3', '997 kg/m^3', [1, -3, 0, 0, 0, 0], ['kg/m^3']),
  'velocity': dimension('a velocity', 'm/s', '1 mm/s', [0, 1, -1, 0, 0, 0], ['nm/s', 'µm/s', 'mm/s', 'm/s']),
  'permeance': dimension('a permeance', 'mol/(m^2 s Pa)', '1e-9 mol/(m^2 s Pa)', [-1, -1, 1, 1, 0, 0], ['mol/(m^2 s Pa)']),
  'angle': dimension('an angle', 'rad', '90 deg', [0, 0, 0, 0, 0, 1], ['rad']),
  'number': dimension('a plain number', '', '0.2', [0, 0, 0, 0, 0, 0], ['']),
} as const satisfies Record<string, Dimension>;

export type DimensionName = keyof typeof DIMENSIONS;

/** What else a person may write by mistake, so that the sentence can call it by its name. */
const OTHERS: readonly (readonly [phrase: string, powers: Powers])[] = [
  ['a mass', [1, 0, 0, 0, 0, 0]],
  ['an amount of substance', [0, 0, 0, 1, 0, 0]],
  ['a force', [1, 1, -2, 0, 0, 0]],
  ['an energy', [1, 2, -2, 0, 0, 0]],
  ['a power', [1, 2, -3, 0, 0, 0]],
  ['a frequency', [0, 0, -1, 0, 0, 0]],
  ['a volume flow', [0, 3, -1, 0, 0, 0]],
  ['a mass flow', [1, 0, -1, 0, 0, 0]],
];

const BASE = ['kg', 'm', 's', 'mol', 'K', 'rad'] as const;

function same(a: Powers, b: Powers): boolean {
  return a.every((power, k) => power === b[k]);
}

/** True where a quantity with these powers has this dimension. */
export function hasDimension(name: DimensionName, powers: Powers): boolean {
  return same(DIMENSIONS[name].powers, powers);
}

/** What a quantity with these powers is called: `a surface tension`, or `a quantity in kg m^2`. */
export function describePowers(powers: Powers): string {
  for (const known of Object.values(DIMENSIONS)) if (same(known.powers, powers)) return known.phrase;
  for (const [phrase, other] of OTHERS) if (same(other, powers)) return phrase;
  const parts = BASE.flatMap((base, k) => {
    const power = powers[k]!;
    return power === 0 ? [] : [power === 1 ? base : `${base}^${power}`];
  });
  return `a quantity in ${parts.join(' ')}`;
}

/**
 * The built-in gases, at 25 degC and, in the liquid, in water. A scenario finds them by name; each value carries its source.
 */

export interface SourcedValue {
  readonly value: number;
  readonly source: string;
}

export const GAS_PROPERTIES = ['molarMass', 'viscosity', 'diffusivity', 'solubility'] as const;
export type GasProperty = (typeof GAS_PROPERTIES)[number];

/** molarMass kg/mol, viscosity Pa s, diffusivity in water m^2/s, solubility in water mol/(m^3 Pa). */
export type GasSubstance = Readonly<Record<GasProperty, SourcedValue>>;

/** The temperature at which all of this holds, K. */
export const GAS_TEMPERATURE = 298.15;

const ATOMIC_WEIGHTS = 'sum of standard atomic weights (IUPAC 2021, abridged), from memory';
const VISCOSITY = 'CRC Handbook of Chemistry and Physics, Viscosity of Gases, interpolated to 25 degC between';
const DIFFUSION = 'CRC Handbook of Chemistry and Physics, Diffusion of Gases in Water, 25 degC';
const HENRY = "R. Sander, Compilation of Henry's law constants, Atmos. Chem. Phys. 23 (2023) 10901";

function gas(
  molarMass: number,
  viscosity: readonly [value: number, source: string],
  diffusivity: readonly [value: number, source: string],
  solubility: readonly [value: number, source: string],
  massSource = ATOMIC_WEIGHTS,
): GasSubstance {
  const sourced = ([value, source]: readonly [number, string]): SourcedValue => ({ value, source });
  return {
    molarMass: { value: molarMass, source: massSource },
    viscosity: sourced(viscosity),
    diffusivity: sourced(diffusivity),
    solubility: sourced(solubility),
  };
}

export const GASES: ReadonlyMap<string, GasSubstance> = new Map([
  [
    'air',
    gas(
      28.965e-3,
      [18.4e-6, `${VISCOSITY} 13.3 at 200 K and 18.5 uPa s at 300 K`],
      [2.1e-9, 'mean of nitrogen and oxygen, 79 to 21, weighted with their solubility'],
      [7.8e-6, 'mean of nitrogen and oxygen, 79 to 21; oxygen alone is twice as soluble as nitrogen'],
      'dry air, US Standard Atmosphere 1976, from memory',
    ),
  ],
  [
    'nitrogen',
    gas(
      28.014e-3,
      [17.8e-6, `${VISCOSITY} 12.9 at 200 K and 17.9 uPa s at 300 K`],
      [2.0e-9, DIFFUSION],
      [6.4e-6, `${HENRY}: reviews give 6.4e-6 to 6.5e-6`],
    ),
  ],
  [
    'oxygen',
    gas(
      31.998e-3,
      [20.6e-6, `${VISCOSITY} 14.7 at 200 K and 20.7 uPa s at 300 K`],
      [2.42e-9, DIFFUSION],
      [1.3e-5, `${HENRY}: reviews give 1.2e-5 to 1.3e-5`],
    ),
  ],
  [
    'carbon-dioxide',
    gas(
      44.009e-3,
      [14.9e-6, `${VISCOSITY} 10.1 at 200 K and 15.0 uPa s at 300 K`],
      [1.91e-9, DIFFUSION],
      [3.3e-4, `${HENRY}: reviews give 3.3e-4 to 3.4e-4; as dissolved gas, without its reaction with water`],
    ),
  ],
  [
    'helium',
    gas(
      4.0026e-3,
      [19.8e-6, `${VISCOSITY} 15.1 at 200 K and 19.9 uPa s at 300 K`],
      [7.28e-9, DIFFUSION],
      [3.8e-6, `${HENRY}: reviews give 3.7e-6 to 3.9e-6`],
    ),
  ],
  [
    'argon',
    gas(
      39.95e-3,
      [22.6e-6, `${VISCOSITY} 15.9 at 200 K and 22.7 uPa s at 300 K`],
      [2.5e-9, DIFFUSION],
      [1.4e-5, `${HENRY}: reviews agree`],
    ),
  ],
  [
    'hydrogen',
    gas(
      2.016e-3,
      [8.9e-6, `${VISCOSITY} 6.8 at 200 K and 8.9 uPa s at 300 K`],
      [5.11e-9, DIFFUSION],
      [7.7e-6, `${HENRY}: reviews give 7.7e-6 to 7.8e-6`],
    ),
  ],
  [
    'methane',
    gas(
      16.043e-3,
      [11.0e-6, `${VISCOSITY} 7.7 at 200 K and 11.1 uPa s at 300 K`],
      [1.84e-9, DIFFUSION],
      [1.4e-5, `${HENRY}: reviews give 1.4e-5 to 1.5e-5`],
    ),
  ],
  [
    'sulfur-hexafluoride',
    gas(
      146.055e-3,
      [
        15.2e-6,
        'CRC Handbook of Chemistry and Physics, Viscosity of Gases, carried to 25 degC from 15.3 uPa s at 300 K',
      ],
      [1.2e-9, 'King & Saltzman, J. Geophys. Res. 100 (1995) 7083, from memory'],
      [2.4e-6, `${HENRY}: reviews give 2.4e-6 to 2.5e-6`],
    ),
  ],
  [
    'hexafluoroethane',
    gas(
      138.012e-3,
      [14e-6, 'two digits, from memory'],
      [1.0e-9, 'order of magnitude for a molecule of its size in water, from memory'],
      [5.6e-7, `${HENRY}: measurements give 5.3e-7 to 6.5e-7`],
    ),
  ],
]);

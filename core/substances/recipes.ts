/**
 * The built-in film recipes, in the words of a scenario file, each with its source. A scenario finds them by name.
 * Where the clean tension is left out it is that of water at the temperature of the run.
 */

/** Written as a file would write it, so that it passes through the same checks. */
export interface RecipeSubstance {
  readonly source: string;
  readonly tension: Readonly<Record<string, string | number>>;
  readonly loading?: Readonly<Record<string, string | number>>;
  readonly supply?: Readonly<Record<string, string | number>>;
  readonly micelles?: Readonly<Record<string, string>>;
}

/** The temperature at which the surfactants were measured, K. */
export const RECIPE_TEMPERATURE = 298.15;

export const RECIPES: ReadonlyMap<string, RecipeSubstance> = new Map<string, RecipeSubstance>([
  ['water', { source: 'IAPWS R1-76(2014)', tension: { law: 'constant' } }],
  [
    'sodium-dodecyl-sulfate',
    {
      source:
        'Langmuir constants made to give 39 mN/m and 3.2 umol/m^2 at a cmc of 8.2 mmol/L, without added salt; these three are handbook values, from memory',
      tension: { law: 'langmuir', saturation: '3.9 umol/m^2', szyszkowski: '1.82 mmol/L', ions: 2 },
      loading: { concentration: '4 mmol/L' },
      supply: { kind: 'closed-film', thickness: '1 um' },
      micelles: { cmc: '8.2 mmol/L' },
    },
  ],
  [
    'dodecanol-ethoxylate-8',
    {
      source:
        'Langmuir constants made to give 34.5 mN/m and 2.7 umol/m^2 at a cmc of 0.1 mmol/L for a fatty alcohol C12 with 8 ethoxy groups; these three are from memory',
      tension: { law: 'langmuir', saturation: '2.7 umol/m^2', szyszkowski: '0.37 umol/L' },
      loading: { concentration: '0.05 mmol/L' },
      supply: { kind: 'closed-film', thickness: '1 um' },
      micelles: { cmc: '0.1 mmol/L' },
    },
  ],
  [
    'protein-layer',
    {
      source:
        'an insoluble layer made to have a tension near 50 mN/m and an elasticity near 60 mN/m, the order of layers of globular proteins; no measured substance, from memory',
      tension: { law: 'langmuir', saturation: '5 umol/m^2' },
      loading: { coverage: 0.83 },
      supply: { kind: 'none' },
    },
  ],
]);

/**
 * Gases and film recipes as a scenario file writes them.
 */
import * as z from 'zod';
import { count, quantity, record, text, word } from './fields.ts';

const source = text().optional().meta({ description: 'where the values come from' });

export const gasDocument = record('a gas', {
  molarMass: quantity('molar-mass', { above: 0 }).optional(),
  viscosity: quantity('viscosity', { above: 0 }).optional(),
  diffusivity: quantity('diffusivity', { above: 0 }).optional().meta({ description: 'in the liquid' }),
  solubility: quantity('solubility', { above: 0 }).optional().meta({ description: "Henry's solubility in the liquid" }),
  source,
}).meta({ description: 'what a built-in name leaves out is filled in from the built-in gas' });

const clean = quantity('surface-tension', { above: 0 })
  .optional()
  .meta({ description: 'without surfactant; when left out, that of water at the temperature of the run' });
const saturation = quantity('surface-concentration', { above: 0 });
const szyszkowski = quantity('concentration', { above: 0 })
  .optional()
  .meta({ description: 'needed wherever a concentration is: a closed film, or a loading by concentration' });
const ions = count(1, 2).default(1).meta({ description: '2 for an ionic surfactant without added salt' });

function law<const Law extends string>(lawName: Law) {
  return record(`a tension of law ${lawName}`, { law: z.literal(lawName), clean, saturation, szyszkowski, ions });
}

export const tensionDocument = z.discriminatedUnion(
  'law',
  [
    record('a tension of law constant', { law: z.literal('constant'), clean }),
    law('henry'),
    law('langmuir'),
    record('a tension of law frumkin', {
      law: z.literal('frumkin'),
      clean,
      saturation,
      szyszkowski,
      attraction: quantity('number').default(0),
      ions,
    }),
    law('volmer'),
  ],
  { error: 'a tension with its law' },
);

const loadingDocument = z.union(
  [
    record('a loading by coverage', { coverage: quantity('number', { above: 0, below: 1 }) }),
    record('a loading by concentration', { concentration: quantity('concentration', { above: 0 }) }),
  ],
  { error: 'a loading such as {"coverage": 0.9} or {"concentration": "0.4 mmol/L"}' },
);

const transport = word(['equilibrium', 'diffusing']).default('equilibrium');
const diffusivity = quantity('diffusivity', { above: 0 }).optional();

const supplyDocument = z.discriminatedUnion(
  'kind',
  [
    record('a supply of kind none', { kind: z.literal('none') }),
    record('a supply of kind closed-film', {
      kind: z.literal('closed-film'),
      thickness: quantity('length', { above: 0 }).meta({ description: 'of the film, both faces together, as loaded' }),
      transport,
      diffusivity,
    }),
    record('a supply of kind bulk', { kind: z.literal('bulk'), transport, diffusivity }),
  ],
  { error: 'a supply with its kind' },
);

export const recipeDocument = record('a recipe', {
  tension: tensionDocument.optional().meta({ description: 'needed, unless the recipe is built in' }),
  loading: loadingDocument.optional(),
  supply: supplyDocument.optional().meta({ description: '{"kind": "none"} when left out' }),
  micelles: record('micelles', {
    cmc: quantity('concentration', { above: 0 }),
    relaxation: quantity('time', { above: 0 }).optional(),
  }).optional(),
  collapse: record('a collapse', {
    ceiling: quantity('number', { above: 0, to: 1 }),
    respreading: quantity('time', { above: 0 }),
  }).optional(),
  source,
}).meta({ description: 'what a built-in name leaves out is filled in from the built-in recipe' });

export type GasDocument = z.output<typeof gasDocument>;
export type RecipeDocument = z.output<typeof recipeDocument>;

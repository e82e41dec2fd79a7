/**
 * The scenario file as a whole: the one definition from which loader, types and JSON Schema derive.
 */
import * as z from 'zod';
import { parseQuantity } from '../quantities/quantity.ts';
import { WATER } from '../substances/water.ts';
import { count, quantity, record, text, waveform, word } from './fields.ts';
import { LINK_DOCUMENTS } from './link-document.ts';
import { NODE_DOCUMENTS } from './node-document.ts';
import { gasDocument, recipeDocument } from './recipe-document.ts';

const ATMOSPHERE = 101325; // Pa

export const ambientDocument = record('an ambient', {
  pressure: waveform('pressure').prefault(ATMOSPHERE),
  liquidDensity: quantity('density', { above: 0 }).default(WATER.density),
  surfaceHeight: quantity('length').optional().meta({
    description:
      'z of the surface of the liquid. Where it is given, bubbles with one face and a place carry the head of the liquid above them; where it is left out, none does',
  }),
});

export const runDocument = record('a run', {
  until: quantity('time', { above: 0 }),
  untilBubbles: count(0, 1e9)
    .optional()
    .meta({ description: 'the run also ends at the vanishing that leaves this many bubbles' }),
  frames: count(0, 10_000_000).default(200),
  tolerance: quantity('number', { from: 1e-12, to: 1e-2 }).default(1e-6),
  method: word(['auto', 'explicit', 'stiff']).default('auto'),
  vanishRadius: quantity('length', { above: 0 }).default(1e-6),
  onVanish: word(['drop', 'join-neighbours', 'repack']).default('drop'),
});

export const CRITERION_MEASURES = [
  'sauter-growth',
  'bubbles-lost',
  'first-loss',
  'pair-margin',
  'growing-modes',
  'radius-range',
  'tension-range',
  'cycle-drift',
  'liquid-fraction',
  'gas-lost',
] as const;

const limit = z.union([z.number(), z.string()], { error: 'a number or a quantity' });

export const criterionDocument = record('a criterion', {
  measure: word(CRITERION_MEASURES),
  above: limit.optional(),
  below: limit.optional(),
  until: limit
    .superRefine((written, context) => {
      const reading = parseQuantity(written, 'time');
      if (!reading.ok) context.addIssue({ code: 'custom', message: reading.message, params: { ...reading } });
    })
    .optional(),
}).superRefine((criterion, context) => {
  if (criterion.above !== undefined || criterion.below !== undefined) return;
  const message = 'sets no limit; "above" or "below" is needed';
  context.addIssue({ code: 'custom', message, params: { code: 'missing', expected: '"above" or "below"' } });
});

export const scenarioDocument = record('a scenario', {
  format: z.literal('frothwright', { error: '"frothwright"' }),
  version: z.literal(1, { error: '1' }),
  title: text().default(''),
  notes: text().default(''),
  temperature: quantity('temperature', { above: 0 }).default(298.15),
  ambient: ambientDocument.optional(),
  gases: z.record(z.string(), gasDocument, { error: 'gases by name' }).optional(),
  recipes: z.record(z.string(), recipeDocument, { error: 'recipes by name' }).optional(),
  nodes: z.array(z.discriminatedUnion('kind', Object.values(NODE_DOCUMENTS) as NodeOptions), {
    error: 'a list of nodes',
  }),
  links: z
    .array(z.discriminatedUnion('kind', Object.values(LINK_DOCUMENTS) as LinkOptions), { error: 'a list of links' })
    .optional(),
  run: runDocument,
  criteria: z.array(criterionDocument, { error: 'a list of criteria' }).default([]),
  vessel: z
    .record(z.string(), z.unknown(), { error: 'a vessel' })
    .optional()
    .meta({ description: 'kept for a later version' }),
});

type NodeOptions = [
  typeof NODE_DOCUMENTS.bubble,
  typeof NODE_DOCUMENTS.cavity,
  typeof NODE_DOCUMENTS.reservoir,
  typeof NODE_DOCUMENTS.pool,
];
type LinkOptions = [typeof LINK_DOCUMENTS.tube, typeof LINK_DOCUMENTS.film, typeof LINK_DOCUMENTS.liquid];

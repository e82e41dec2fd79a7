/**
 * Links as a scenario file writes them. A new kind is one record here and one line in the register below.
 */
import * as z from 'zod';
import { name, quantity, record } from './fields.ts';

const length = quantity('length', { above: 0 });
const moment = quantity('time', { from: 0 });
const open = z
  .array(z.tuple([moment, moment], { error: 'a span [from, to]' }), { error: 'a list of spans [from, to]' })
  .superRefine((spans, context) => {
    spans.forEach(([from, to], i) => {
      const fine = to > from && (i === 0 || from > spans[i - 1]![1]);
      if (fine) return;
      const message =
        to > from
          ? 'starts before the span before it has ended; spans in rising order, apart from each other, are needed'
          : 'does not end after it starts; a span [from, to] is needed';
      context.addIssue({
        code: 'custom',
        path: [i],
        message,
        params: { code: 'contradiction', expected: 'a later span' },
      });
    });
  })
  .optional()
  .meta({ description: 'when the valve is open; always, when left out' });

const ends = { from: name, to: name };

export const tubeDocument = record('a tube', {
  id: name,
  kind: z.literal('tube'),
  ...ends,
  bore: length.meta({ description: 'inner diameter' }),
  length,
  viscosity: quantity('viscosity', { above: 0 })
    .optional()
    .meta({ description: "of the gas, in place of the mixture's own" }),
  open,
});

export const filmDocument = record('a film', {
  id: name,
  kind: z.literal('film'),
  ...ends,
  area: z.union(
    [
      quantity('area', { above: 0 }),
      record('a share of the smaller cross-section', { share: quantity('number', { above: 0, to: 1 }) }),
    ],
    { error: 'an area above 0, or {"share": 0.2},' },
  ),
  thickness: length.optional(),
  permeance: quantity('permeance', { above: 0 })
    .optional()
    .meta({ description: 'in place of thickness: the same for every gas' }),
  monolayer: quantity('velocity', { above: 0 })
    .optional()
    .meta({ description: 'permeability of each monolayer; no resistance when left out' }),
  open,
}).meta({ description: 'exactly one of thickness and permeance is needed' });

export const liquidDocument = record('a liquid path', {
  id: name,
  kind: z.literal('liquid'),
  ...ends,
  distance: length.optional().meta({ description: 'between two centres, in place of the distance of their places' }),
  transient: z
    .boolean({ error: 'true or false' })
    .default(false)
    .meta({ description: 'to a pool: add the start-up term of Epstein and Plesset' }),
  open,
});

export const LINK_DOCUMENTS = { tube: tubeDocument, film: filmDocument, liquid: liquidDocument } as const;

export type TubeDocument = z.output<typeof tubeDocument>;
export type FilmDocument = z.output<typeof filmDocument>;
export type LiquidDocument = z.output<typeof liquidDocument>;
export type LinkKind = keyof typeof LINK_DOCUMENTS;

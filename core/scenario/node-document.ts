/**
 * Nodes as a scenario file writes them. A new kind is one record here and one line in the register below.
 */
import * as z from 'zod';
import { composition, count, name, place, quantity, record, waveform } from './fields.ts';

const length = quantity('length', { above: 0 });
const volume = quantity('volume', { above: 0 });
const gas = composition.optional().meta({ description: 'when left out, the only gas of the file' });
const at = place.optional().meta({ description: 'where it is: [x, z] or [x, y, z], z upwards' });
const feed = record('a feed', {
  rate: waveform('molar-flow'),
  gas,
})
  .optional()
  .meta({ description: 'gas that is put into the node' });

export const bubbleDocument = record('a bubble', {
  id: name,
  kind: z.literal('bubble'),
  radius: length
    .optional()
    .meta({ description: 'of curvature; of a mounted bubble, on the larger of the two caps that have it' }),
  diameter: length.optional(),
  height: length.optional().meta({ description: 'of a mounted bubble, from the mouth to the top' }),
  faces: count(1, 2).default(1).meta({ description: '1: immersed in liquid; 2: a thin film with gas on both sides' }),
  mouth: length.optional().meta({ description: 'inner diameter of the mouth that it is mounted on' }),
  recipe: name.default('water'),
  gas,
  at,
  wall: record('a wall', {
    stiffness: quantity('pressure', { above: 0 }),
    restRadius: length
      .optional()
      .meta({ description: 'where the wall carries nothing; the size at the start when left out' }),
    restHeight: length.optional().meta({ description: 'in place of restRadius, for a mounted bubble' }),
  }).optional(),
  feed,
}).meta({ description: 'exactly one of radius, diameter and height is needed' });

export const cavityDocument = record('a cavity', {
  id: name,
  kind: z.literal('cavity'),
  volume,
  pressure: quantity('pressure', { above: 0 }).meta({ description: 'at the start' }),
  gas,
  at,
  feed,
});

export const reservoirDocument = record('a reservoir', {
  id: name,
  kind: z.literal('reservoir'),
  pressure: waveform('pressure'),
  gas,
  at,
});

export const poolDocument = record('a pool', {
  id: name,
  kind: z.literal('pool'),
  volume: volume.meta({ description: 'of liquid' }),
  saturation: quantity('number', { from: 0 })
    .default(1)
    .meta({ description: 'dissolved-gas pressure over the ambient pressure, at the start' }),
  gas,
  at,
  feed,
});

export const NODE_DOCUMENTS = {
  bubble: bubbleDocument,
  cavity: cavityDocument,
  reservoir: reservoirDocument,
  pool: poolDocument,
} as const;

export type BubbleDocument = z.output<typeof bubbleDocument>;
export type CavityDocument = z.output<typeof cavityDocument>;
export type ReservoirDocument = z.output<typeof reservoirDocument>;
export type PoolDocument = z.output<typeof poolDocument>;
export type NodeKind = keyof typeof NODE_DOCUMENTS;

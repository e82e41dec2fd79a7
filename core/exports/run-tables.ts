/**
 * The four tables of a run as lists of columns: events.csv, bubbles.csv, pairs.csv and series.csv, headers exactly the
 * contract's. They read events and frames (core/run/record.ts) and know nothing of files.
 */
import type { Frame, RunEvent } from '../run/record.ts';
import { BUBBLE_STATES } from '../run/record.ts';
import type { Column } from './csv.ts';

/** The tables' names, as `--tables` takes them; a table's file is `NAME.csv`. */
export const TABLE_NAMES = ['events', 'series', 'bubbles', 'pairs'] as const;
export type TableName = (typeof TABLE_NAMES)[number];

/** A row an event. */
export const EVENT_COLUMNS: readonly Column<RunEvent>[] = [
  { header: 'time_s', cell: (event) => event.time },
  { header: 'event', cell: (event) => event.event },
  { header: 'subject', cell: (event) => event.subject },
  { header: 'partner', cell: (event) => event.partner },
  { header: 'link', cell: (event) => event.link },
  { header: 'value', cell: (event) => event.value },
  { header: 'unit', cell: (event) => event.unit },
  { header: 'detail', cell: (event) => event.detail },
];

/** A row a bubble of a frame, in the scenario's order, vanished ones included. */
export const BUBBLE_COLUMNS: readonly Column<Frame>[] = [
  { header: 'time_s', cell: (frame) => frame.time },
  { header: 'bubble', cell: (frame, row) => frame.bubbleIds[row]! },
  { header: 'radius_m', cell: (frame, row) => frame.radius[row]! },
  { header: 'volume_m3', cell: (frame, row) => frame.volume[row]! },
  { header: 'pressure_Pa', cell: (frame, row) => frame.pressure[row]! },
  { header: 'amount_mol', cell: (frame, row) => frame.amount[row]! },
  { header: 'tension_N_per_m', cell: (frame, row) => frame.tension[row]! },
  { header: 'elasticity_N_per_m', cell: (frame, row) => frame.elasticity[row]! },
  { header: 'coverage', cell: (frame, row) => frame.coverage[row]! },
  { header: 'index', cell: (frame, row) => frame.index[row]! },
  { header: 'state', cell: (frame, row) => BUBBLE_STATES[frame.state[row]!]! },
];

/** A row a living pair or link of a frame. */
export const PAIR_COLUMNS: readonly Column<Frame>[] = [
  { header: 'time_s', cell: (frame) => frame.time },
  { header: 'link', cell: (frame, row) => frame.pairs.link[row]! },
  { header: 'from', cell: (frame, row) => frame.pairs.from[row]! },
  { header: 'to', cell: (frame, row) => frame.pairs.to[row]! },
  { header: 'flow_mol_per_s', cell: (frame, row) => frame.pairs.flow[row]! },
  { header: 'margin', cell: (frame, row) => frame.pairs.margin[row]! },
  { header: 'rate_per_s', cell: (frame, row) => frame.pairs.rate[row]! },
];

/** A row a frame. */
export const SERIES_COLUMNS: readonly Column<Frame>[] = [
  { header: 'time_s', cell: (frame) => frame.series.time },
  { header: 'bubbles', cell: (frame) => frame.series.bubbles },
  { header: 'R10_m', cell: (frame) => frame.series.R10 },
  { header: 'R21_m', cell: (frame) => frame.series.R21 },
  { header: 'R32_m', cell: (frame) => frame.series.R32 },
  { header: 'growing_modes', cell: (frame) => frame.series.growingModes },
  { header: 'fastest_rate_per_s', cell: (frame) => frame.series.fastestRate },
  { header: 'min_margin', cell: (frame) => frame.series.minimumMargin },
  { header: 'gas_balance', cell: (frame) => frame.series.gasBalance },
];

/** How many rows a frame adds to each table that grows by frames. */
export function frameRows(table: 'series' | 'bubbles' | 'pairs', frame: Frame): number {
  switch (table) {
    case 'series':
      return 1;
    case 'bubbles':
      return frame.bubbleIds.length;
    case 'pairs':
      return frame.pairs.count;
  }
}

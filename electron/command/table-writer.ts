/**
 * Listens to a run and puts its events and frames into the tables of the contract as they come, with bounded memory.
 * A table too long to be useful by default is left out, and its note says so.
 */
import { csvHeader, csvRows } from '../../core/exports/csv.ts';
import type { Column } from '../../core/exports/csv.ts';
import type { TableName } from '../../core/exports/run-tables.ts';
import {
  BUBBLE_COLUMNS,
  EVENT_COLUMNS,
  frameRows,
  PAIR_COLUMNS,
  SERIES_COLUMNS,
  TABLE_NAMES,
} from '../../core/exports/run-tables.ts';
import type { Frame, RunObserver } from '../../core/run/record.ts';
import type { FileSet } from '../files/file-set.ts';
import type { WholeFile } from '../files/whole-file.ts';

/** A table that would pass this many rows is not written unless it is asked for by name. */
export const ROW_LIMIT = 5_000_000;

/** Rows turned to text at a time: some hundred kilobytes. */
const ROWS_AT_A_TIME = 2048;

/** What became of a table: the number of its rows, or why it was not written. */
export type TableOutcome =
  { readonly written: true; readonly rows: number } | { readonly written: false; readonly reason: string };

export interface TableWriter extends RunObserver {
  readonly outcomes: () => Readonly<Record<TableName, TableOutcome>>;
}

/** The file a table goes to. */
export function tableFile(table: TableName): string {
  return `${table}.csv`;
}

const FRAME_TABLES: readonly { readonly table: 'series' | 'bubbles' | 'pairs'; columns: readonly Column<Frame>[] }[] = [
  { table: 'series', columns: SERIES_COLUMNS },
  { table: 'bubbles', columns: BUBBLE_COLUMNS },
  { table: 'pairs', columns: PAIR_COLUMNS },
];

interface OpenTable {
  readonly file: WholeFile;
  rows: number;
}

/**
 * @param files where the tables go
 * @param asked the tables asked for by name, which are written however long; null: all within the limit
 * @param expectedFrames how many frames the run is to give: the length of a table is foreseen from its first frame
 * @param rowLimit rows a table may have unless it was asked for
 */
export function openTables(
  files: FileSet,
  asked: readonly TableName[] | null,
  expectedFrames: number,
  rowLimit: number = ROW_LIMIT,
): TableWriter {
  const open = new Map<TableName, OpenTable>();
  const leftOut = new Map<TableName, string>();
  let firstFrame = true;

  for (const table of TABLE_NAMES) {
    if (asked !== null && !asked.includes(table)) {
      leftOut.set(table, 'not asked for by --tables');
      continue;
    }
    const file = files.open(tableFile(table));
    file.write(csvHeader<never>(table === 'events' ? EVENT_COLUMNS : columnsOf(table)));
    open.set(table, { file, rows: 0 });
  }

  function leaveOut(table: TableName, reason: string): void {
    files.drop(tableFile(table));
    open.delete(table);
    leftOut.set(
      table,
      `${reason} (the limit is ${rowLimit}); ask for it with --tables ${table}, or for fewer --frames`,
    );
  }

  function add<Source>(table: TableName, columns: readonly Column<Source>[], source: Source, rows: number): void {
    const target = open.get(table);
    if (target === undefined) return;
    if (asked === null && target.rows + rows > rowLimit) {
      leaveOut(table, `it passed ${target.rows} rows`);
      return;
    }
    for (let from = 0; from < rows; from += ROWS_AT_A_TIME) {
      target.file.write(csvRows(columns, source, from, Math.min(rows, from + ROWS_AT_A_TIME)));
    }
    target.rows += rows;
  }

  function foresee(frame: Frame): void {
    for (const { table } of FRAME_TABLES) {
      const rows = frameRows(table, frame) * expectedFrames;
      if (open.has(table) && rows > rowLimit) leaveOut(table, `it would have had about ${rows} rows`);
    }
  }

  return {
    event(event) {
      add('events', EVENT_COLUMNS, event, 1);
    },
    frame(frame) {
      if (firstFrame && asked === null) foresee(frame);
      firstFrame = false;
      for (const { table, columns } of FRAME_TABLES) add(table, columns, frame, frameRows(table, frame));
    },
    outcomes() {
      const outcome = (table: TableName): TableOutcome => {
        const reason = leftOut.get(table);
        if (reason !== undefined) return { written: false, reason };
        return { written: true, rows: open.get(table)!.rows };
      };
      return {
        events: outcome('events'),
        series: outcome('series'),
        bubbles: outcome('bubbles'),
        pairs: outcome('pairs'),
      };
    },
  };
}

function columnsOf(table: 'series' | 'bubbles' | 'pairs'): readonly Column<Frame>[] {
  return FRAME_TABLES.find((entry) => entry.table === table)!.columns;
}

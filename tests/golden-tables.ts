/**
 * Whole output tables of a run against checked-in ones. Texts must be the same; numbers may differ by what another
 * machine's arithmetic, passed through the step control, may change.
 */
import { csvParseRows } from 'd3-dsv';

/**
 * Relative. A run at tolerance 1e-6 that takes its steps a little otherwise moves its numbers by about that; ten times
 * as much covers the growth of a difference along an unstable run.
 */
export const RELATIVE = 1e-5;

/** Of the largest magnitude in a column: a value that passes through zero has no digits of its own to compare. */
export const OF_COLUMN = 1e-7;

/** Columns that hold rounding error only: they must be below this, whatever the golden file says. */
const BALANCE_COLUMNS = new Set(['gas_balance']);
const BALANCE_LIMIT = 1e-12;

/** Every difference as a line that names the row and the column; empty where the tables agree. */
export function tableDifferences(golden: string, fresh: string): string[] {
  const expected = csvParseRows(golden);
  const actual = csvParseRows(fresh);
  const header = expected[0] ?? [];
  if (actual[0]?.join() !== header.join()) return [`the header is ${actual[0]?.join() ?? 'missing'}`];
  if (actual.length !== expected.length) return [`${actual.length - 1} rows stand for ${expected.length - 1}`];

  const differences: string[] = [];
  header.forEach((name, column) => {
    const magnitude = Math.max(...expected.slice(1).map((row) => Math.abs(numberOf(row[column]!) ?? 0)), 0);
    for (let row = 1; row < expected.length; row += 1) {
      const was = expected[row]![column]!;
      const is = actual[row]![column]!;
      if (BALANCE_COLUMNS.has(name) ? Math.abs(numberOf(is) ?? NaN) < BALANCE_LIMIT : same(was, is, magnitude))
        continue;
      differences.push(`row ${row}, ${name}: ${is} stands for ${was}`);
    }
  });
  return differences;
}

function same(was: string, is: string, magnitude: number): boolean {
  if (was === is) return true;
  const expected = numberOf(was);
  const actual = numberOf(is);
  if (expected === null || actual === null) return false;
  return Math.abs(actual - expected) <= RELATIVE * Math.abs(expected) + OF_COLUMN * magnitude;
}

function numberOf(field: string): number | null {
  return /^-?\d/.test(field) && Number.isFinite(Number(field)) ? Number(field) : null;
}

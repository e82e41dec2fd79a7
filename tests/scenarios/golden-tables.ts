/**
 * Whole output tables of a run against checked-in ones. Texts must be the same; numbers may differ by what another
 * machine's arithmetic, passed through the step control, may change.
 */
import { csvParseRows } from 'd3-dsv';

/**
 * In run tolerances, relative. A run that takes its steps a little otherwise moves its numbers by about its tolerance; ten
 * times as much covers the growth of a difference along an unstable run.
 */
export const RELATIVE = 10;

/** In run tolerances, of the largest magnitude in a column: a value that passes through zero has no digits of its own. */
export const OF_COLUMN = 0.1;

/**
 * Columns of known size: a margin is a sum of terms of order one, so where its value is near zero (two bubbles of pure
 * liquid) it is their rounding, however small all values of its column are.
 */
const SIZES: ReadonlyMap<string, number> = new Map([
  ['margin', 1],
  ['min_margin', 1],
]);

/** Columns that hold rounding error only: they must be below this, whatever the golden file says. */
const BALANCE_COLUMNS = new Set(['gas_balance']);
const BALANCE_LIMIT = 1e-12;

/**
 * Every difference as a line that names the row and the column; empty where the tables agree.
 * @param tolerance of the run
 */
export function tableDifferences(golden: string, fresh: string, tolerance: number): string[] {
  const expected = orderInstants(csvParseRows(golden), tolerance);
  const actual = orderInstants(csvParseRows(fresh), tolerance);
  const header = expected[0] ?? [];
  if (actual[0]?.join() !== header.join()) return [`the header is ${actual[0]?.join() ?? 'missing'}`];
  if (actual.length !== expected.length) return [`${actual.length - 1} rows stand for ${expected.length - 1}`];

  const differences: string[] = [];
  const unit = header.indexOf('unit');
  header.forEach((name, column) => {
    // The values of events are in different units: each is compared with those of its own.
    const kindOf = (row: readonly string[]): string => (name === 'value' && unit >= 0 ? row[unit]! : '');
    const magnitudes = new Map<string, number>([['1', 1]]);
    for (const row of expected.slice(1)) {
      const size = Math.max(Math.abs(numberOf(row[column]!) ?? 0), SIZES.get(name) ?? 0);
      magnitudes.set(kindOf(row), Math.max(size, magnitudes.get(kindOf(row)) ?? 0));
    }
    for (let row = 1; row < expected.length; row += 1) {
      const was = expected[row]![column]!;
      const is = actual[row]![column]!;
      const same = BALANCE_COLUMNS.has(name)
        ? Math.abs(numberOf(is) ?? NaN) < BALANCE_LIMIT
        : sameField(was, is, magnitudes.get(kindOf(expected[row]!)) ?? 0, tolerance);
      if (!same) differences.push(`row ${row}, ${name}: ${is} stands for ${was}`);
    }
  });
  return differences;
}

function sameField(was: string, is: string, magnitude: number, tolerance: number): boolean {
  if (was === is) return true;
  const expected = numberOf(was);
  const actual = numberOf(is);
  if (expected === null || actual === null) return false;
  return Math.abs(actual - expected) <= tolerance * (RELATIVE * Math.abs(expected) + OF_COLUMN * magnitude);
}

function numberOf(field: string): number | null {
  return /^-?\d/.test(field) && Number.isFinite(Number(field)) ? Number(field) : null;
}

/**
 * The rows of an event log with those of one instant in the order of their texts: which of two events that happen at the
 * same instant is found first is rounding. Other tables stay as they are.
 */
function orderInstants(rows: string[][], tolerance: number): string[][] {
  const header = rows[0] ?? [];
  if (header[0] !== 'time_s' || header[1] !== 'event') return rows;
  const ordered: string[][] = [header];
  let instant: string[][] = [];
  const flush = (): void => {
    const words = (row: readonly string[]): string => row.slice(1, 5).join('\n');
    ordered.push(...instant.sort((a, b) => (words(a) < words(b) ? -1 : words(a) > words(b) ? 1 : 0)));
    instant = [];
  };
  for (const row of rows.slice(1)) {
    const first = instant[0];
    if (first && Number(row[0]) - Number(first[0]) > tolerance * Math.abs(Number(first[0]))) flush();
    instant.push(row);
  }
  flush();
  return ordered;
}

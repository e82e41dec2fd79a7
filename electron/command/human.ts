/** Numbers for a person at a terminal: three or four digits and a unit, never for files. */
import type { DimensionName } from '../../core/quantities/dimensions.ts';
import { formatQuantity } from '../../core/quantities/format.ts';

/** A quantity in SI to `digits` significant digits in a unit that reads well; a dash where there is none (NaN). */
export function human(value: number, dimension: DimensionName, digits = 4): string {
  if (Number.isNaN(value)) return '-';
  // The digits are counted in the unit that is shown, not in SI: 500 s are 8.333 min.
  return formatQuantity(value, dimension).replace(/^-?[\d.]+(e[+-]\d+)?/, (number) =>
    String(Number(Number(number).toPrecision(digits))),
  );
}

/** A time, such as `1.5 h`. */
export function humanTime(seconds: number): string {
  return human(seconds, 'time');
}

/** A plain number to four digits; a dash for NaN. */
export function humanNumber(value: number): string {
  return human(value, 'number');
}

/** The time in which a disturbance that changes at `rate` (1/s) grows or decays e-fold, such as `12 ms`. */
export function timeOfRate(rate: number): string {
  return rate === 0 ? 'never' : humanTime(1 / Math.abs(rate));
}

/** Lines of cells as a table: columns as wide as their widest cell, two spaces between, texts left and numbers right. */
export function alignedTable(
  header: readonly string[],
  rows: readonly (readonly string[])[],
  textColumns: number,
): string[] {
  const widths = header.map((title, column) => Math.max(title.length, ...rows.map((row) => row[column]!.length)));
  return [header, ...rows].map((row) =>
    row
      .map((cell, column) => (column < textColumns ? cell.padEnd(widths[column]!) : cell.padStart(widths[column]!)))
      .join('  ')
      .trimEnd(),
  );
}

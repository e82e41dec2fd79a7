/**
 * The CSV of the contract: RFC 4180 with LF line ends. A table is a list of columns that read one cell of a source;
 * rows come out as text, and whoever hosts the core puts the text into a file. Last step of the way through.
 */

/** One column of a table: its header, and its cell in row `row` of a source. A number that is NaN makes an empty field. */
export interface Column<Source> {
  readonly header: string;
  readonly cell: (source: Source, row: number) => string | number;
}

const MUST_BE_QUOTED = /[",\r\n]/;

/**
 * One field. Numbers take the shortest form that reads back as the same number (ECMA-262, Number::toString);
 * NaN is an empty field. Texts are quoted only where RFC 4180 (section 2, rules 5 to 7) asks for it.
 */
export function csvField(value: string | number): string {
  if (typeof value === 'number') return value === value ? String(value) : '';
  return MUST_BE_QUOTED.test(value) ? `"${value.replaceAll('"', '""')}"` : value;
}

/** The header line of a table, with its line end. */
export function csvHeader<Source>(columns: readonly Column<Source>[]): string {
  return `${columns.map((column) => csvField(column.header)).join(',')}\n`;
}

/**
 * Rows `from` (included) to `to` (left out) of a source, each with its line end.
 * A caller with millions of rows asks for some thousands at a time, so that no text grows with the table.
 */
export function csvRows<Source>(columns: readonly Column<Source>[], source: Source, from: number, to: number): string {
  const width = columns.length;
  let text = '';
  for (let row = from; row < to; row += 1) {
    for (let index = 0; index < width; index += 1) {
      if (index > 0) text += ',';
      text += csvField(columns[index]!.cell(source, row));
    }
    text += '\n';
  }
  return text;
}

/** The CSV writer against RFC 4180 and an independent reader. */
import fc from 'fast-check';
import { csvParse, csvParseRows } from 'd3-dsv';
import { describe, expect, it } from 'vitest';
import type { Column } from '../../../core/exports/csv.ts';
import { csvField, csvHeader, csvRows } from '../../../core/exports/csv.ts';

const COLUMNS: readonly Column<readonly (readonly (string | number)[])[]>[] = [
  { header: 'name', cell: (table, row) => table[row]![0]! },
  { header: 'value', cell: (table, row) => table[row]![1]! },
];

describe('a field of a CSV table', () => {
  it('is written bare where nothing in it needs quoting', () => {
    expect(csvField('pair A-B; 3 mm')).toBe('pair A-B; 3 mm');
  });

  it('is quoted where it holds a comma, a quotation mark or a line end (RFC 4180, section 2, rule 6)', () => {
    expect(csvField('a,b')).toBe('"a,b"');
    expect(csvField('a\nb')).toBe('"a\nb"');
    expect(csvField('a\rb')).toBe('"a\rb"');
  });

  it('doubles its quotation marks (RFC 4180, section 2, rule 7)', () => {
    expect(csvField('the "weak" film')).toBe('"the ""weak"" film"');
  });

  it('is empty for a value that is absent', () => {
    expect(csvField(Number.NaN)).toBe('');
  });

  it('gives a number in the shortest form that reads back as the same', () => {
    expect(csvField(0.1)).toBe('0.1');
    expect(csvField(1e-7)).toBe('1e-7');
    expect(csvField(5e-324)).toBe('5e-324');
    expect(csvField(1 / 3)).toBe('0.3333333333333333');
  });

  it('reads back as the same number, to the last bit', () => {
    fc.assert(
      fc.property(fc.double({ noNaN: true }), (value) => {
        // === and not Object.is: the sign of zero has no meaning in a table.
        return Number(csvField(value)) === value;
      }),
    );
  });
});

describe('rows of a CSV table', () => {
  it('read back through an independent reader, whatever the texts hold', () => {
    const row = fc.tuple(fc.string({ unit: 'binary' }), fc.double({ noNaN: true, noDefaultInfinity: true }));
    fc.assert(
      fc.property(fc.array(row), (table) => {
        const text = csvHeader(COLUMNS) + csvRows(COLUMNS, table, 0, table.length);
        const back = csvParse(text).map((record) => [record.name, Number(record.value)]);
        expect(back).toEqual(table.map(([name, value]) => [name, value + 0 === 0 ? 0 : value]));
      }),
    );
  });

  it('end in a line feed on every platform', () => {
    const text =
      csvHeader(COLUMNS) +
      csvRows(
        COLUMNS,
        [
          ['A', 1],
          ['B', 2],
        ],
        0,
        2,
      );
    expect(text).toBe('name,value\nA,1\nB,2\n');
  });

  it('are the same in one piece and in several', () => {
    const table = Array.from({ length: 7 }, (_, index) => [`bubble ${index}`, index / 7]);
    const pieces = csvRows(COLUMNS, table, 0, 3) + csvRows(COLUMNS, table, 3, 7);
    expect(pieces).toBe(csvRows(COLUMNS, table, 0, 7));
    expect(csvParseRows(pieces)).toHaveLength(7);
  });
});

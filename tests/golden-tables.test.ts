/** The comparison of whole tables sees what it must and forgives what it may. */
import { describe, expect, it } from 'vitest';
import { tableDifferences } from './golden-tables.ts';

const GOLDEN = 'time_s,event,value\n1,pair-unstable,0.5\n2,bubble-vanished,\n';

describe('two tables', () => {
  it('agree with themselves', () => {
    expect(tableDifferences(GOLDEN, GOLDEN)).toEqual([]);
  });

  it('agree where a number moved in its sixth digit', () => {
    expect(tableDifferences(GOLDEN, GOLDEN.replace('0.5', '0.500004'))).toEqual([]);
  });

  it('differ where a number moved in its fifth digit', () => {
    expect(tableDifferences(GOLDEN, GOLDEN.replace('0.5', '0.50001'))).toEqual([
      'row 1, value: 0.50001 stands for 0.5',
    ]);
  });

  it('agree where a value near the zero of its column is another rounding error', () => {
    const golden = 'flow\n1\n1e-12\n';
    expect(tableDifferences(golden, 'flow\n1\n-3e-12\n')).toEqual([]);
  });

  it('differ in a word, and where a value is missing', () => {
    expect(tableDifferences(GOLDEN, GOLDEN.replace('pair-un', 'pair-'))).toHaveLength(1);
    expect(tableDifferences(GOLDEN, GOLDEN.replace('0.5', ''))).toHaveLength(1);
  });

  it('differ in length and in their columns', () => {
    expect(tableDifferences(GOLDEN, `${GOLDEN}3,run-ended,\n`)).toEqual(['3 rows stand for 2']);
    expect(tableDifferences(GOLDEN, GOLDEN.replace('value', 'values'))).toHaveLength(1);
  });

  it('agree in a gas balance that is rounding error, and differ where it is not', () => {
    expect(tableDifferences('gas_balance\n1e-16\n', 'gas_balance\n-4e-15\n')).toEqual([]);
    expect(tableDifferences('gas_balance\n1e-16\n', 'gas_balance\n1e-9\n')).toHaveLength(1);
    expect(tableDifferences('gas_balance\n1e-16\n', 'gas_balance\n\n')).toHaveLength(1);
  });
});

/** The comparison of whole tables sees what it must and forgives what it may. */
import { describe, expect, it } from 'vitest';
import { tableDifferences } from './golden-tables.ts';

const GOLDEN = 'time_s,event,value\n1,pair-unstable,0.5\n2,bubble-vanished,\n';

/** As most scenarios have it. */
const TOLERANCE = 1e-6;

const differences = (golden: string, fresh: string): string[] => tableDifferences(golden, fresh, TOLERANCE);

describe('two tables', () => {
  it('agree with themselves', () => {
    expect(differences(GOLDEN, GOLDEN)).toEqual([]);
  });

  it('agree where a number moved by less than ten tolerances', () => {
    expect(differences(GOLDEN, GOLDEN.replace('0.5', '0.500004'))).toEqual([]);
  });

  it('differ where a number moved by more than that', () => {
    expect(differences(GOLDEN, GOLDEN.replace('0.5', '0.50001'))).toEqual(['row 1, value: 0.50001 stands for 0.5']);
  });

  it('are held to the tolerance of their run', () => {
    expect(tableDifferences(GOLDEN, GOLDEN.replace('0.5', '0.500004'), 1e-8)).toHaveLength(1);
  });

  it('agree where a value near the zero of its column is another rounding error', () => {
    expect(differences('flow\n1\n1e-12\n', 'flow\n1\n-3e-12\n')).toEqual([]);
  });

  it('agree where all margins of a column are rounding error', () => {
    expect(differences('margin\n1e-16\n-2e-16\n', 'margin\n-4e-16\n0\n')).toEqual([]);
  });

  it('differ in an event of a small unit, however large the values of other events are', () => {
    const golden = 'time_s,event,value,unit\n1,bubble-vanished,3e-16,mol\n2,run-ended,12,bubbles\n';
    expect(differences(golden, golden.replace('3e-16', '4e-16'))).toHaveLength(1);
  });

  it('differ in a word, and where a value is missing', () => {
    expect(differences(GOLDEN, GOLDEN.replace('pair-un', 'pair-'))).toHaveLength(1);
    expect(differences(GOLDEN, GOLDEN.replace('0.5', ''))).toHaveLength(1);
  });

  it('differ in length and in their columns', () => {
    expect(differences(GOLDEN, `${GOLDEN}3,run-ended,\n`)).toEqual(['3 rows stand for 2']);
    expect(differences(GOLDEN, GOLDEN.replace('value', 'values'))).toHaveLength(1);
  });

  it('agree in a gas balance that is rounding error, and differ where it is not', () => {
    expect(differences('gas_balance\n1e-16\n', 'gas_balance\n-4e-15\n')).toEqual([]);
    expect(differences('gas_balance\n1e-16\n', 'gas_balance\n1e-9\n')).toHaveLength(1);
    expect(differences('gas_balance\n1e-16\n', 'gas_balance\n\n')).toHaveLength(1);
  });

  it('agree where two events of one instant changed places', () => {
    const log = (first: string, second: string): string => `time_s,event,subject\n${first}\n${second}\n`;
    const golden = log('5,pair-stable,A', '5.000000000002,split-ends,B');
    expect(differences(golden, log('5,split-ends,B', '5.000000000001,pair-stable,A'))).toEqual([]);
  });

  it('differ where two events of different instants changed places', () => {
    const log = (first: string, second: string): string => `time_s,event,subject\n${first}\n${second}\n`;
    expect(
      differences(log('5,pair-stable,A', '6,split-ends,B'), log('5,split-ends,B', '6,pair-stable,A')),
    ).toHaveLength(4);
  });
});

/** The tables of a run have exactly the columns of the contract, and each column reads its own quantity. */
import { csvParse } from 'd3-dsv';
import { describe, expect, it } from 'vitest';
import { csvHeader, csvRows } from '../../../core/exports/csv.ts';
import {
  BUBBLE_COLUMNS,
  EVENT_COLUMNS,
  frameRows,
  PAIR_COLUMNS,
  SERIES_COLUMNS,
} from '../../../core/exports/run-tables.ts';
import type { RunEvent } from '../../../core/run/record.ts';
import { sampleFrame } from './sample-frame.ts';

describe('the headers', () => {
  // The expected texts are those of the published contract; scripts rely on them.
  it('of events.csv', () => {
    expect(csvHeader(EVENT_COLUMNS)).toBe('time_s,event,subject,partner,link,value,unit,detail\n');
  });
  it('of bubbles.csv', () => {
    expect(csvHeader(BUBBLE_COLUMNS)).toBe(
      'time_s,bubble,radius_m,volume_m3,pressure_Pa,amount_mol,tension_N_per_m,elasticity_N_per_m,coverage,index,state\n',
    );
  });
  it('of pairs.csv', () => {
    expect(csvHeader(PAIR_COLUMNS)).toBe('time_s,link,from,to,flow_mol_per_s,margin,rate_per_s\n');
  });
  it('of series.csv', () => {
    expect(csvHeader(SERIES_COLUMNS)).toBe(
      'time_s,bubbles,R10_m,R21_m,R32_m,growing_modes,fastest_rate_per_s,min_margin,gas_balance\n',
    );
  });
});

describe('a frame in the tables', () => {
  const frame = sampleFrame(2.5, ['A', 'B, weak']);

  it('gives a row to each bubble, each quantity in its own column', () => {
    const rows = csvParse(csvHeader(BUBBLE_COLUMNS) + csvRows(BUBBLE_COLUMNS, frame, 0, frameRows('bubbles', frame)));
    expect(rows).toHaveLength(2);
    expect({ ...rows[1] }).toEqual({
      time_s: '2.5',
      bubble: 'B, weak',
      radius_m: '2',
      volume_m3: '12',
      pressure_Pa: '22',
      amount_mol: '32',
      tension_N_per_m: '42',
      elasticity_N_per_m: '52',
      coverage: '',
      index: '72',
      state: 'cap-above-mouth',
    });
  });

  it('gives a row to each pair, with an empty margin where a link is no pair', () => {
    const rows = csvParse(csvHeader(PAIR_COLUMNS) + csvRows(PAIR_COLUMNS, frame, 0, frameRows('pairs', frame)));
    expect(rows.map((row) => ({ ...row }))).toEqual([
      { time_s: '2.5', link: 't1', from: 'A', to: 'M', flow_mol_per_s: '0.25', margin: '', rate_per_s: '' },
      { time_s: '2.5', link: 'via:M', from: 'A', to: 'B', flow_mol_per_s: '0.5', margin: '0.75', rate_per_s: '-3' },
    ]);
  });

  it('gives one row to the series', () => {
    const text = csvRows(SERIES_COLUMNS, frame, 0, frameRows('series', frame));
    expect(text).toBe('2.5,2,1.5,1.6,1.7,1,0.125,0.75,1e-15\n');
  });
});

describe('an event in the table', () => {
  it('leaves absent values empty and quotes its detail', () => {
    const event: RunEvent = {
      time: 0.5,
      event: 'limit-exceeded',
      subject: '',
      partner: '',
      link: 't1',
      value: Number.NaN,
      unit: '',
      detail: 'Reynolds number above 2300, the flow is turbulent',
    };
    expect(csvRows(EVENT_COLUMNS, event, 0, 1)).toBe(
      '0.5,limit-exceeded,,,t1,,,"Reynolds number above 2300, the flow is turbulent"\n',
    );
  });
});

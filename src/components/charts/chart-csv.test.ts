import { describe, expect, it } from 'vitest';
import { chartCsv } from './chart-csv';
import type { ChartModel } from './model';

const model: ChartModel = {
  title: 'x',
  unit: 'V',
  digits: 0,
  timeZone: 'Asia/Kolkata',
  from: 0,
  to: 600,
  lines: [
    { name: 'Voltage', at: [0, 60, 120], values: [540, null, 545.123456], tone: 'ink' },
    { name: '=String, B', at: [60], values: [500], tone: 'rust' },
  ],
  band: { name: 'Expected', at: [0], low: [530], high: [560] },
  nights: [],
  marks: [],
};

describe('what is drawn as CSV', () => {
  it('has a row a moment in UTC, empty cells for gaps, and nothing that a spreadsheet would run', () => {
    const lines = chartCsv(model).replace('\uFEFF', '').trim().split('\r\n');
    expect(lines[0]).toBe(`time (UTC),Voltage (V),"'=String, B (V)",Expected from (V),Expected to (V)`);
    expect(lines.slice(1)).toEqual([
      '1970-01-01T00:00:00.000Z,540,,530,560',
      '1970-01-01T00:01:00.000Z,,500,530,560',
      '1970-01-01T00:02:00.000Z,545.1235,,530,560',
    ]);
  });
});

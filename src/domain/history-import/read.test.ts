import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { layoutFault, subjectWords, type KnownSubjects, type Layout } from './layout';
import { guessLayout, looksLikeHeader } from './match';
import { breaksInside, HistoryReader, type Values } from './read';

const KNOWN: KnownSubjects = {
  strings: [
    { name: 'A1', slots: 14 },
    { name: 'A10', slots: 14 },
    { name: 'South 2', slots: 12 },
  ],
  inverters: [
    { name: 'Inverter 1', inputs: [1, 2] },
    { name: 'Inverter 2', inputs: [1] },
  ],
};
const NOW = Date.UTC(2026, 11, 1) / 1000;
const guess = (headers: string[], samples: string[][]) =>
  guessLayout(headers, samples, KNOWN, true, 'Europe/Berlin');
function read(layout: Layout, rows: readonly string[][]) {
  const reader = new HistoryReader(layout, KNOWN, NOW);
  const out: [string, string, Values][] = [];
  rows.forEach((cells, i) =>
    reader.row(cells, i + 2, (subject, _key, at, values) =>
      out.push([subjectWords(subject), new Date(at * 1000).toISOString().slice(0, 16), values]),
    ),
  );
  return { reader, out };
}

describe('columns of a file', () => {
  it('one row a string and time', () => {
    const layout = guess(
      ['Timestamp', 'String', 'Voltage (V)', 'Current [A]', 'Power kW', 'Remark'],
      [['2026-03-28 14:15', 'A1', '410,5', '8,25', '3,39', 'x']],
    );
    expect(layout.columns).toEqual([
      { as: 'at' },
      { as: 'string' },
      { as: 'voltage', unit: 'V', of: null },
      { as: 'current', unit: 'A', of: null },
      { as: 'power', unit: 'kW', of: null },
      { as: 'nothing' },
    ]);
    expect(layout).toMatchObject({ decimalMark: 'comma', timeZone: 'Europe/Berlin' });
    expect(layoutFault(layout)).toBeNull();
  });

  it('one column a string; the longest name that fits is meant', () => {
    const layout = guess(
      ['Time (UTC)', 'A1 Udc [V]', 'A10 voltage', 'Inverter 1 AC power (kW)', 'Inverter 1 input 2 current'],
      [['28.03.2026 14:15', '410.5', '408', '12.5', '8']],
    );
    expect(layout.columns).toEqual([
      { as: 'at' },
      { as: 'voltage', unit: 'V', of: { kind: 'string', string: 'A1' } },
      { as: 'voltage', unit: 'V', of: { kind: 'string', string: 'A10' } },
      { as: 'power', unit: 'kW', of: { kind: 'inverter', inverter: 'Inverter 1' } },
      { as: 'current', unit: 'A', of: { kind: 'input', inverter: 'Inverter 1', input: 2 } },
    ]);
    expect(layout).toMatchObject({ timeZone: 'UTC', dayFirst: true });
  });

  it('date and time of day apart; a column of times without a name; other languages', () => {
    expect(
      guess(['Datum', 'Uhrzeit', 'Strang', 'Spannung'], [['28.03.2026', '14:15', 'A1', '410']]).columns,
    ).toEqual([{ as: 'date' }, { as: 'clock' }, { as: 'string' }, { as: 'voltage', unit: 'V', of: null }]);
    expect(guess(['when it was', 'A1 (W)'], [['2026-03-28 14:15', '410']]).columns[0]).toEqual({ as: 'at' });
    expect(guess(['Time', 'A1 (W)'], [['2026-03-28 14:15', '410']]).columns[0]).toEqual({ as: 'at' });
    expect(looksLikeHeader(['2026-03-28 14:15', '410'])).toBe(false);
    expect(looksLikeHeader(['Time', 'A1'])).toBe(true);
  });

  it('what is missing is said', () => {
    const base = { hasHeader: true, timeZone: 'UTC', dayFirst: null, decimalMark: null };
    expect(layoutFault({ ...base, columns: [{ as: 'string' }] })).toContain('date and time');
    expect(layoutFault({ columns: [{ as: 'at' }] })).toContain('at least one column');
    expect(layoutFault({ columns: [{ as: 'at' }, { as: 'power', unit: 'W', of: null }] })).toContain(
      'Say of what "column 2" is',
    );
    const twice = { as: 'power', unit: 'W', of: null } as const;
    expect(layoutFault({ columns: [{ as: 'at' }, { as: 'string' }, twice, twice] })).toContain('Two columns');
  });
});

describe('rows of a file', () => {
  const long = guess(
    ['Timestamp', 'String', 'Position', 'Voltage (V)', 'Power kW', 'Temp (°F)'],
    [['2026-03-28 14:15', 'A1', '', '410,5', '3,39', '']],
  );
  it('are read in SI units, nothing where a cell says nothing', () => {
    const { out, reader } = read(long, [
      ['2026-03-28 14:15', 'a1', '', '410,5', '3,39', '212'],
      ['2026-03-28 14:15', 'A1', '3', '29,1', 'n/a', ''],
      ['2026-03-28 14:30', 'SOUTH  2', '', '', '--', ''],
    ]);
    expect(out).toEqual([
      ['string A1', '2026-03-28T13:15', [410.5, null, 3390, null, expect.closeTo(100, 6)]],
      ['string A1, position 3', '2026-03-28T13:15', [29.1, null, null, null, null]],
    ]);
    expect(reader).toMatchObject({ rows: 3, readings: 2, leftOut: 0 });
  });

  it('bad cells are named by row and column with what would do, and leave no more out than they must', () => {
    const { out, reader } = read(long, [
      ['2026-03-28 14:15', 'A1', '', '410,5 V', '3,39', ''],
      ['28 March', 'A1', '', '410', '3', ''],
      ['2026-03-28 14:30', 'South2', '', '410', '3', ''],
      ['2026-03-28 14:45', 'B9', '', '410', '3', ''],
      ['2026-03-28 15:00', 'A1', '15', '29', '', ''],
      ['2026-03-29 02:15', 'A1', '', '410', '3', ''],
      ['2027-03-29 12:15', 'A1', '', '410', '3', ''],
      ['2026-03-28 15:15', 'A1', '', '410000', '3', ''],
      ['', 'A1', '', '410', '3', ''],
    ]);
    expect(reader.faults.map((f) => [f.row, f.column, f.leaves, f.message])).toEqual([
      [2, 3, 'cell', '"410,5 V" is no number'],
      [3, 0, 'row', '"28 March" is no date and time'],
      [4, 1, 'row', 'no string here is called "South2"'],
      [5, 1, 'row', 'no string here is called "B9"'],
      [6, 2, 'row', 'A1 has no such position'],
      [7, 0, 'row', expect.stringContaining('never was')],
      [8, 0, 'row', 'lies in the future'],
      [9, 3, 'cell', '410000 V is beyond any voltage of a plant'],
      [10, 0, 'row', 'the time is missing'],
    ]);
    expect(reader.faults[2]?.remedy).toContain('South 2');
    expect(out.map((o) => o[2])).toEqual([
      [null, null, 3390, null, null],
      [null, null, 3000, null, null],
    ]);
    expect(reader.leftOut).toBe(9);
  });

  it('the hour that the clock repeats goes on in time', () => {
    const rows = ['01:45', '02:15', '02:45', '02:15', '02:45', '03:00'].map((t) => [
      `2026-10-25 ${t}`,
      'A1',
      '',
      '400',
      '',
      '',
    ]);
    const { out, reader } = read(long, rows);
    expect(out.map((o) => o[1].slice(11))).toEqual(['23:45', '00:15', '00:45', '01:15', '01:45', '02:00']);
    expect(reader.doubles).toBe(0);
  });

  it('the same instant again is counted, and the first one stays', () => {
    const row = ['2026-03-28 14:15', 'A1', '', '410', '', ''];
    const { out, reader } = read(long, [row, row.with(3, '999')]);
    expect(out).toHaveLength(1);
    expect(reader.doubles).toBe(1);
  });

  it('never throws, whatever the cells are', () => {
    fc.assert(
      fc.property(fc.array(fc.array(fc.string(), { maxLength: 7 }), { maxLength: 20 }), (rows) => {
        const { reader } = read(long, rows);
        expect(reader.rows).toBe(rows.length);
        for (const f of reader.faults) expect(f.message.length * f.remedy.length).toBeGreaterThan(0);
      }),
    );
  });

  it('counts the lines of cells with breaks in them', () => {
    expect(breaksInside(['a', 'b\nc\nd', 'e'])).toBe(2);
  });
});

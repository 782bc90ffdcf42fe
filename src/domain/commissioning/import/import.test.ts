import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { IMPORT_COLUMNS, looksLikeHeader, matchColumns } from './columns';
import { COLUMN_LABELS } from '../../../words/domain-import';
import { nearestName } from './names';
import { decimalMarkOf, readNumber } from './number';
import { planImport, type KnownUnit, type StandingSlot } from './plan';
import { hasFaults, readImport } from './read-import';
import { spans } from './read-strings';
import { SAMPLE_NAMES as NAMES } from './sample-import';
import { readSerial } from './serial';
import { NO_CHOICES, type ImportChoices, type ImportTable, type NewStringDefaults } from './table';

const table = (columns: ImportTable['columns'], ...rows: string[][]): ImportTable => ({
  columns,
  rows,
  lines: rows.map((_, i) => i + 2),
});
const BASIC = ['string', 'position', 'serial'] as const;
const DEFAULTS: NewStringDefaults = {
  plane: 'South roof',
  input: 'each_next',
  zone: 'Whole roof',
  unitType: 'Watcher 15',
  moduleType: 'Slate 420',
  logger: 'LG-0001',
  transmitters: [],
};
const codes = (t: ImportTable, some: Partial<ImportChoices> = {}) =>
  readImport(t, { ...NO_CHOICES, ...some }, NAMES).faults.map((f) => [f.row, f.column, f.code]);

describe('serials', () => {
  it('forgives blanks, case, what cannot be seen, and the apostrophe of spreadsheets', () => {
    for (const text of ['UN-4711', ' un-4711 ', '\u200bUN-4711\r\n', "'UN-4711", '\ufeffun-4711'])
      expect(readSerial(text)).toEqual({ kind: 'serial', serial: 'UN-4711' });
  });
  it('takes words for none as empty', () => {
    for (const text of ['', '  ', '-', 'n/a', '–', 'none', '?'])
      expect(readSerial(text)).toEqual({ kind: 'empty' });
  });
  it('tells foreign forms apart and proposes what was meant', () => {
    const fault = (text: string) => {
      const read = readSerial(text);
      return read.kind === 'fault' ? [read.message, read.suggestion] : read;
    };
    expect(fault('1.23457E+11')).toEqual([
      '"1.23457E+11" is a serial that the spreadsheet has turned into a number',
      null,
    ]);
    expect(fault('UN:47:11')).toEqual(['it has : in it', 'UN-47-11']);
    expect(fault('UN 4711')).toEqual(['it has blanks in it', 'UN4711']);
    expect(fault('473829.0')).toEqual(['"473829.0" has decimals', '473829']);
    expect(fault('https://units.example/s?sn=UN-4711')).toEqual(['it is a web address', 'UN-4711']);
    expect(fault('AB')).toEqual(['"AB" is too short', null]);
    expect(fault('A'.repeat(33))).toEqual(['it has 33 characters', null]);
    expect(fault('ÜN-4711')).toEqual(['it has Ü in it', null]);
  });
  it('reads every serial as itself, and proposes only serials', () => {
    fc.assert(
      fc.property(fc.stringMatching(/^[A-Z0-9][A-Z0-9-]{3,31}$/), (serial) => {
        const read = readSerial(` ${serial.toLowerCase()}\n`);
        // digits, an E and digits is what a spreadsheet makes of a long number: also a valid serial
        expect(read).toEqual({ kind: 'serial', serial });
      }),
    );
    fc.assert(
      fc.property(fc.string(), (text) => {
        const read = readSerial(text);
        if (read.kind === 'fault' && read.suggestion !== null)
          expect(readSerial(read.suggestion)).toEqual({ kind: 'serial', serial: read.suggestion });
      }),
    );
  });
});

describe('numbers', () => {
  it('reads commas before decimals where they can stand nowhere else, and asks where not', () => {
    const value = (text: string) => {
      const read = readNumber(text);
      return read.kind === 'number' ? read.value : read.kind;
    };
    expect(value('1,5')).toBe(1.5);
    expect(value('12,25')).toBe(12.25);
    expect(value('0,125')).toBe(0.125);
    expect(value('-3.5')).toBe(-3.5);
    expect(value('−3,5')).toBe(-3.5);
    expect(value('1.234,5')).toBe(1234.5);
    expect(value('1,234.5')).toBe(1234.5);
    expect(value('1 234,5')).toBe(1234.5);
    expect(value('1,234')).toBe('ambiguous');
    expect(value('1.234')).toBe(1.234);
    expect(value('1,23,4')).toBe('fault');
    expect(value('12a')).toBe('fault');
    expect(value('')).toBe('empty');
    expect(readNumber('1,234', 'comma')).toEqual({ kind: 'number', value: 1.234 });
    expect(readNumber('1,234', 'point')).toEqual({ kind: 'number', value: 1234 });
    expect(readNumber('1,5', 'point').kind).toBe('fault');
  });
  it('learns the mark from the rest of the column, and from nothing that contradicts itself', () => {
    expect(decimalMarkOf(['1,234', '0,5', '12'])).toBe('comma');
    expect(decimalMarkOf(['1,234', '0.5', '12'])).toBe('point');
    expect(decimalMarkOf(['1,234', '5'])).toBeNull();
    expect(decimalMarkOf(['0,5', '0.5'])).toBeNull();
  });
  it('gives every number back, whichever way it was written', () => {
    const figures = fc.integer({ min: -9_999_999, max: 9_999_999 }).map((n) => n / 100);
    fc.assert(
      fc.property(figures, fc.constantFrom('en-GB', 'de-DE'), (n, tongue) => {
        const text = new Intl.NumberFormat(tongue, { minimumFractionDigits: 2 }).format(n);
        expect(readNumber(text)).toEqual({ kind: 'number', value: n + 0 });
      }),
    );
  });
});

describe('columns', () => {
  it('knows its own labels in any order, case and with blanks around', () => {
    fc.assert(
      fc.property(fc.shuffledSubarray([...IMPORT_COLUMNS], { minLength: 1 }), fc.boolean(), (some, loud) => {
        const headers = some.map((c) => (loud ? ` ${COLUMN_LABELS[c].toUpperCase()} ` : COLUMN_LABELS[c]));
        const match = matchColumns(headers, []);
        for (const column of IMPORT_COLUMNS)
          expect(match[column]).toBe(some.includes(column) ? some.indexOf(column) : null);
      }),
    );
  });
  it('knows other words, other languages, and what a column holds', () => {
    expect(matchColumns(['Strang', 'Pos.', 'Seriennummer', 'Wechselrichter', 'MPPT'], [])).toMatchObject({
      string: 0,
      position: 1,
      serial: 2,
      inverter: 3,
      input: 4,
    });
    expect(matchColumns(['String no.', 'Module number', 'S/N'], [])).toMatchObject({
      string: 0,
      position: 1,
      serial: 2,
    });
    const rows = [
      ['A1', '1', 'UN-0001'],
      ['A1', '2', 'UN-0002'],
    ];
    expect(matchColumns(['String', 'Pos', 'Optional'], rows).serial).toBe(2);
  });
  it('never gives one column of the file two meanings', () => {
    fc.assert(
      fc.property(fc.array(fc.string({ maxLength: 20 }), { maxLength: 12 }), (headers) => {
        const used = Object.values(matchColumns(headers, [])).filter((i) => i !== null);
        expect(new Set(used).size).toBe(used.length);
      }),
    );
  });
  it('tells a header from a first row of data', () => {
    expect(looksLikeHeader(['String', 'Pos', 'Serial'])).toBe(true);
    expect(looksLikeHeader(['A1', '1', 'UN-0001'])).toBe(false);
  });
});

describe('names', () => {
  it('proposes the one that is near, and none where two are', () => {
    expect(nearestName('Sout roof', NAMES.planes)).toBe('South roof');
    expect(nearestName('southroof', NAMES.planes)).toBe('South roof');
    expect(nearestName('North', NAMES.planes)).toBeNull();
    expect(nearestName('Slate 425', NAMES.moduleTypes)).toBeNull();
  });
});

describe('a table', () => {
  it('is read without a word where it is right', () => {
    const read = readImport(
      table([...BASIC, 'roofX'], ['a1', '1', 'un-0001', '1,5'], ['A1', '2.0', 'UN-0002', '2,25']),
      NO_CHOICES,
      NAMES,
    );
    expect(read.faults).toEqual([]);
    expect(read.rows.map((r) => [r.string, r.position, r.serial, r.roofX])).toEqual([
      ['A1', 1, 'UN-0001', 1.5],
      ['A1', 2, 'UN-0002', 2.25],
    ]);
  });
  it('marks each bad cell with its row and column', () => {
    expect(
      codes(
        table(
          [...BASIC, 'plane', 'roofX'],
          ['A1', '1', 'UN-0001', 'South roof', '1.5'],
          ['', '2', 'UN-0002', '', ''],
          ['A1', 'x', 'UN-0003', '', ''],
          ['A1', '64', 'UN-0004', '', ''],
          ['A1', '1', 'UN-0005', '', ''],
          ['A1', '3', 'UN-0001', '', ''],
          ['A2', '1', 'UN 00', 'Sout roof', '1,234'],
          ['A2', '2', 'UN-0007', 'East roof', ''],
        ),
      ),
    ).toEqual([
      [3, 'string', 'string_empty'],
      [4, 'position', 'position_number'],
      [5, 'position', 'position_range'],
      [6, 'position', 'position_double'],
      [7, 'serial', 'serial_double'],
      [8, 'serial', 'serial_format'],
      [8, 'plane', 'name_unknown'],
    ]);
  });
  it('asks for the decimal mark only where the column does not say', () => {
    const rows = (...x: string[]) =>
      table([...BASIC, 'roofX'], ...x.map((v, i) => ['A1', `${i + 1}`, `UN-000${i}`, v]));
    expect(codes(rows('1,234', '2'))).toEqual([[2, 'roofX', 'number_ambiguous']]);
    expect(codes(rows('1,234', '2,5'))).toEqual([]);
    expect(codes(rows('1,234', '2'), { decimalMark: 'comma' })).toEqual([]);
  });
  it('finds positions that nobody has', () => {
    expect(codes(table(BASIC, ['A1', '6', 'UN-0001']))).toEqual([[2, 'position', 'position_missing']]);
    expect(codes(table(BASIC, ['A1', '4', 'UN-0001'], ['A1', '5', 'UN-0002']))).toEqual([]);
    expect(spans([3, 5, 6, 7, 9])).toBe('3, 5–7, 9');
  });
  it('makes strings only when told with what, and gives each its own input', () => {
    const rows = table(BASIC, ['B1', '1', 'UN-0001'], ['B1', '2', 'UN-0002']);
    expect(codes(rows)).toEqual([[2, 'string', 'string_unknown']]);
    const read = readImport(rows, { ...NO_CHOICES, newStrings: DEFAULTS }, NAMES);
    expect(read.faults).toEqual([]);
    expect(read.newStrings).toEqual([
      expect.objectContaining({ name: 'B1', slots: 2, inverter: 'Inverter 1', input: 3, kind: 'monitored' }),
    ]);
    const two = table(BASIC, ['B1', '1', 'UN-0001'], ['B2', '1', 'UN-0002']);
    expect(codes(two, { newStrings: DEFAULTS })).toEqual([[3, 'input', 'string_incomplete']]);
  });
  it('asks a shutdown-only string for its transmitter and a reporting one for its logger', () => {
    const rows = table([...BASIC, 'unitType', 'input'], ['B1', '1', 'UN-0001', 'Plain 20', '3']);
    expect(codes(rows, { newStrings: DEFAULTS })).toEqual([[2, 'transmitters', 'string_incomplete']]);
    expect(codes(rows, { newStrings: { ...DEFAULTS, transmitters: ['Sender 1'] } })).toEqual([]);
    const watched = table(BASIC, ['B1', '1', 'UN-0001']);
    expect(codes(watched, { newStrings: { ...DEFAULTS, logger: null } })).toEqual([
      [2, 'logger', 'string_incomplete'],
    ]);
  });
  it('takes what the person says about names, and about blank string cells', () => {
    const rows = table([...BASIC, 'plane'], ['A1', '1', 'UN-0001', 'Sud'], ['', '2', 'UN-0002', '']);
    expect(codes(rows)).toEqual([
      [2, 'plane', 'name_unknown'],
      [3, 'string', 'string_empty'],
    ]);
    expect(codes(rows, { fillDown: true, meanings: { plane: { sud: 'South roof' } } })).toEqual([]);
  });
  it('says once that a column is the wrong one', () => {
    const rows = Array.from({ length: 40 }, (_, i) => ['A1', `UN-${1000 + i}`, `${i + 1}`]);
    const faults = codes(table(BASIC, ...rows));
    expect(faults.filter((f) => f[2] === 'column_doubtful').map((f) => f[1])).toEqual(['position', 'serial']);
    expect(faults).toHaveLength(2);
  });
  it('remarks on a serial that is shorter than nearly all others, and lets it be', () => {
    const rows = Array.from({ length: 40 }, (_, i) => [
      'A1',
      `${i + 1}`,
      i === 7 ? 'UN-10' : `UN-${1000 + i}`,
    ]);
    const { faults } = readImport(table(BASIC, ...rows), NO_CHOICES, NAMES);
    expect(faults.map((f) => [f.row, f.code, f.weight])).toEqual([[9, 'serial_unlike', 'note']]);
    expect(hasFaults(faults)).toBe(false);
    expect(codes(table(BASIC, ...rows.slice(0, 10)))).toEqual([]);
  });
  it('finds what a string is on in the as-built and not in the file', () => {
    expect(codes(table([...BASIC, 'plane', 'input'], ['A1', '1', 'UN-0001', 'East roof', '2']))).toEqual([
      [2, 'plane', 'string_differs'],
      [2, 'input', 'string_differs'],
    ]);
  });
  it('never throws, whatever stands in the cells, and every fault names a row and a column of the file', () => {
    const cell = fc.oneof(fc.string({ maxLength: 40 }), fc.constantFrom('A1', '1', '2', 'UN-0001', '1,234'));
    fc.assert(
      fc.property(
        fc.array(fc.array(cell, { minLength: 5, maxLength: 5 }), { maxLength: 12 }),
        fc.boolean(),
        (rows, make) => {
          const t = table([...BASIC, 'plane', 'roofX'], ...rows);
          const read = readImport(t, { ...NO_CHOICES, newStrings: make ? DEFAULTS : null }, NAMES);
          for (const f of read.faults) {
            expect(t.lines).toContain(f.row);
            expect(IMPORT_COLUMNS).toContain(f.column);
            expect(f.message).not.toBe('');
            expect(f.remedy).not.toBe('');
          }
          if (!hasFaults(read.faults)) expect(read.rows).toHaveLength(rows.length);
        },
      ),
    );
  });
});

describe('what would change', () => {
  const slots: StandingSlot[] = ['A1', 'A2'].flatMap((string) =>
    [1, 2, 3].map((position) => ({
      string,
      position,
      serial: string === 'A1' ? `UN-000${position}` : null,
      moduleType: 'Slate 420',
      roofX: 0.1,
      roofY: null,
      roofPlace: '',
    })),
  );
  const units: KnownUnit[] = [1, 2, 3].map((position) => ({
    serial: `UN-000${position}`,
    unitType: 'Watcher 15',
    at: { site: 'Here', thisSite: true, string: 'A1', position },
  }));
  const plan = (rows: string[][], more: KnownUnit[] = []) => {
    const read = readImport(table([...BASIC, 'roofX', 'moduleType'], ...rows), NO_CHOICES, NAMES);
    expect(read.faults).toEqual([]);
    return planImport(read.rows, read.newStrings, NAMES.strings, slots, [...units, ...more]);
  };
  it('is nothing where the file says what is there', () => {
    const rows = [1, 2, 3].map((n) => ['A1', `${n}`, `UN-000${n}`, '0.1', 'Slate 420']);
    expect(plan(rows)).toEqual({ changes: [], faults: [], unchanged: 3 });
  });
  it('leaves alone what the file says nothing about', () => {
    expect(plan([['A1', '1', '', '', '']])).toEqual({ changes: [], faults: [], unchanged: 1 });
  });
  it('tells placing, replacing, moving and swapping apart', () => {
    expect(plan([['A2', '1', 'UN-0009', '', '']]).changes).toMatchObject([{ kind: 'placed' }]);
    expect(plan([['A1', '1', 'UN-0009', '', '']]).changes).toMatchObject([
      { kind: 'replaced', instead: 'UN-0001' },
    ]);
    const swap = plan([
      ['A1', '1', 'UN-0002', '', ''],
      ['A1', '2', 'UN-0001', '', ''],
    ]);
    expect(swap.changes).toMatchObject([
      { kind: 'moved', from: { string: 'A1', position: 2 }, instead: 'UN-0001' },
      { kind: 'moved', from: { string: 'A1', position: 1 }, instead: 'UN-0002' },
    ]);
    expect(plan([['A2', '1', '', '2', 'Slate 430']]).changes.map((c) => c.kind)).toEqual([
      'module_type',
      'roof_place',
    ]);
  });
  it('refuses a unit that sits on another site, saying where', () => {
    const away: KnownUnit = {
      serial: 'UN-0100',
      unitType: 'Watcher 15',
      at: { site: 'Netloft Terrace', thisSite: false, string: 'C2', position: 7 },
    };
    const { faults, changes } = plan([['A2', '1', 'UN-0100', '', '']], [away]);
    expect(changes).toEqual([]);
    expect(faults.map((f) => f.message)).toEqual(['UN-0100 sits on Netloft Terrace, C2, position 7']);
  });
});

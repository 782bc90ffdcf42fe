import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { EQUIPMENT_FAMILIES } from '../domain/equipment/families';
import { headerOf } from '../domain/equipment/fields';
import { FIELDS } from '../domain/equipment/plausibility';
import { starterEquipment } from '../domain/equipment/starter';
import { readEntry, typedEntry } from './equipment-entry';
import { readHeader, readRow, writtenValue } from './equipment-file';

const STARTER = starterEquipment();
const names = new Map(STARTER.connectors.map((c) => [String(c.name), String(c.name)]));
const byName = new Map([...names.keys()].map((n) => [n.toLowerCase(), n]));
const around = { before: undefined, connectorByName: byName };

describe('a form of a type', () => {
  it.each(EQUIPMENT_FAMILIES)('%s: what is kept and typed again is the same', (family) => {
    for (const entry of STARTER[family]) {
      const read = readEntry(family, typedEntry(family, entry));
      expect(read.faults).toEqual({});
      expect(read.entry).toEqual(Object.fromEntries(FIELDS[family].map((f) => [f.key, entry[f.key]])));
    }
  });
  it('takes decimal commas, and asks where a comma may part thousands', () => {
    const typed = typedEntry('inverters', STARTER.inverters[1] ?? {});
    expect(readEntry('inverters', { ...typed, currentMax: '32,5' }).entry.currentMax).toBe(32.5);
    expect(readEntry('inverters', { ...typed, voltageMax: '1,100' }).faults.voltageMax).toMatch(
      /1100 or 1\.1/,
    );
    // 49,300 V can only be 49.3: a module has at most 200 V
    const module = typedEntry('modules', STARTER.modules[0] ?? {});
    expect(readEntry('modules', { ...module, vocRef: '49,300' }).entry.vocRef).toBe(49.3);
  });
  it('names the field, what was wrong and what to do', () => {
    const { faults } = readEntry('modules', { name: ' ', vocRef: 'about 40', iscRef: '400' });
    expect(faults.name).toMatch(/^Name: /);
    expect(faults.vocRef).toMatch(/"about 40" is no number.*1 to 200 V/);
    expect(faults.iscRef).toMatch(/outside what is possible.*0\.1 to 40 A/);
    expect(Object.keys(faults)).toContain('gammaPmp');
  });
  it('an insulation test left empty means that the maker allows none', () => {
    const typed = typedEntry('units', STARTER.units[0] ?? {});
    expect(readEntry('units', { ...typed, insulationTestMax: '' }).entry.insulationTestMax).toBeNull();
    expect(readEntry('units', { ...typed, insulationTestMax: '1000 V' }).entry.insulationTestMax).toBe(1000);
  });
  it('reads any text to a value or a sentence, never a crash', () => {
    fc.assert(
      fc.property(fc.constantFrom(...EQUIPMENT_FAMILIES), fc.string(), (family, text) => {
        const typed = Object.fromEntries(FIELDS[family].map((f) => [f.key, text]));
        const { entry, faults } = readEntry(family, typed);
        for (const f of FIELDS[family]) expect(f.key in entry || f.key in faults).toBe(true);
      }),
    );
  });
});

describe('a file of types', () => {
  it.each(EQUIPMENT_FAMILIES)('%s: a download reads back as it is', (family) => {
    const header = readHeader(family, [...FIELDS[family].map(headerOf), 'Archived', 'Strings', 'Sites']);
    expect(header.faults).toEqual([]);
    expect(header.ignored).toEqual([]);
    for (const entry of STARTER[family]) {
      const cells = FIELDS[family].map((f) => writtenValue(f, entry[f.key], names));
      expect(readRow(family, header, cells, around)).toEqual({
        entry: Object.fromEntries(FIELDS[family].map((f) => [f.key, entry[f.key]])),
        faults: [],
      });
    }
  });
  it('knows columns by short name too, in any order, and leaves others aside', () => {
    const header = readHeader('connectors', [
      'Colour',
      'family',
      'MAKER',
      'name',
      'voltage_max',
      'currentMax (A)',
    ]);
    expect(header.faults).toEqual([]);
    expect(header.ignored).toEqual(['Colour']);
    const row = readRow('connectors', header, ['blue', 'K2', 'Bittern', 'K two', '1500', '30'], around);
    expect(row.faults).toEqual([]);
    expect(row.entry).toEqual({
      name: 'K two',
      maker: 'Bittern',
      family: 'K2',
      voltageMax: 1500,
      currentMax: 30,
      temperatureMax: 85,
      tool: '',
    });
  });
  it('refuses a column in another unit, a doubled column and a missing name', () => {
    const faults = readHeader('modules', ['Coefficient of voc (V/K)', 'vocRef', 'voc_ref']).faults;
    expect(faults.map((f) => f.why)).toEqual([
      'The column is in V/K.',
      'Two columns are the same field.',
      'No column is called "Name".',
    ]);
    expect(faults[0]?.remedy).toMatch(/%\/K/);
  });
  it('says why and what to do, cell by cell', () => {
    const header = readHeader('modules', ['name', 'vocRef', 'iscRef', 'connector']);
    const { faults } = readRow('modules', header, ['X', '12 volts', '', 'Nobody 1'], around);
    const of = (column: string) => faults.find((f) => f.column.startsWith(column));
    expect(of('Open-circuit')).toMatchObject({ typed: '12 volts', why: '"12 volts" is no number.' });
    expect(of('Short-circuit')?.why).toBe('The cell is empty.');
    expect(of('Connector')?.why).toBe('No connector type is called "Nobody 1".');
    expect(of('Voltage at maximum power')?.why).toBe('The file has no such column.');
    for (const f of faults) expect(f.remedy, f.column).not.toBe('');
  });
});

import { describe, expect, it } from 'vitest';
import { SAMPLE_NAMES as NAMES } from '../../domain/commissioning/import/sample-import';
import { NO_CHOICES, type ImportChoices } from '../../domain/commissioning/import/table';
import { ApiError } from '../../lib/api';
import type { ImportOutcome } from '../../schemas/api/import';
import { Desk, type CheckOrder, type FileFacts } from './desk';
import { faultsOf } from './use-import';
import { changeWords, finding, summary } from '../../words/import-sentences';

const TEXT = [
  'String;Pos;Serial;Plane;Colour',
  'A1;1;UN-0001;South roof;red',
  '',
  'A1;2;UN:0002;Sud;red',
  'B9;1;UN-0003;;',
].join('\r\n');
const order = (
  facts: FileFacts,
  some: Partial<CheckOrder> = {},
  choices: Partial<ImportChoices> = {},
): CheckOrder => ({
  match: facts.match,
  hasHeader: facts.hasHeader,
  choices: { ...NO_CHOICES, ...choices },
  edits: {},
  ...some,
});

describe('the desk', () => {
  it('says what the file is, with its columns guessed', () => {
    const facts = new Desk().take(new TextEncoder().encode(TEXT));
    expect(facts).toMatchObject({
      encoding: 'utf-8',
      separator: ';',
      rows: 3,
      emptyLines: 1,
      hasHeader: true,
      headers: ['String', 'Pos', 'Serial', 'Plane', 'Colour'],
      faults: [],
    });
    expect(facts.match).toMatchObject({ string: 0, position: 1, serial: 2, plane: 3, zone: null });
  });
  it('marks cells by the line of the file, with what stands there and which names are foreign', () => {
    const desk = new Desk();
    const checked = desk.check(order(desk.take(TEXT)), NAMES);
    expect(checked.faults.map((f) => [f.row, f.column, f.code])).toEqual([
      [4, 'serial', 'serial_format'],
      [4, 'plane', 'name_unknown'],
      [5, 'string', 'string_unknown'],
    ]);
    expect(checked.texts).toMatchObject({ '4:serial': 'UN:0002', '4:plane': 'Sud', '5:string': 'B9' });
    expect(checked.unknownNames).toEqual([{ column: 'plane', text: 'Sud', rows: 1, suggestion: null }]);
    expect(checked.newStrings).toEqual(['B9']);
  });
  it('takes what the person writes in a cell, and sends that', () => {
    const desk = new Desk();
    const facts = desk.take(TEXT);
    const edits = { '4:serial': 'UN-0002', '5:string': 'A2' };
    const checked = desk.check(
      order(facts, { edits }, { meanings: { plane: { sud: 'South roof' } } }),
      NAMES,
    );
    expect(checked.faults).toEqual([]);
    expect(checked.table).toEqual({
      columns: ['string', 'position', 'serial', 'plane'],
      lines: [2, 4, 5],
      rows: [
        ['A1', '1', 'UN-0001', 'South roof'],
        ['A1', '2', 'UN-0002', 'Sud'],
        ['A2', '1', 'UN-0003', ''],
      ],
    });
  });
  it('asks for the columns that are needed, and for rows', () => {
    const desk = new Desk();
    const facts = desk.take('colour;size\nred;1\n');
    expect(() => desk.check(order(facts), NAMES)).toThrow(
      'Choose the column for string and position and serial.',
    );
    expect(() => new Desk().take('\n\n')).toThrow('nothing in it');
    expect(() => new Desk().take('String;Pos;Serial\n')).toThrow('no row below');
    expect(() => new Desk().take(new Uint8Array([0x50, 0x4b, 3, 4]))).toThrow('.xlsx');
  });
  it('reads the same text with another separator or without a header', () => {
    const desk = new Desk();
    desk.take('A1;1;UN-0001\nA1;2;UN-0002\n');
    expect(desk.split(';', false)).toMatchObject({
      hasHeader: false,
      rows: 2,
      headers: ['column 1', 'column 2', 'column 3'],
    });
    expect(desk.split(',', false)).toMatchObject({ separator: ',', headers: ['column 1'] });
  });
});

const outcome = (some: Partial<ImportOutcome> = {}): ImportOutcome => ({
  written: false,
  rows: 12,
  unchanged: 2,
  counts: { placed: 9, replaced: 1 },
  changes: [],
  faultCount: 0,
  faults: [],
  fingerprint: 'f',
  ...some,
});

describe('the words', () => {
  const none = { rows: null, missing: [], faults: null, outcome: null };
  it('head the page with what is found', () => {
    expect(finding(none).heading).toBe('Strings and serials from a file');
    expect(finding({ ...none, rows: 12, missing: ['position', 'serial'] }).heading).toBe(
      'Which column is the position, which the serial?',
    );
    expect(finding({ ...none, rows: 12, faults: [] }).heading).toBe('12 rows read without a fault');
    expect(finding({ ...none, rows: 12, outcome: outcome() })).toEqual({
      heading: '12 rows would make 10 changes',
      sentence:
        '9 units placed, 1 unit replaced, 2 rows as before. Look at them below, say why, then import.',
    });
    expect(finding({ ...none, rows: 12, outcome: outcome({ counts: {} }) }).heading).toBe(
      'Nothing to change',
    );
    expect(finding({ ...none, rows: 12, outcome: outcome({ written: true }) }).heading).toBe(
      '12 rows are in the as-built',
    );
    expect(finding({ ...none, rows: 12, outcome: outcome({ faultCount: 700 }) }).heading).toBe(
      '700 cells of 12 rows need a look',
    );
    expect(summary(outcome({ counts: { string_made: 1 }, unchanged: 0 }))).toBe('1 string made');
  });
  it('say a change in a sentence', () => {
    const seat = { line: 2, string: 'A1', position: 3, serial: 'UN-2' };
    expect(changeWords({ kind: 'replaced', ...seat, instead: 'UN-1' })).toBe('UN-2 comes in for UN-1');
    expect(
      changeWords({ kind: 'moved', ...seat, from: { string: 'B1', position: 9 }, instead: 'UN-1' }),
    ).toBe('UN-2 moves here from B1, position 9, in for UN-1');
  });
  it('put what the server refuses back to its row and column', () => {
    const error = new ApiError(422, 'Wrong', 'Nothing was imported', [
      { field: 'rows.17.serial', message: 'UN-1 sits on another site. Take it out there first.' },
      { field: 'reason', message: 'say why' },
      { field: 'rows.9.nothing', message: 'no column of ours' },
    ]);
    expect(faultsOf(error).map((f) => [f.row, f.column, f.message])).toEqual([
      [17, 'serial', 'UN-1 sits on another site. Take it out there first'],
    ]);
  });
});

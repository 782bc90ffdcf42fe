/** The cells of an import one by one: numbers, serials, names. What belongs to whole strings is in read-strings. */
import { importCellSaid } from '../../../words/domain-import';
import type { ImportColumn } from './columns';
import { NameBook, nearestName } from './names';
import { decimalMarkOf, readNumber, type DecimalMark } from './number';
import { readSerial } from './serial';
import {
  bareName,
  inputName,
  NAME_COLUMNS,
  type CellFault,
  type FaultCode,
  type ImportChoices,
  type ImportTable,
  type KnownNames,
  type NameColumn,
} from './table';

/** What one row says; undefined: its cell is faulty, null: it says nothing. */
export interface RawRow {
  line: number;
  string: string | undefined;
  position: number | undefined;
  serial: string | null | undefined;
  input: { inverter: string; number: number } | null | undefined;
  transmitters: readonly string[] | null | undefined;
  unitType: string | null | undefined;
  moduleType: string | null | undefined;
  plane: string | null | undefined;
  zone: string | null | undefined;
  logger: string | null | undefined;
  roofX: number | null | undefined;
  roofY: number | null | undefined;
  roofPlace: string | null | undefined;
}

export const POSITION_MAX = 63;
const ROOF_MAX_M = 2000;
const PLACE_MAX = 200;

/** Collects faults of cells. */
export class Faults {
  readonly list: CellFault[] = [];
  add(
    row: number,
    column: ImportColumn,
    code: FaultCode,
    message: string,
    remedy: string,
    more: { suggestion?: string | null; weight?: CellFault['weight'] } = {},
  ): void {
    const { suggestion = null, weight = 'fault' } = more;
    this.list.push({ row, column, code, message, remedy, suggestion, weight });
  }
}

function booksOf(names: KnownNames, choices: ImportChoices): Record<NameColumn, NameBook> {
  const of: Record<NameColumn, readonly string[]> = {
    unitType: names.unitTypes.map((t) => t.name),
    moduleType: names.moduleTypes,
    plane: names.planes,
    inverter: [...new Set(names.inputs.map((i) => i.inverter))],
    zone: names.zones,
    logger: names.loggers,
    transmitters: names.transmitters,
  };
  return Object.fromEntries(NAME_COLUMNS.map((c) => [c, new NameBook(of[c], choices.meanings[c])])) as Record<
    NameColumn,
    NameBook
  >;
}

/** Reads a position: a whole number from 1 to 63, however its decimals are written. */
function readPosition(text: string, line: number, faults: Faults): number | undefined {
  const add = (code: FaultCode, message: string, remedy: string, suggestion: string | null = null) => {
    faults.add(line, 'position', code, message, remedy, { suggestion });
    return undefined;
  };
  const read = readNumber(text.replace(/^\s*(?:pos(?:ition)?|no|nr|#)\.?\s*(?=\d)/i, ''));
  const range = importCellSaid.positionRange(POSITION_MAX);
  if (read.kind === 'empty') return add('position_empty', importCellSaid.positionEmpty, range);
  if (read.kind === 'fault') return add('position_number', read.message, range);
  const value = read.kind === 'ambiguous' ? read.asThousands : read.value;
  if (!Number.isInteger(value))
    return add('position_number', importCellSaid.positionNotWhole(text.trim()), range);
  if (value < 1 || value > POSITION_MAX)
    return add(
      'position_range',
      importCellSaid.positionImpossible(value),
      importCellSaid.positionImpossibleRemedy(POSITION_MAX),
    );
  return value;
}

function readRoof(
  text: string,
  column: 'roofX' | 'roofY',
  line: number,
  mark: DecimalMark | null,
  faults: Faults,
): number | null | undefined {
  const read = readNumber(text.replace(/\s*m$/i, ''), mark);
  if (read.kind === 'empty') return null;
  if (read.kind === 'fault') {
    faults.add(line, column, 'number_fault', read.message, importCellSaid.metresRemedy);
    return undefined;
  }
  if (read.kind === 'ambiguous') {
    faults.add(
      line,
      column,
      'number_ambiguous',
      importCellSaid.ambiguous(text.trim(), read.asDecimal, read.asThousands),
      importCellSaid.ambiguousRemedy,
    );
    return undefined;
  }
  if (Math.abs(read.value) > ROOF_MAX_M) {
    faults.add(
      line,
      column,
      'number_fault',
      importCellSaid.offRoof(read.value),
      importCellSaid.offRoofRemedy,
    );
    return undefined;
  }
  return read.value;
}

type Input = KnownNames['inputs'][number];

/** Finds inputs: `Inverter 1/2`, `2`, `MPPT 2`, beside an inverter's name or, where there is one only, without. */
class InputBook {
  private readonly whole = new Map<string, Input>();
  private readonly byNumber = new Map<string, Input>();
  constructor(
    private readonly inputs: readonly Input[],
    private readonly inverters: readonly string[],
  ) {
    for (const input of inputs) {
      this.whole.set(bareName(inputName(input.inverter, input.number)), input);
      this.byNumber.set(inputName(input.inverter, input.number), input);
    }
  }

  read(
    text: string,
    inverter: string | null | undefined,
    line: number,
    faults: Faults,
  ): Input | null | undefined {
    if (text === '' || inverter === undefined) return text === '' ? null : undefined;
    const whole = text.includes('/') ? this.whole.get(bareName(text).replace(/\s*\/\s*/, '/')) : undefined;
    if (whole && (inverter === null || inverter === whole.inverter)) return whole;
    const owner = inverter ?? (this.inverters.length === 1 ? this.inverters[0] : undefined);
    if (owner === undefined) return this.told(importCellSaid.inputWhose(text), owner, line, faults);
    const number = /(\d+)\s*$/.exec(text)?.[1];
    const found = number === undefined ? undefined : this.byNumber.get(inputName(owner, Number(number)));
    return found ?? this.told(importCellSaid.noInput(owner, text), owner, line, faults);
  }

  private told(message: string, owner: string | undefined, line: number, faults: Faults): undefined {
    const listed = this.inputs
      .filter((i) => owner === undefined || i.inverter === owner)
      .slice(0, 8)
      .map((i) => inputName(i.inverter, i.number));
    faults.add(
      line,
      'input',
      'name_unknown',
      message,
      listed.length > 0 ? importCellSaid.inputsHere(listed) : importCellSaid.noInputsHere,
    );
  }
}

/** Every cell of the table, faults added to `faults`. `onRow` is told how far it is. */
export function readRows(
  table: ImportTable,
  choices: ImportChoices,
  names: KnownNames,
  faults: Faults,
  onRow?: (done: number) => void,
): RawRow[] {
  const at = new Map(table.columns.map((c, i) => [c, i]));
  const column = (c: ImportColumn): string[] => {
    const i = at.get(c);
    return i === undefined ? [] : table.rows.map((r) => r[i] ?? '');
  };
  const marks = {
    roofX: choices.decimalMark ?? decimalMarkOf([...column('roofX'), ...column('roofY')]),
  };
  const books = booksOf(names, choices);
  const inputs = new InputBook(names.inputs, books.inverter.names);
  const strings = new NameBook(names.strings.map((s) => s.name));
  const madeHere = new Map<string, string>();
  let above = '';
  const rows: RawRow[] = [];
  table.rows.forEach((cells, n) => {
    const line = table.lines[n] ?? n + 1;
    const cell = (c: ImportColumn): string => {
      const i = at.get(c);
      return i === undefined ? '' : (cells[i] ?? '').trim().replace(/^'(?=[=+\-@])/, '');
    };
    const named = (c: NameColumn, text = cell(c)): string | null | undefined => {
      if (text === '') return null;
      const found = books[c].find(text);
      if (found !== undefined) return found;
      const known = books[c].names;
      const suggestion = nearestName(text, known);
      const none =
        c === 'unitType' || c === 'moduleType' ? importCellSaid.noneInCatalogue : importCellSaid.noneOnSite;
      faults.add(
        line,
        c,
        'name_unknown',
        importCellSaid.noSuch(c, text),
        suggestion
          ? importCellSaid.isMeant(suggestion)
          : known.length > 0
            ? importCellSaid.known(known.slice(0, 5), known.length - 5)
            : none,
        { suggestion },
      );
      return undefined;
    };
    const readString = (): string | undefined => {
      let text = cell('string');
      if (text === '' && choices.fillDown) text = above;
      if (text === '') {
        faults.add(
          line,
          'string',
          'string_empty',
          importCellSaid.stringEmpty,
          above ? importCellSaid.stringEmptyBelow : importCellSaid.stringEmptyRemedy,
          { suggestion: above || null },
        );
        return undefined;
      }
      above = text;
      if (text.length > 40) {
        faults.add(
          line,
          'string',
          'string_name',
          importCellSaid.nameLong(text.length),
          importCellSaid.nameLongRemedy,
        );
        return undefined;
      }
      const bare = bareName(text);
      const name = strings.find(text) ?? madeHere.get(bare);
      if (name === undefined) madeHere.set(bare, text);
      return name ?? text;
    };
    const readUnit = (): string | null | undefined => {
      const read = readSerial(cell('serial'));
      if (read.kind === 'empty') return null;
      if (read.kind === 'serial') return read.serial;
      faults.add(line, 'serial', 'serial_format', read.message, read.remedy, { suggestion: read.suggestion });
      return undefined;
    };
    const place = cell('roofPlace');
    if (place.length > PLACE_MAX)
      faults.add(
        line,
        'roofPlace',
        'text_long',
        importCellSaid.placeLong(place.length),
        importCellSaid.placeLongRemedy(PLACE_MAX),
      );
    const inverter = named('inverter');
    const senders = cell('transmitters')
      .split(/\s*[;,]\s*/)
      .filter(Boolean)
      .map((t) => named('transmitters', t));
    rows.push({
      line,
      string: readString(),
      position: readPosition(cell('position'), line, faults),
      serial: readUnit(),
      input: inputs.read(cell('input'), inverter, line, faults),
      transmitters:
        senders.length === 0
          ? null
          : senders.includes(undefined)
            ? undefined
            : senders.filter((s) => typeof s === 'string'),
      unitType: named('unitType'),
      moduleType: named('moduleType'),
      plane: named('plane'),
      zone: named('zone'),
      logger: named('logger'),
      roofX: readRoof(cell('roofX'), 'roofX', line, marks.roofX, faults),
      roofY: readRoof(cell('roofY'), 'roofY', line, marks.roofX, faults),
      roofPlace: place === '' ? null : place.length > PLACE_MAX ? undefined : place,
    });
    if (onRow && n % 500 === 499) onRow(n + 1);
  });
  return rows;
}

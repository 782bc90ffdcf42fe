import { COLUMN_HEADS, IMPORT_COLUMNS, type ImportColumn } from '../../domain/commissioning/import/columns';
import type { AsBuilt, SlotBuilt, StringBuilt } from '../../schemas/api/as-built';
import { nameOf } from '../../schemas/as-built-values';
import { csvResponse, csvText, type Cell, type Column } from './csv';

interface Row {
  string: StringBuilt;
  slot: SlotBuilt;
}

function columnsOf(built: Omit<AsBuilt, 'at'>): Column<Row>[] {
  const inputs = new Map(
    built.inverters.flatMap((v) => v.inputs.map((i) => [i.id, { inverter: v.name, number: i.number }])),
  );
  const names = new Map<string, string>();
  const name = (of: Parameters<typeof nameOf>[1], id: string): string => {
    const known = names.get(`${of} ${id}`) ?? nameOf(built, of, id)?.replace(/ \(archived\)$/, '') ?? '';
    names.set(`${of} ${id}`, known);
    return known;
  };
  const values: Record<ImportColumn, (row: Row) => Cell> = {
    string: ({ string }) => string.name,
    position: ({ slot }) => slot.position,
    serial: ({ slot }) => slot.serial,
    unitType: ({ string }) => name('unit_type', string.unitType),
    moduleType: ({ slot }) => name('module_type', slot.moduleType),
    plane: ({ string }) => name('plane', string.plane),
    inverter: ({ string }) => inputs.get(string.input)?.inverter,
    input: ({ string }) => inputs.get(string.input)?.number,
    zone: ({ string }) => name('zone', string.zone),
    logger: ({ string }) => (string.logger === null ? null : name('logger', string.logger)),
    transmitters: ({ string }) => string.transmitters.map((t) => name('transmitter', t)).join('; '),
    roofX: ({ slot }) => slot.roofX,
    roofY: ({ slot }) => slot.roofY,
    roofPlace: ({ slot }) => slot.roofPlace,
  };
  return IMPORT_COLUMNS.map((key) => ({ header: COLUMN_HEADS[key], value: values[key] }));
}

const rowsOf = (built: Omit<AsBuilt, 'at'>): Row[] =>
  built.strings.flatMap((string) => string.slots.map((slot) => ({ string, slot })));

/** The as-built as a table, one row a slot: the columns that the import reads. */
export const asBuiltCsvText = (built: Omit<AsBuilt, 'at'>): string =>
  csvText(columnsOf(built), rowsOf(built));

export const asBuiltCsv = (built: Omit<AsBuilt, 'at'>): Response =>
  csvResponse(`as-built-${built.site.name}`, columnsOf(built), rowsOf(built));

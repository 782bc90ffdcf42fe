import { createHash } from 'node:crypto';
import Papa from 'papaparse';
import type { Actor } from '../../domain/access/permissions';
import type { EquipmentFamily } from '../../domain/equipment/families';
import type { Entry } from '../../domain/equipment/fields';
import { FIELDS, judgeEntry } from '../../domain/equipment/plausibility';
import type { ImportFault, ImportPreview, ImportRow } from '../../schemas/api/equipment';
import { readHeader, readRow, writtenValue } from '../../schemas/equipment-file';
import type { Tx } from '../db/transaction';
import { AppError } from '../errors';
import { catalogueRows, connectorTypes, type CatalogueRow } from '../queries/equipment';
import { writeChange, writeNew } from './equipment-save';
import { equipmentImportRefusals } from '../../words/refusals-as-built';

const MOST_ROWS = 2000;

interface PlannedRow {
  shown: ImportRow;
  entry: Entry;
  before: CatalogueRow | undefined;
}

/** Rows of the text, blank ones left out, each with its row in the file. */
function rowsOf(text: string): { row: number; cells: string[] }[] {
  const parsed = Papa.parse<string[]>(text.replace(/^\uFEFF/, ''), {
    delimitersToGuess: [',', ';', '\t', '|'],
  });
  const quotes = parsed.errors.find((e) => e.type === 'Quotes');
  if (quotes)
    throw new AppError('invalid', {
      message: equipmentImportRefusals.openQuote((quotes.row ?? 0) + 1),
      fields: [{ field: 'text', message: equipmentImportRefusals.unpairedQuotes((quotes.row ?? 0) + 1) }],
    });
  const rows = parsed.data
    .map((cells, i) => ({ row: i + 1, cells }))
    .filter(({ cells }) => cells.some((c) => c.trim() !== ''));
  if (rows.length > MOST_ROWS + 1)
    throw new AppError('too_large', {
      message: equipmentImportRefusals.tooManyRows(rows.length - 1, MOST_ROWS),
    });
  if (rows.length < 2)
    throw new AppError('invalid', {
      message: equipmentImportRefusals.noRow,
      fields: [{ field: 'text', message: equipmentImportRefusals.addRow }],
    });
  return rows;
}

/** What would become of each row; nothing is written. */
async function plan(
  tx: Tx,
  family: EquipmentFamily,
  text: string,
): Promise<{
  preview: Omit<ImportPreview, 'imported'>;
  planned: PlannedRow[];
  connectorIds: Map<string, number>;
}> {
  const [head, ...body] = rowsOf(text);
  const header = readHeader(family, head?.cells ?? []);
  const existing = await catalogueRows(tx, family);
  const connectors = await connectorTypes(tx);
  const lower = (name: unknown) => String(name).trim().toLocaleLowerCase('en');
  const byName = new Map(existing.map((r) => [lower(r.entry.name), r]));
  const around = {
    connectorByName: new Map(connectors.filter((c) => !c.archived).map((c) => [lower(c.name), c.id])),
    connectorNames: new Map(connectors.map((c) => [c.id, c.name])),
  };
  const nameAt = header.fields.findIndex((f) => f?.key === 'name');
  const seen = new Map<string, number>();
  const planned =
    header.faults.length > 0
      ? []
      : body.map(({ row, cells }): PlannedRow => {
          const name = (cells[nameAt] ?? '').trim();
          const before = byName.get(lower(name));
          const read = readRow(family, header, cells, { before: before?.entry, ...around });
          const faults: ImportFault[] = [...read.faults];
          const first = seen.get(lower(name));
          if (name !== '' && first !== undefined)
            faults.push({
              column: 'Name',
              typed: name,
              why: equipmentImportRefusals.sameName(first),
              remedy: equipmentImportRefusals.keepOne,
            });
          else seen.set(lower(name), row);
          return judged(family, { row, name, before, read: { ...read, faults } }, around.connectorNames);
        });
  const count = (outcome: ImportRow['outcome']) => planned.filter((p) => p.shown.outcome === outcome).length;
  const rows = planned.map((p) => p.shown);
  return {
    preview: {
      rows,
      headerFaults: header.faults,
      ignoredColumns: header.ignored,
      counts: {
        new: count('new'),
        changed: count('changed'),
        unchanged: count('unchanged'),
        faulty: count('faulty'),
      },
      fingerprint: createHash('sha256')
        .update(JSON.stringify([text, existing.map((r) => r.version), rows]))
        .digest('hex'),
    },
    planned,
    connectorIds: new Map(connectors.map((c) => [c.id, c.dbId])),
  };
}

function judged(
  family: EquipmentFamily,
  at: {
    row: number;
    name: string;
    before: CatalogueRow | undefined;
    read: { entry: Entry; faults: ImportFault[] };
  },
  connectorNames: ReadonlyMap<string, string>,
): PlannedRow {
  const { row, name, before, read } = at;
  const { faults } = read;
  const doubts: string[] = [];
  const fieldOf = (key: string) => FIELDS[family].find((f) => f.key === key);
  const written = (key: string, entry: Entry) => {
    const field = fieldOf(key);
    return field ? writtenValue(field, entry[key], connectorNames) : '';
  };
  // an entry keeps the way in which its name is written
  const entry: Entry = before ? { ...read.entry, name: before.entry.name ?? name } : read.entry;
  if (faults.length === 0) {
    const found = judgeEntry(family, entry);
    for (const c of found.conflicts)
      faults.push({
        column: fieldOf(c.field)?.label ?? c.field,
        typed: written(c.field, entry),
        why: c.message,
        remedy: equipmentImportRefusals.correctValue,
      });
    doubts.push(...found.doubts.map((d) => d.message));
    if (family === 'units' && before && before.strings > 0 && before.entry.kind !== entry.kind)
      faults.push({
        column: 'Kind',
        typed: written('kind', entry),
        why: equipmentImportRefusals.stringsRest(before.strings),
        remedy: equipmentImportRefusals.giveAnotherName,
      });
  }
  const changes = before
    ? FIELDS[family]
        .filter((f) => (before.entry[f.key] ?? null) !== (entry[f.key] ?? null))
        .map((f) => ({ label: f.label, before: written(f.key, before.entry), after: written(f.key, entry) }))
    : [];
  const outcome =
    faults.length > 0 ? 'faulty' : !before ? 'new' : changes.length > 0 ? 'changed' : 'unchanged';
  return {
    shown: { row, name, outcome, changes, faults, doubts, strings: before?.strings ?? 0 },
    entry,
    before,
  };
}

/**
 * Looks at a table of types, or imports it as it was previewed: all of it or nothing. The same file twice changes
 * nothing the second time.
 *
 * @throws AppError invalid · too_large · conflict (the catalogue has changed since the preview)
 */
export async function importTypes(
  tx: Tx,
  actor: Actor,
  family: EquipmentFamily,
  input: { text: string; confirm?: string | undefined },
  address: string | null,
): Promise<ImportPreview> {
  const { preview, planned, connectorIds } = await plan(tx, family, input.text);
  if (input.confirm === undefined) return { ...preview, imported: false };
  if (input.confirm !== preview.fingerprint)
    throw new AppError('conflict', {
      message: equipmentImportRefusals.catalogueChanged,
    });
  if (preview.headerFaults.length > 0 || preview.counts.faulty > 0)
    throw new AppError('invalid', {
      message: equipmentImportRefusals.nothingImported,
      fields: [{ field: 'text', message: equipmentImportRefusals.rowsHaveFaults(preview.counts.faulty) }],
    });
  for (const { shown, entry, before } of planned) {
    if (before && shown.outcome === 'changed')
      await writeChange(tx, actor, family, { row: before, entry, connectorIds, address });
    if (!before) await writeNew(tx, actor, family, { entry, connectorIds, address });
  }
  return { ...preview, imported: true };
}

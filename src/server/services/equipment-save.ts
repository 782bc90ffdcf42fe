import type { Actor } from '../../domain/access/permissions';
import type { EquipmentFamily } from '../../domain/equipment/families';
import type { Entry } from '../../domain/equipment/fields';
import { FIELDS, judgeEntry } from '../../domain/equipment/plausibility';
import type { CatalogueType, EntryInput, EntrySaved } from '../../schemas/api/equipment';
import { readEntry, typedValue } from '../../schemas/equipment-entry';
import type { Tx } from '../db/transaction';
import { AppError, found, type FieldFault } from '../errors';
import {
  catalogueRows,
  connectorTypes,
  insertEntry,
  kindIsUsed,
  lockEntry,
  setArchived,
  sitesUsing,
  updateEntry,
  type CatalogueRow,
} from '../queries/equipment';
import { tellAsBuiltChanged, tellSiteChanged } from '../queries/live-notices';
import { addAuditEntry } from '../queries/people';
import { readType, subjectOf } from './equipment';
import { equipmentSaveRefusals } from '../../words/refusals-as-built';

const invalid = (fields: FieldFault[]): AppError =>
  new AppError('invalid', { message: fields.map((f) => f.message).join(' '), fields });

/** Fields of an entry that rest on others of the catalogue: its name and its connectors. */
function clashes(
  family: EquipmentFamily,
  entry: Entry,
  around: {
    rows: readonly CatalogueRow[];
    self: CatalogueRow | undefined;
    connectors: ReadonlyMap<string, boolean>;
  },
): FieldFault[] {
  const name = String(entry.name).toLocaleLowerCase('en');
  const twin = around.rows.find(
    (r) => r.id !== around.self?.id && String(r.entry.name).toLocaleLowerCase('en') === name,
  );
  const faults: FieldFault[] = twin
    ? [
        {
          field: 'name',
          message: equipmentSaveRefusals.nameTaken(String(twin.entry.name), twin.archivedAt !== null),
        },
      ]
    : [];
  for (const field of FIELDS[family]) {
    if (field.kind !== 'connector') continue;
    const ref = entry[field.key];
    if (typeof ref !== 'string' || ref === around.self?.entry[field.key]) continue;
    const archived = around.connectors.get(ref);
    if (archived === undefined)
      faults.push({
        field: field.key,
        message: equipmentSaveRefusals.choiceGone(field.label),
      });
    else if (archived)
      faults.push({ field: field.key, message: equipmentSaveRefusals.archived(field.label) });
  }
  return faults;
}

/** Tells everybody who reads the sites that rest on a type. */
export async function tellSitesUsing(tx: Tx, family: EquipmentFamily, dbId: number): Promise<void> {
  for (const site of await sitesUsing(tx, family, dbId)) {
    if (family !== 'connectors') await tellAsBuiltChanged(tx, site); // rosters and judgements know no connectors
    await tellSiteChanged(tx, site);
  }
}

/** A typed form as an entry that may be written. @throws AppError invalid, naming every field */
async function acceptedEntry(
  tx: Tx,
  family: EquipmentFamily,
  input: EntryInput,
  self: CatalogueRow | undefined,
): Promise<{ entry: Entry; connectorIds: Map<string, number> }> {
  const { entry, faults } = readEntry(family, input.typed);
  const connectors = await connectorTypes(tx);
  const fields: FieldFault[] = Object.entries(faults).map(([field, message]) => ({ field, message }));
  if (fields.length === 0) {
    fields.push(
      ...clashes(family, entry, {
        rows: await catalogueRows(tx, family),
        self,
        connectors: new Map(connectors.map((c) => [c.id, c.archived])),
      }),
    );
    if (self && family === 'units' && self.entry.kind !== entry.kind && (await kindIsUsed(tx, self.dbId)))
      fields.push({
        field: 'kind',
        message: equipmentSaveRefusals.kindInUse(self.strings),
      });
    const { conflicts, doubts } = judgeEntry(family, entry);
    fields.push(...conflicts);
    if (fields.length === 0)
      fields.push(
        ...doubts
          .filter((d) => !input.accepted.includes(d.key))
          .map((d) => ({ field: `accepted.${d.key}`, message: d.message })),
      );
  }
  if (fields.length > 0) throw invalid(fields);
  return { entry, connectorIds: new Map(connectors.map((c) => [c.id, c.dbId])) };
}

/** @throws AppError invalid */
export async function createType(
  tx: Tx,
  actor: Actor,
  family: EquipmentFamily,
  input: EntryInput,
  address: string | null,
): Promise<EntrySaved> {
  const { entry, connectorIds } = await acceptedEntry(tx, family, input, undefined);
  const id = await writeNew(tx, actor, family, { entry, connectorIds, address });
  const { item } = await readType(tx, family, id);
  return { id, version: item.version };
}

/** What the form's owner must know when somebody else was faster: which fields now say what. */
function overtaken(family: EquipmentFamily, now: CatalogueType, typed: EntryInput['typed']): AppError {
  const different = FIELDS[family]
    .filter((f) => typedValue(f, now.item.entry[f.key]) !== (typed[f.key] ?? '').trim())
    .map((f) => ({
      field: f.key,
      message: equipmentSaveRefusals.standsNow(typedValue(f, now.item.entry[f.key])),
    }));
  return new AppError('conflict', {
    message: equipmentSaveRefusals.changedMeanwhile(now.changedBy ?? ''),
    fields: different,
  });
}

/** @throws AppError not_found · conflict (changed since the form was opened) · invalid */
export async function changeType(
  tx: Tx,
  actor: Actor,
  family: EquipmentFamily,
  ref: string,
  input: EntryInput & { version: string },
  address: string | null,
): Promise<EntrySaved> {
  const locked = found(await lockEntry(tx, family, ref), 'type');
  if (locked.version !== input.version) throw overtaken(family, await readType(tx, family, ref), input.typed);
  const [self] = await catalogueRows(tx, family, ref);
  const { entry, connectorIds } = await acceptedEntry(tx, family, input, self);
  await writeChange(tx, actor, family, { row: found(self, 'type'), entry, connectorIds, address });
  const { item } = await readType(tx, family, ref);
  return { id: ref, version: item.version };
}

/** Writes a type that was not there; returns its public id. */
export async function writeNew(
  tx: Tx,
  actor: Actor,
  family: EquipmentFamily,
  added: { entry: Entry; connectorIds: ReadonlyMap<string, number>; address: string | null },
): Promise<string> {
  const { entry, connectorIds, address } = added;
  const { organisationId, personId } = actor;
  const { id } = await insertEntry(tx, family, { organisationId, entry, connectorIds });
  await addAuditEntry(tx, {
    organisationId,
    personId,
    address,
    action: 'equipment.create',
    subject: subjectOf(family, id),
    after: entry,
  });
  return id;
}

/** Writes a change with its before and after, and tells the sites that rest on the type. */
export async function writeChange(
  tx: Tx,
  actor: Actor,
  family: EquipmentFamily,
  change: {
    row: CatalogueRow;
    entry: Entry;
    connectorIds: ReadonlyMap<string, number>;
    address: string | null;
  },
): Promise<void> {
  const { row, entry } = change;
  const changed = FIELDS[family].filter((f) => (row.entry[f.key] ?? null) !== (entry[f.key] ?? null));
  if (changed.length === 0) return;
  await updateEntry(tx, family, row.dbId, entry, change.connectorIds);
  const of = (e: Entry) => Object.fromEntries(changed.map((f) => [f.key, e[f.key] ?? null]));
  await addAuditEntry(tx, {
    organisationId: actor.organisationId,
    personId: actor.personId,
    address: change.address,
    action: 'equipment.change',
    subject: subjectOf(family, row.id),
    before: of(row.entry),
    after: of(entry),
  });
  await tellSitesUsing(tx, family, row.dbId);
}

/** Takes a type out of what may be chosen, or back in. What rests on it keeps resting on it. @throws AppError not_found */
export async function archiveType(
  tx: Tx,
  actor: Actor,
  family: EquipmentFamily,
  ref: string,
  archive: { archived: boolean; at: Date; address: string | null },
): Promise<CatalogueType> {
  const locked = found(await lockEntry(tx, family, ref), 'type');
  if ((locked.archivedAt !== null) !== archive.archived) {
    await setArchived(tx, family, locked.dbId, archive.archived ? archive.at : null);
    await addAuditEntry(tx, {
      organisationId: actor.organisationId,
      personId: actor.personId,
      address: archive.address,
      action: archive.archived ? 'equipment.archive' : 'equipment.restore',
      subject: subjectOf(family, ref),
    });
  }
  return readType(tx, family, ref);
}

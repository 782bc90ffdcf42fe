import type { ConnectorIdentity, DocumentedPair } from '../../domain/equipment/connectors';
import type { EquipmentFamily } from '../../domain/equipment/families';
import type { Entry, Field } from '../../domain/equipment/fields';
import { FIELDS } from '../../domain/equipment/plausibility';
import type { Tx } from '../db/transaction';

export const EQUIPMENT_TABLES = {
  modules: 'module_type',
  units: 'unit_type',
  connectors: 'connector_type',
  inverters: 'inverter_type',
} as const satisfies Record<EquipmentFamily, string>;

export interface CatalogueRow {
  id: string;
  dbId: number;
  entry: Entry;
  archivedAt: Date | null;
  /** Changes with every change of the row. */
  version: string;
  /** Strings and sites that rest on it; other types that name it (connectors). */
  strings: number;
  sites: number;
  types: number;
}

/** Which strings rest on a type, as rows (id, string_id, site_id). */
const USERS: Record<EquipmentFamily, string> = {
  modules: 'select module_type_id as id, string_id, site_id from slot',
  units: 'select unit_type_id as id, id as string_id, site_id from string',
  inverters: `select i.inverter_type_id as id, s.id as string_id, i.site_id
    from inverter i left join input on input.inverter_id = i.id left join string s on s.input_id = input.id
    where i.inverter_type_id is not null`,
  connectors: `select m.connector_type_id as id, sl.string_id, sl.site_id
    from slot sl join module_type m on m.id = sl.module_type_id where m.connector_type_id is not null
    union select c.id, s.id, s.site_id
    from string s join unit_type u on u.id = s.unit_type_id
    cross join lateral (values (u.connector_in_id), (u.connector_out_id)) c (id) where c.id is not null`,
};

const selected = (field: Field): string =>
  field.kind === 'connector'
    ? `(select c.ref from connector_type c where c.id = t.${field.column}) as "${field.key}"`
    : `t.${field.column} as "${field.key}"`;

/** What a connector is named by, elsewhere in the catalogue. */
const NAMING = `(select count(*)::int from module_type m where m.connector_type_id = t.id)
  + (select count(*)::int from unit_type u where t.id in (u.connector_in_id, u.connector_out_id))`;

interface Raw {
  id: string;
  dbId: number;
  archivedAt: Date | null;
  version: string;
  strings: number;
  sites: number;
  types: number;
  [key: string]: unknown;
}

const asRow =
  (family: EquipmentFamily) =>
  (raw: Raw): CatalogueRow => ({
    id: raw.id,
    dbId: raw.dbId,
    entry: Object.fromEntries(FIELDS[family].map((f) => [f.key, raw[f.key] as Entry[string]])),
    archivedAt: raw.archivedAt,
    version: raw.version,
    strings: raw.strings,
    sites: raw.sites,
    types: raw.types,
  });

/** The organisation's entries of a family, archived ones too, or the one with a public identifier. */
export async function catalogueRows(tx: Tx, family: EquipmentFamily, ref?: string): Promise<CatalogueRow[]> {
  const { rows } = await tx.raw<{ rows: Raw[] }>(
    `select t.ref as id, t.id as "dbId", t.archived_at as "archivedAt", md5(to_jsonb(t)::text) as version,
            ${FIELDS[family].map(selected).join(', ')},
            coalesce(u.strings, 0) as strings, coalesce(u.sites, 0) as sites,
            ${family === 'connectors' ? NAMING : '0'} as types
     from ${EQUIPMENT_TABLES[family]} t
     left join (select id, count(distinct string_id)::int as strings, count(distinct site_id)::int as sites
                from (${USERS[family]}) users group by id) u on u.id = t.id
     where t.organisation_id = (select actor_organisation()) and (cast(:ref as uuid) is null or t.ref = cast(:ref as uuid))
     order by lower(t.name)`,
    { ref: ref ?? null },
  );
  return rows.map(asRow(family));
}

/** Keeps others from changing an entry until the transaction ends; its version as it then stands. */
export async function lockEntry(
  tx: Tx,
  family: EquipmentFamily,
  ref: string,
): Promise<{ dbId: number; version: string; archivedAt: Date | null } | undefined> {
  const { rows } = await tx.raw<{ rows: { dbId: number; version: string; archivedAt: Date | null }[] }>(
    `select t.id as "dbId", md5(to_jsonb(t)::text) as version, t.archived_at as "archivedAt"
     from ${EQUIPMENT_TABLES[family]} t
     where t.ref = :ref and t.organisation_id = (select actor_organisation()) for update`,
    { ref },
  );
  return rows[0];
}

/** Column values of an entry; connectors by the numbers of `connectorIds`. */
function columnsOf(
  family: EquipmentFamily,
  entry: Entry,
  connectorIds: ReadonlyMap<string, number>,
): Record<string, unknown> {
  return Object.fromEntries(
    FIELDS[family].map((f) => {
      const value = entry[f.key] ?? null;
      return [
        f.column,
        f.kind === 'connector' && typeof value === 'string' ? (connectorIds.get(value) ?? null) : value,
      ];
    }),
  );
}

export async function insertEntry(
  tx: Tx,
  family: EquipmentFamily,
  entry: { organisationId: number; entry: Entry; connectorIds: ReadonlyMap<string, number> },
): Promise<{ id: string; dbId: number }> {
  const [made] = await tx(EQUIPMENT_TABLES[family])
    .insert({
      organisation_id: entry.organisationId,
      ...columnsOf(family, entry.entry, entry.connectorIds),
    })
    .returning<{ id: string; dbId: number }[]>(['ref as id', 'id as dbId']);
  if (!made) throw new Error('The entry was not written.');
  return made;
}

export async function updateEntry(
  tx: Tx,
  family: EquipmentFamily,
  dbId: number,
  entry: Entry,
  connectorIds: ReadonlyMap<string, number>,
): Promise<void> {
  await tx(EQUIPMENT_TABLES[family])
    .where('id', dbId)
    .update(columnsOf(family, entry, connectorIds));
}

export async function setArchived(
  tx: Tx,
  family: EquipmentFamily,
  dbId: number,
  archivedAt: Date | null,
): Promise<void> {
  await tx(EQUIPMENT_TABLES[family]).where('id', dbId).update({ archived_at: archivedAt });
}

/** Sites where strings rest on a type. */
export async function sitesUsing(tx: Tx, family: EquipmentFamily, dbId: number): Promise<number[]> {
  const { rows } = await tx.raw<{ rows: { siteId: number }[] }>(
    `select distinct site_id as "siteId" from (${USERS[family]}) users where id = :dbId`,
    { dbId },
  );
  return rows.map((r) => r.siteId);
}

/** Whether strings or recorded units hold a unit type to its kind. */
export async function kindIsUsed(tx: Tx, unitTypeId: number): Promise<boolean> {
  const { rows } = await tx.raw<{ rows: { used: boolean }[] }>(
    `select exists (select from string where unit_type_id = :unitTypeId) as used`,
    { unitTypeId },
  );
  return rows[0]?.used ?? false;
}

/** Who changed an entry last, and when. */
export async function lastChangeOf(
  tx: Tx,
  subject: string,
): Promise<{ person: string | null; at: Date } | undefined> {
  const { rows } = await tx.raw<{ rows: { person: string | null; at: Date }[] }>(
    `select p.name as person, a.at from audit_entry a left join person p on p.id = a.person_id
     where a.subject = :subject and a.organisation_id = (select actor_organisation())
     order by a.at desc, a.id desc limit 1`,
    { subject },
  );
  return rows[0];
}

export interface ConnectorChoice extends ConnectorIdentity {
  dbId: number;
  archived: boolean;
}

/** Every connector type of the organisation. */
export async function connectorTypes(tx: Tx): Promise<ConnectorChoice[]> {
  const { rows } = await tx.raw<{ rows: ConnectorChoice[] }>(
    `select ref as id, id as "dbId", name, maker, family, archived_at is not null as archived
     from connector_type where organisation_id = (select actor_organisation()) order by lower(name)`,
  );
  return rows;
}

/** Pairs of connector types that are documented as intermatable, as far as they are in force. */
export async function connectorPairs(tx: Tx): Promise<DocumentedPair[]> {
  const { rows } = await tx.raw<{ rows: DocumentedPair[] }>(
    `select a.ref as first, b.ref as second, p.evidence
     from connector_pair p join connector_type a on a.id = p.first_id join connector_type b on b.id = p.second_id
     where p.ended_at is null and p.organisation_id = (select actor_organisation())`,
  );
  return rows;
}

export interface TypeChoice {
  id: string;
  dbId: number;
  name: string;
  archived: boolean;
}

/** The types of a family by name, for choosing one. */
export async function typeChoices(tx: Tx, family: EquipmentFamily): Promise<TypeChoice[]> {
  const { rows } = await tx.raw<{ rows: TypeChoice[] }>(
    `select ref as id, id as "dbId", name, archived_at is not null as archived
     from ${EQUIPMENT_TABLES[family]} where organisation_id = (select actor_organisation()) order by lower(name)`,
  );
  return rows;
}

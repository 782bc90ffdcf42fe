import type { EquipmentFamily } from '../../domain/equipment/families';
import type { Catalogue, CatalogueItem, CatalogueType, PairItem } from '../../schemas/api/equipment';
import type { Tx } from '../db/transaction';
import { found } from '../errors';
import { pairRows } from '../queries/connector-pairs';
import {
  EQUIPMENT_TABLES,
  catalogueRows,
  connectorTypes,
  lastChangeOf,
  type CatalogueRow,
} from '../queries/equipment';

export const itemOf = (row: CatalogueRow): CatalogueItem => ({
  id: row.id,
  entry: row.entry,
  archivedAt: row.archivedAt?.toISOString() ?? null,
  version: row.version,
  strings: row.strings,
  sites: row.sites,
  types: row.types,
});

/** How the audit trail names an entry. */
export const subjectOf = (family: EquipmentFamily, ref: string): string =>
  `${EQUIPMENT_TABLES[family]} ${ref}`;

async function readPairs(tx: Tx): Promise<PairItem[]> {
  return (await pairRows(tx)).map((p) => ({
    ...p,
    recordedAt: p.recordedAt.toISOString(),
    endedAt: p.endedAt?.toISOString() ?? null,
  }));
}

/** A family of the catalogue, with what its lists and forms need besides. */
export async function readCatalogue(tx: Tx, family: EquipmentFamily): Promise<Catalogue> {
  const items = (await catalogueRows(tx, family)).map(itemOf);
  const connectors = (await connectorTypes(tx)).map(({ id, name, maker, family: type, archived }) => ({
    id,
    name,
    maker,
    family: type,
    archived,
  }));
  return { family, items, connectors, pairs: family === 'connectors' ? await readPairs(tx) : [] };
}

/** @throws AppError not_found */
export async function readType(tx: Tx, family: EquipmentFamily, ref: string): Promise<CatalogueType> {
  const [row] = await catalogueRows(tx, family, ref);
  const item = itemOf(found(row, 'type'));
  const change = await lastChangeOf(tx, subjectOf(family, ref));
  return { item, changedBy: change?.person ?? null, changedAt: change?.at.toISOString() ?? null };
}

import { GET as listRoute } from '../../src/pages/api/equipment/[family]';
import { PUT as changeRoute } from '../../src/pages/api/equipment/[family]/[type]';
import type { Actor } from '../../src/domain/access/permissions';
import type { EquipmentFamily } from '../../src/domain/equipment/families';
import { catalogue, type Catalogue, type CatalogueItem } from '../../src/schemas/api/equipment';
import { typedEntry } from '../../src/schemas/equipment-entry';
import type { TestDatabase } from './database';
import { ask } from './endpoint';

/** The catalogue of equipment as a person reads and changes it. */

export async function list(actor: Actor, family: EquipmentFamily): Promise<Catalogue> {
  return catalogue.parse(await (await ask(listRoute, { actor, params: { family } })).json());
}
export async function named(actor: Actor, family: EquipmentFamily, name: string): Promise<CatalogueItem> {
  const item = (await list(actor, family)).items.find((i) => i.entry.name === name);
  if (!item) throw new Error(`The catalogue has no ${name}.`);
  return item;
}

export interface Problem {
  detail: string;
  fields: { field: string; message: string }[];
}
export const problem = async (response: Response): Promise<Problem> => (await response.json()) as Problem;

/** Sends the form of a type back with some fields typed otherwise. */
export const change = (
  actor: Actor,
  family: EquipmentFamily,
  item: CatalogueItem,
  typed: Record<string, string>,
  accepted: string[] = [],
): Promise<Response> =>
  ask(changeRoute, {
    actor,
    params: { family, type: item.id },
    method: 'PUT',
    body: { typed: { ...typedEntry(family, item.entry), ...typed }, accepted, version: item.version },
  });

/** What the audit trail has of an action, newest first. */
export const audited = async (db: TestDatabase, action: string) =>
  (
    await db.owner.query<{ subject: string; before: unknown; after: unknown; person_id: number }>(
      `select subject, before, after, person_id from audit_entry where action = $1 order by id desc`,
      [action],
    )
  ).rows;

/** The same as one person does it, and the trail of it; person and database are asked for at each call. */
export const catalogueOf = (of: () => { db: TestDatabase; actor: Actor }) => ({
  list: (family: EquipmentFamily, actor = of().actor) => list(actor, family),
  named: (family: EquipmentFamily, name: string, actor = of().actor) => named(actor, family, name),
  change: (
    family: EquipmentFamily,
    item: CatalogueItem,
    typed: Record<string, string>,
    accepted: string[] = [],
  ) => change(of().actor, family, item, typed, accepted),
  audit: (action: string) => audited(of().db, action),
});

import type { SavedList } from '../../domain/saved-views/lists';
import type { SavedView } from '../../schemas/api/saved-views';
import type { Tx } from '../db/transaction';

/** Views of lists, a person's own and what others of the organisation share. */

const COLUMNS = `v.ref as id, v.name, v.query, v.shared, v.person_id = :personId as own, person.name as by`;

export async function savedViewsOf(tx: Tx, personId: number, list: SavedList): Promise<SavedView[]> {
  const { rows } = await tx.raw<{ rows: SavedView[] }>(
    `select ${COLUMNS} from saved_view v join person on person.id = v.person_id
     where v.list = :list and v.organisation_id = (select actor_organisation()) and (v.person_id = :personId or v.shared)
     order by v.person_id <> :personId, lower(v.name), v.id limit 100`,
    { personId, list },
  );
  return rows;
}

/** Null: the person has one of that name for the list. */
export async function addSavedView(
  tx: Tx,
  view: {
    organisationId: number;
    personId: number;
    list: SavedList;
    name: string;
    query: string;
    shared: boolean;
  },
): Promise<SavedView | null> {
  const { rows } = await tx.raw<{ rows: SavedView[] }>(
    `with v as (
       insert into saved_view (organisation_id, person_id, list, name, query, shared)
       values (:organisationId, :personId, :list, :name, :query, :shared)
       on conflict (person_id, list, name) do nothing returning *)
     select ${COLUMNS} from v join person on person.id = v.person_id`,
    view,
  );
  return rows[0] ?? null;
}

/** Changes a view of the person's own. `taken`: another of theirs is called that; undefined: they have no such view. */
export async function changeSavedView(
  tx: Tx,
  personId: number,
  ref: string,
  change: { name: string | null; query: string | null; shared: boolean | null },
): Promise<SavedView | 'taken' | undefined> {
  const { rows } = await tx.raw<{ rows: (SavedView & { taken: boolean })[] }>(
    `with mine as (
       select v.*, exists (select from saved_view o where o.person_id = v.person_id and o.list = v.list
                           and o.name = cast(:name as text) and o.id <> v.id) as taken
       from saved_view v where v.ref = :ref and v.person_id = :personId for update),
     changed as (
       update saved_view s set name = coalesce(cast(:name as text), s.name),
         query = coalesce(cast(:query as text), s.query), shared = coalesce(cast(:shared as boolean), s.shared)
       from mine where s.id = mine.id and not mine.taken returning s.*)
     select v.ref as id, v.name, v.query, v.shared, true as own, person.name as by, mine.taken
     from mine left join changed on true
     cross join lateral (select coalesce(changed.ref, mine.ref) as ref, coalesce(changed.name, mine.name) as name,
       coalesce(changed.query, mine.query) as query, coalesce(changed.shared, mine.shared) as shared) v
     join person on person.id = mine.person_id`,
    { personId, ref, ...change },
  );
  const row = rows[0];
  if (!row) return undefined;
  if (row.taken) return 'taken';
  return {
    id: row.id,
    name: row.name,
    query: row.query,
    shared: row.shared,
    own: row.own,
    by: row.by,
  };
}

/** False: the person has no such view. */
export async function dropSavedView(tx: Tx, personId: number, ref: string): Promise<boolean> {
  const { rows } = await tx.raw<{ rows: unknown[] }>(
    'delete from saved_view where ref = :ref and person_id = :personId returning id',
    { personId, ref },
  );
  return rows.length > 0;
}

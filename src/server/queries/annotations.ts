import type { Annotation } from '../../schemas/api/annotations';
import type { Tx } from '../db/transaction';

/** Notes and planned works on the time axis. Whoever calls has checked that the site may be seen. */

interface Row extends Omit<Annotation, 'from' | 'to' | 'at' | 'string'> {
  from: Date;
  to: Date | null;
  at: Date;
  stringRef: string | null;
  stringName: string | null;
}
const COLUMNS = `a.ref as id, a.from_at as "from", a.to_at as "to", a.text, person.name as by, a.created_at as at,
  s.ref as "stringRef", s.name as "stringName"`;

const annotationOf = ({ stringRef, stringName, ...row }: Row): Annotation => ({
  id: row.id,
  string: stringRef && stringName ? { id: stringRef, name: stringName } : null,
  from: row.from.toISOString(),
  to: row.to?.toISOString() ?? null,
  text: row.text,
  by: row.by,
  at: row.at.toISOString(),
});

/** Notes that stand, newest time first: of the site, or of one string and its whole site; those that touch a time. */
export async function annotationsOf(
  tx: Tx,
  siteId: number,
  which: { stringId: number | null; from: Date | null; to: Date | null },
): Promise<Annotation[]> {
  const { rows } = await tx.raw<{ rows: Row[] }>(
    `select ${COLUMNS}
     from annotation a join person on person.id = a.created_by left join string s on s.id = a.string_id
     where a.site_id = :siteId and a.removed_at is null
       and (cast(:stringId as int4) is null or a.string_id is null or a.string_id = :stringId)
       and (cast(:to as timestamptz) is null or a.from_at < :to)
       and (cast(:from as timestamptz) is null or coalesce(a.to_at, a.from_at) >= :from)
     order by a.from_at desc, a.id desc limit 500`,
    { siteId, ...which },
  );
  return rows.map(annotationOf);
}

/** Writes a note once, however often it is sent. True: it is new. */
export async function addAnnotation(
  tx: Tx,
  note: {
    ref: string;
    siteId: number;
    stringId: number | null;
    from: Date;
    to: Date | null;
    text: string;
    personId: number;
  },
): Promise<boolean> {
  const { rows } = await tx.raw<{ rows: unknown[] }>(
    `insert into annotation (ref, site_id, string_id, from_at, to_at, text, created_by)
     values (:ref, :siteId, :stringId, :from, :to, :text, :personId) on conflict (ref) do nothing returning id`,
    note,
  );
  return rows.length > 0;
}

interface Kept {
  id: number;
  removed: boolean;
  stringId: number | null;
  annotation: Annotation;
}

/** A note of the site, standing or removed. */
export async function annotationOfSite(tx: Tx, siteId: number, ref: string): Promise<Kept | undefined> {
  const { rows } = await tx.raw<{
    rows: (Row & { number: number; removed: boolean; stringId: number | null })[];
  }>(
    `select ${COLUMNS}, a.id as number, a.removed_at is not null as removed, a.string_id as "stringId"
     from annotation a join person on person.id = a.created_by left join string s on s.id = a.string_id
     where a.site_id = :siteId and a.ref = :ref for update of a`,
    { siteId, ref },
  );
  const row = rows[0];
  return (
    row && { id: row.number, removed: row.removed, stringId: row.stringId, annotation: annotationOf(row) }
  );
}

/** Takes a note away (`personId`) or puts it back (null). */
export async function setAnnotationRemoved(
  tx: Tx,
  id: number,
  removed: { at: Date; personId: number } | null,
): Promise<void> {
  await tx.raw('update annotation set removed_at = :at, removed_by = :personId where id = :id', {
    id,
    at: removed?.at ?? null,
    personId: removed?.personId ?? null,
  });
}

/** Planned works at a site that concern a string within a time; epoch seconds. One that was taken back before it began is none. */
export async function worksOfString(
  tx: Tx,
  string: { id: number; siteId: number },
  { from, to }: { from: Date; to: Date },
): Promise<{ from: number; to: number; reason: string }[]> {
  const { rows } = await tx.raw<{ rows: { from: number; to: number; reason: string }[] }>(
    `select extract(epoch from starts_at)::float8 as "from", extract(epoch from ends_at)::float8 as "to", reason
     from planned_work
     where site_id = :siteId and starts_at < :to and ends_at > :from
       and (string_ids is null or string_ids @> array[:id::int4])
     order by starts_at`,
    { id: string.id, siteId: string.siteId, from, to },
  );
  return rows;
}

import type { CasePart, CheckOutcome } from '../../domain/cases/cases';
import type { CaseFigures } from '../../domain/cases/figures';
import {
  CASES_MAX,
  type CaseEntry,
  type CaseItem,
  type CasePage,
  type CasePhoto,
  type ChecklistMark,
  type ReportedCase,
} from '../../schemas/api/cases';
import type { EventItem } from '../../schemas/api/now';
import type { Tx } from '../db/transaction';
import { SITE_VISIBLE } from './visible-site';

/** Cases as they stand, of the sites that the actor sees. */

interface ItemRow extends Omit<CaseItem, 'openedAt' | 'changedAt' | 'closedAt' | 'openedBy'> {
  openedAt: Date;
  changedAt: Date;
  closedAt: Date | null;
  openedBy: string | null;
}

const ITEM = `c.ref as id, c.number, c.title, site.ref as "siteId", site.name as "siteName", site.time_zone as "timeZone",
  c.kind, c.origin, c.state,
  case when a.id is null then null else json_build_object('id', a.ref, 'name', a.name) end as assignee,
  c.due_on::text as "dueOn",
  coalesce(c.closed_at is null and c.due_on < (:at::timestamptz at time zone site.time_zone)::date, false) as overdue,
  c.opened_at as "openedAt", o.name as "openedBy", c.changed_at as "changedAt", c.closed_at as "closedAt",
  c.after ->> 'outcome' as outcome,
  coalesce((select json_agg(json_build_object('id', s.ref, 'name', s.name) order by s.name)
            from string s where s.id = any (c.string_ids)), '[]') as strings,
  jsonb_array_length(c.units) as units,
  (select count(*)::int from case_entry e where e.case_id = c.id and e.kind = 'comment') as comments,
  (select count(*)::int from attachment f where f.subject = 'case' and f.subject_ref = c.ref) as photos,
  (select count(*)::int from jsonb_array_elements(c.checklist) m where (m ->> 'done')::boolean) as checked,
  c.version`;
const FROM = `from case_file c join site on site.id = c.site_id
  left join person a on a.id = c.assignee_id left join person o on o.id = c.opened_by`;

const itemOf = (row: ItemRow): CaseItem => ({
  ...row,
  openedAt: row.openedAt.toISOString(),
  openedBy: row.openedBy ?? '',
  changedAt: row.changedAt.toISOString(),
  closedAt: row.closedAt?.toISOString() ?? null,
});

export interface CasesWanted {
  siteId?: number;
  stringId?: number;
  /** Closed ones before this many days are left out; null: none is. */
  closedDays: number | null;
}

/** Cases, newest change first; of one site or string where asked. */
export async function casesOf(tx: Tx, at: Date, wanted: CasesWanted): Promise<CaseItem[]> {
  const { rows } = await tx.raw<{ rows: ItemRow[] }>(
    `select ${ITEM} ${FROM}
     where ${SITE_VISIBLE}
       ${wanted.siteId === undefined ? '' : 'and c.site_id = :siteId'}
       ${wanted.stringId === undefined ? '' : 'and :stringId = any (c.string_ids)'}
       ${wanted.closedDays === null ? '' : `and (c.closed_at is null or c.closed_at >= :at::timestamptz - make_interval(days => :closedDays))`}
     order by c.changed_at desc, c.id desc limit :limit`,
    {
      at,
      limit: CASES_MAX,
      ...(wanted.siteId !== undefined && { siteId: wanted.siteId }),
      ...(wanted.stringId !== undefined && { stringId: wanted.stringId }),
      ...(wanted.closedDays !== null && { closedDays: wanted.closedDays }),
    },
  );
  return rows.map(itemOf);
}

export interface KeptCase {
  item: CaseItem;
  rowId: number;
  siteRowId: number;
  what: string;
  stringRefs: string[];
  parts: CasePart[];
  checklist: ChecklistMark[];
  before: CaseFigures | null;
  after: (CaseFigures & { outcome: CheckOutcome }) | null;
  checkedAt: string | null;
  cause: CasePage['case']['cause'];
  contact: CasePage['contact'];
}

export async function caseWithFigures(tx: Tx, ref: string, at: Date): Promise<KeptCase | undefined> {
  type Row = ItemRow &
    Omit<KeptCase, 'item' | 'checkedAt' | 'cause' | 'contact'> & {
      checkedAt: Date | null;
      causeRef: string | null;
      causeHeadline: string | null;
      causeClosedAt: Date | null;
      contactName: string;
      contactPhone: string;
    };
  const { rows } = await tx.raw<{ rows: Row[] }>(
    `select ${ITEM}, c.id as "rowId", c.site_id as "siteRowId", c.what, c.units as parts, c.checklist, c.before, c.after,
            c.checked_at as "checkedAt", cause.ref as "causeRef", cause.headline as "causeHeadline",
            cause.closed_at as "causeClosedAt", site.contact_name as "contactName", site.contact_phone as "contactPhone",
            coalesce((select array_agg(s.ref::text) from string s where s.id = any (c.string_ids)), '{}') as "stringRefs"
     ${FROM} left join cause on cause.id = c.cause_id
     where c.ref = :ref and ${SITE_VISIBLE}`,
    { ref, at },
  );
  const row = rows[0];
  if (!row) return undefined;
  const { rowId, siteRowId, what, stringRefs, parts, checklist, before, after, checkedAt, ...rest } = row;
  const { causeRef, causeHeadline, causeClosedAt, contactName, contactPhone, ...item } = rest;
  return {
    item: itemOf({ ...item, units: parts.length }),
    rowId,
    siteRowId,
    what,
    stringRefs,
    parts,
    checklist,
    before,
    after,
    checkedAt: checkedAt?.toISOString() ?? null,
    cause: causeRef ? { id: causeRef, headline: causeHeadline ?? '', open: causeClosedAt === null } : null,
    contact: { name: contactName, phone: contactPhone },
  };
}

/** Who opened a case of this identifier, and where; also where the actor may not see it: then it is taken. */
export async function caseByRef(
  tx: Tx,
  ref: string,
): Promise<{ ref: string; number: number; siteRef: string; openedById: number | null } | undefined> {
  const { rows } = await tx.raw<{
    rows: { ref: string; number: number; siteRef: string; openedById: number | null }[];
  }>(
    `select c.ref, c.number, site.ref as "siteRef", c.opened_by as "openedById"
     from case_file c join site on site.id = c.site_id where c.ref = :ref and ${SITE_VISIBLE}`,
    { ref },
  );
  return rows[0];
}

/** The history of a case, oldest first. */
export async function entriesOf(tx: Tx, caseRowId: number): Promise<CaseEntry[]> {
  const { rows } = await tx.raw<{ rows: (Omit<CaseEntry, 'at'> & { at: Date })[] }>(
    `select e.ref as id, e.at, p.name as person, e.kind, e.body, e.detail,
            coalesce((select json_agg(m.name order by m.name) from person m where m.id = any (e.mentions)), '[]') as mentions
     from case_entry e left join person p on p.id = e.person_id where e.case_id = ? order by e.id`,
    [caseRowId],
  );
  return rows.map((r) => ({ ...r, at: r.at.toISOString() }));
}

/** The photos of a case, oldest first. */
export async function photosOf(tx: Tx, caseRef: string): Promise<CasePhoto[]> {
  const { rows } = await tx.raw<{ rows: (Omit<CasePhoto, 'at'> & { at: Date })[] }>(
    `select a.ref as id, a.name, a.note, coalesce(p.name, '') as person, a.at
     from attachment a join site on site.id = a.site_id left join person p on p.id = a.person_id
     where a.subject = 'case' and a.subject_ref = ? and ${SITE_VISIBLE} order by a.at, a.id`,
    [caseRef],
  );
  return rows.map((r) => ({ ...r, at: r.at.toISOString() }));
}

/** Strings of a site with how many slots each has, by name. */
export async function stringChoices(
  tx: Tx,
  siteId: number,
): Promise<{ id: string; name: string; units: number }[]> {
  const { rows } = await tx.raw<{ rows: { id: string; name: string; units: number }[] }>(
    `select ref as id, name, slots::int as units from string where site_id = ?`,
    [siteId],
  );
  const byName = new Intl.Collator('en', { numeric: true });
  return rows.sort((a, b) => byName.compare(a.name, b.name));
}

/** The site of a string, where the actor may see it. */
export async function siteOfString(tx: Tx, ref: string): Promise<{ site: string; name: string } | undefined> {
  const { rows } = await tx.raw<{ rows: { site: string; name: string }[] }>(
    `select site.ref as site, s.name from string s join site on site.id = s.site_id
     where s.ref = :ref and ${SITE_VISIBLE}`,
    { ref },
  );
  return rows[0];
}

/** What a person reported at a site: the own words and how it stands, newest first. */
export async function reportedBy(tx: Tx, siteId: number, personId: number): Promise<ReportedCase[]> {
  const { rows } = await tx.raw<{
    rows: (Omit<ReportedCase, 'at' | 'closedAt'> & { at: Date; closedAt: Date | null })[];
  }>(
    `select c.ref as id, c.number, c.what, c.state, c.opened_at as at, c.closed_at as "closedAt"
     from case_file c join site on site.id = c.site_id
     where c.site_id = :siteId and c.opened_by = :personId and c.origin = 'customer' and ${SITE_VISIBLE}
     order by c.id desc limit 50`,
    { siteId, personId },
  );
  return rows.map((r) => ({ ...r, at: r.at.toISOString(), closedAt: r.closedAt?.toISOString() ?? null }));
}

/**
 * Events of the strings of a case and those of the whole site, newest first; what another supersedes is left out, and
 * what happened to other cases.
 */
export async function eventsOfCase(
  tx: Tx,
  wanted: { ref: string; siteId: number; strings: readonly string[]; from: Date; to: Date; limit: number },
): Promise<EventItem[]> {
  const { rows } = await tx.raw<{
    rows: (Omit<EventItem, 'at' | 'recordedAt'> & { at: Date; recordedAt: Date })[];
  }>(
    `select e.id::text as id, e.at, e.recorded_at as "recordedAt", site.ref as "siteId", site.name as "siteName",
            s.ref as "stringId", s.name as "stringName", e.kind, e.detail
     from event e join site on site.id = e.site_id left join string s on s.id = e.string_id
     where e.site_id = :siteId and ${SITE_VISIBLE} and e.at >= :from and e.at <= :to
       and (e.string_id is null or s.ref = any (cast(:strings as uuid[])) or cardinality(cast(:strings as uuid[])) = 0)
       and (e.detail ->> 'case' is null or e.detail ->> 'case' = :ref)
       and not exists (select from event newer where newer.supersedes = e.id)
     order by e.at desc, e.id desc limit :limit`,
    { ...wanted, strings: [...wanted.strings] },
  );
  return rows.map((r) => ({ ...r, at: r.at.toISOString(), recordedAt: r.recordedAt.toISOString() }));
}

import type { CaseKind, CaseOrigin, CasePart, CaseState, CheckOutcome } from '../../domain/cases/cases';
import type { CaseFigures } from '../../domain/cases/figures';
import type { EventKind } from '../../domain/verdicts/codes';
import type { CaseEntryKind, ChecklistMark } from '../../schemas/api/cases';
import type { Tx } from '../db/transaction';
import { SITE_VISIBLE } from './visible-site';

/** What is written of cases. A row of `case_entry` is never changed; `case_file` holds what stands now. */

export interface StringOfSite {
  id: number;
  ref: string;
  name: string;
  /** Serials by position; null: no unit there. */
  slots: Map<number, string | null>;
}

/** Strings of a site by their public identifiers, with what sits where; what is not of the site is missing. */
export async function stringsByRef(
  tx: Tx,
  siteId: number,
  refs: readonly string[],
): Promise<Map<string, StringOfSite>> {
  const { rows } = await tx.raw<{
    rows: { id: number; ref: string; name: string; positions: number[]; serials: (string | null)[] }[];
  }>(
    `select s.id, s.ref, s.name,
            coalesce(array_agg(sl.position::int4 order by sl.position) filter (where sl.id is not null), '{}') as positions,
            coalesce(array_agg(u.serial order by sl.position) filter (where sl.id is not null), '{}') as serials
     from string s
     left join slot sl on sl.string_id = s.id
     left join placement p on p.slot_id = sl.id and p.placed_to is null
     left join unit u on u.id = p.unit_id
     where s.site_id = :siteId and s.ref = any (cast(:refs as uuid[]))
     group by s.id`,
    { siteId, refs: [...refs] },
  );
  return new Map(
    rows.map(({ positions, serials, ...s }) => [
      s.ref,
      { ...s, slots: new Map(positions.map((at, i) => [at, serials[i] ?? null])) },
    ]),
  );
}

export interface StaffPerson {
  id: number;
  ref: string;
  name: string;
}

/** Who may be given a case or be mentioned: staff of the organisation who may sign in, by name. */
export async function staffOf(tx: Tx): Promise<StaffPerson[]> {
  const { rows } = await tx.raw<{ rows: StaffPerson[] }>(
    `select id, ref, name from person
     where organisation_id = (select actor_organisation()) and active and role <> 'customer' order by name, id`,
  );
  return rows;
}

export interface CauseOfCase {
  id: number;
  ref: string;
  siteId: number;
  kind: string;
  headline: string;
  evidence: string;
  alternatives: string[];
  units: CasePart[];
  siteRef: string;
  /** Public identifiers of its strings. */
  strings: string[];
}

export async function causeForCase(tx: Tx, ref: string): Promise<CauseOfCase | undefined> {
  const { rows } = await tx.raw<{ rows: CauseOfCase[] }>(
    `select c.id::int4 as id, c.ref, c.site_id as "siteId", c.kind, c.headline, c.evidence, c.alternatives, c.units,
            site.ref as "siteRef",
            coalesce((select array_agg(s.ref::text) from string s where s.id = any (c.string_ids)), '{}') as strings
     from cause c join site on site.id = c.site_id where c.ref = :ref and ${SITE_VISIBLE}`,
    { ref },
  );
  return rows[0];
}

export interface OpenCaseOfCause {
  ref: string;
  number: number;
  title: string;
}

/** The case of a cause that is not closed: one cause makes one case. Waits for whoever opens one just now. */
export async function openCaseOfCause(tx: Tx, causeId: number): Promise<OpenCaseOfCause | undefined> {
  await tx.raw('select pg_advisory_xact_lock(727021, :causeId::int4)', { causeId });
  const { rows } = await tx.raw<{ rows: OpenCaseOfCause[] }>(
    `select ref, number, title from case_file where cause_id = :causeId and closed_at is null order by id limit 1`,
    { causeId },
  );
  return rows[0];
}

export interface NewCase {
  ref: string;
  siteId: number;
  organisationId: number;
  title: string;
  what: string;
  kind: CaseKind;
  origin: CaseOrigin;
  causeId: number | null;
  stringIds: number[];
  parts: CasePart[];
  assigneeId: number | null;
  dueOn: string | null;
  openedBy: number;
  at: Date;
  before: CaseFigures;
}

/** @returns its number and row; undefined where its identifier is taken */
export async function insertCase(
  tx: Tx,
  entry: NewCase,
): Promise<{ id: number; number: number } | undefined> {
  const { rows } = await tx.raw<{ rows: { id: number; number: number }[] }>(
    `insert into case_file (ref, site_id, number, organisation_id, title, what, kind, origin, cause_id, string_ids, units,
       assignee_id, due_on, opened_by, opened_at, changed_at, before)
     values (:ref, :siteId, next_case_number(:organisationId), :organisationId, :title, :what, :kind, :origin, :causeId,
       :stringIds, :parts::jsonb, :assigneeId, cast(:dueOn as date), :openedBy, :at, :at, :before::jsonb)
     on conflict (ref) do nothing returning id, number`,
    { ...entry, parts: JSON.stringify(entry.parts), before: JSON.stringify(entry.before) },
  );
  return rows[0];
}

export interface NewEntry {
  ref?: string;
  caseId: number;
  siteId: number;
  at: Date;
  personId: number | null;
  kind: CaseEntryKind;
  body?: string;
  mentions?: readonly number[];
  detail?: Record<string, unknown>;
}

/** Adds to a case's history. @returns false where the identifier is taken: it was sent twice */
export async function addCaseEntry(tx: Tx, entry: NewEntry): Promise<boolean> {
  const { rows } = await tx.raw<{ rows: { id: string }[] }>(
    `insert into case_entry (ref, case_id, site_id, at, person_id, kind, body, mentions, detail)
     values (coalesce(cast(:ref as uuid), gen_random_uuid()), :caseId, :siteId, :at, :personId, :kind, :body, :mentions,
       :detail::jsonb)
     on conflict (ref) do nothing returning id`,
    {
      ref: entry.ref ?? null,
      caseId: entry.caseId,
      siteId: entry.siteId,
      at: entry.at,
      personId: entry.personId,
      kind: entry.kind,
      body: entry.body ?? '',
      mentions: [...(entry.mentions ?? [])],
      detail: JSON.stringify(entry.detail ?? {}),
    },
  );
  return rows.length > 0;
}

export type CaseEventKind = Extract<EventKind, `case_${string}`>;

/** What happened to a case, as everything else that happens at a site. */
export async function addCaseEvent(
  tx: Tx,
  event: {
    organisationId: number;
    siteId: number;
    stringIds: readonly number[];
    at: Date;
    kind: CaseEventKind;
    detail: { case: string; number: number; title: string } & Record<string, unknown>;
  },
): Promise<void> {
  await tx('event').insert({
    at: event.at,
    organisation_id: event.organisationId,
    site_id: event.siteId,
    string_id: event.stringIds.length === 1 ? event.stringIds[0] : null,
    kind: event.kind,
    detail: JSON.stringify(event.detail),
  });
}

export interface LockedCase {
  id: number;
  ref: string;
  number: number;
  organisationId: number;
  siteId: number;
  timeZone: string;
  title: string;
  what: string;
  kind: CaseKind;
  state: CaseState;
  assigneeId: number | null;
  dueOn: string | null;
  stringIds: number[];
  parts: CasePart[];
  checklist: ChecklistMark[];
  version: number;
  openedBy: number | null;
}

/** The case, held until the transaction ends: two people who change it come one after the other. */
export async function lockCase(tx: Tx, ref: string): Promise<LockedCase | undefined> {
  const { rows } = await tx.raw<{ rows: LockedCase[] }>(
    `select c.id, c.ref, c.number, c.organisation_id as "organisationId", c.site_id as "siteId",
            site.time_zone as "timeZone", c.title, c.what, c.kind, c.state, c.assignee_id as "assigneeId",
            c.due_on::text as "dueOn", c.string_ids as "stringIds", c.units as parts, c.checklist, c.version,
            c.opened_by as "openedBy"
     from case_file c join site on site.id = c.site_id
     where c.ref = :ref and ${SITE_VISIBLE} for update of c`,
    { ref },
  );
  return rows[0];
}

export interface CaseChange {
  title?: string;
  what?: string;
  kind?: CaseKind;
  state?: CaseState;
  assigneeId?: number | null;
  dueOn?: string | null;
  stringIds?: number[];
  parts?: CasePart[];
  checklist?: ChecklistMark[];
  closed?: { at: Date; by: number } | null;
}

const COLUMNS: Record<Exclude<keyof CaseChange, 'closed'>, string> = {
  title: 'title',
  what: 'what',
  kind: 'kind',
  state: 'state',
  assigneeId: 'assignee_id',
  dueOn: 'due_on',
  stringIds: 'string_ids',
  parts: 'units',
  checklist: 'checklist',
};
const AS_JSON = new Set(['parts', 'checklist']);

/** Writes what a person changed; `counts` says whether it makes a new version that others must have seen. */
export async function updateCase(
  tx: Tx,
  id: number,
  change: CaseChange,
  at: Date,
  counts = true,
): Promise<void> {
  const { closed, ...facts } = change;
  const columns: Record<string, unknown> = { changed_at: at };
  for (const [key, value] of Object.entries(facts))
    columns[COLUMNS[key as keyof typeof COLUMNS]] = AS_JSON.has(key) ? JSON.stringify(value) : value;
  if (closed !== undefined)
    Object.assign(
      columns,
      closed
        ? { closed_at: closed.at, closed_by: closed.by, after: null, checked_at: null }
        : { closed_at: null, closed_by: null },
    );
  if (counts) columns.version = tx.raw('version + 1');
  await tx('case_file').where({ id }).update(columns);
}

/** Keeps what was found again after closing; with `reopen` the case is open again. */
export async function writeCheck(
  tx: Tx,
  id: number,
  check: { at: Date; after: CaseFigures & { outcome: CheckOutcome }; reopen: boolean },
): Promise<void> {
  await tx('case_file')
    .where({ id })
    .update({
      after: JSON.stringify(check.after),
      checked_at: check.at,
      changed_at: check.at,
      ...(check.reopen
        ? { state: 'open', closed_at: null, closed_by: null, version: tx.raw('version + 1') }
        : {}),
    });
}

/** Names of strings by public identifier, in the order of their names. */
export async function stringNames(tx: Tx, ids: readonly number[]): Promise<Map<string, string>> {
  const { rows } = await tx.raw<{ rows: { ref: string; name: string }[] }>(
    `select ref, name from string where id = any (?) order by name`,
    [[...ids]],
  );
  return new Map(rows.map((r) => [r.ref, r.name]));
}

import type { Role } from '../../domain/access/permissions';
import type { NoticeEvent } from '../../domain/notices/event';
import type { How } from '../../domain/notices/kinds';
import type { SubjectState } from '../../domain/notices/subject';
import type { EventKind } from '../../domain/verdicts/codes';
import type { Tx } from '../db/transaction';
import { EVENT_HORIZON } from './horizon';

/** What the teller reads and writes: events by its cursor, what is told of what lasts, notices. Runs as ingest. */

export interface Cursor {
  xid: string;
  id: string;
}

/** So many transactions behind, a reader catches up though there was nothing for it to read. */
const LAG_MAX = 20_000;

/** Whether there may be work for the reader: asked often, so it takes no lock and writes nothing. */
export async function somethingToTell(
  tx: Tx,
  reader: string,
  kinds: readonly EventKind[],
  now: Date,
): Promise<{ told: boolean; lags: boolean }> {
  const { rows } = await tx.raw<{ rows: { told: boolean; lags: boolean }[] }>(
    `select exists (select from event e where (e.xid, e.id) > (r.xid, r.id) and e.kind = any (:kinds::text[]))
              or exists (select from notice_subject where due_at <= :now) as told,
            (${EVENT_HORIZON}::text::numeric - r.xid::text::numeric) > :lag as lags
     from event_reader r where r.reader = :reader`,
    { reader, kinds: [...kinds], now, lag: LAG_MAX },
  );
  return rows[0] ?? { told: false, lags: false };
}

/** How far this reader has come; undefined while another process reads. Held until the transaction ends. */
export async function lockReader(tx: Tx, reader: string): Promise<Cursor | undefined> {
  const { rows } = await tx.raw<{ rows: Cursor[] }>(
    `select xid::text, id::text from event_reader where reader = ? for update skip locked`,
    [reader],
  );
  return rows[0];
}

export async function moveReader(tx: Tx, reader: string, to: Cursor): Promise<void> {
  await tx.raw('update event_reader set xid = ?::text::xid8, id = ? where reader = ?', [
    to.xid,
    to.id,
    reader,
  ]);
}

export interface TellEvent extends NoticeEvent {
  xid: string;
  organisationId: number;
  stringRef: string | null;
  stringName: string | null;
  site: {
    id: number;
    ref: string;
    name: string;
    place: string;
    timeZone: string;
    contactName: string;
    contactPhone: string;
    switchPlace: string;
  };
}
interface EventRow extends Omit<TellEvent, 'site' | 'id'> {
  id: number;
  siteRef: string;
  siteName: string;
  place: string;
  timeZone: string;
  contactName: string;
  contactPhone: string;
  switchPlace: string;
}
const EVENT = `select e.id, e.xid::text as xid, e.kind, e.at, e.recorded_at as "recordedAt", e.detail,
    e.organisation_id as "organisationId", e.site_id as "siteId", string.ref as "stringRef", string.name as "stringName",
    site.ref as "siteRef", site.name as "siteName", site.place, site.time_zone as "timeZone",
    site.contact_name as "contactName", site.contact_phone as "contactPhone",
    site.shutdown_switch_place as "switchPlace"
  from event e join site on site.id = e.site_id left join string on string.id = e.string_id`;
const toEvent = (row: EventRow): TellEvent => {
  const { siteRef, siteName, place, timeZone, contactName, contactPhone, switchPlace, ...event } = row;
  return {
    ...event,
    site: {
      id: event.siteId,
      ref: siteRef,
      name: siteName,
      place,
      timeZone,
      contactName,
      contactPhone,
      switchPlace,
    },
  };
};

/** Events after the cursor whose transactions are below `below`, in the order of the cursor. */
export async function eventsAfter(
  tx: Tx,
  after: Cursor,
  below: string,
  kinds: readonly EventKind[],
  limit: number,
): Promise<TellEvent[]> {
  const { rows } = await tx.raw<{ rows: EventRow[] }>(
    `${EVENT} where (e.xid, e.id) > (:xid::text::xid8, :id::int8) and e.xid < :below::text::xid8
       and e.kind = any (:kinds::text[])
     order by e.xid, e.id limit :limit`,
    { ...after, below, kinds: [...kinds], limit },
  );
  return rows.map(toEvent);
}

/** Whether events are committed that wait for a running transaction. */
export async function waitsBeyond(tx: Tx, below: string, kinds: readonly EventKind[]): Promise<boolean> {
  const { rows } = await tx.raw<{ rows: { waits: boolean }[] }>(
    `select exists (select from event where xid >= ?::text::xid8 and kind = any (?::text[])) as waits`,
    [below, [...kinds]],
  );
  return rows[0]?.waits ?? false;
}

/** Hazards that are committed but wait for a running transaction: they are told ahead of their turn. */
export async function hazardsAhead(tx: Tx, after: Cursor): Promise<TellEvent[]> {
  const { rows } = await tx.raw<{ rows: EventRow[] }>(
    `${EVENT} where e.xid >= :xid::text::xid8 and e.kind in ('cause_opened', 'cause_reopened')
       and e.detail @> '{"hazard": true}' order by e.id limit 200`,
    { xid: after.xid },
  );
  return rows.map(toEvent);
}

export async function eventsById(tx: Tx, ids: readonly number[]): Promise<Map<number, TellEvent>> {
  if (ids.length === 0) return new Map();
  const { rows } = await tx.raw<{ rows: EventRow[] }>(`${EVENT} where e.id = any (?::int8[])`, [[...ids]]);
  return new Map(rows.map((row) => [row.id, toEvent(row)]));
}

interface SubjectRow {
  subject: string;
  toldAt: Date | null;
  came: number;
  seenEvent: number;
  waitingEvent: number | null;
  dueAt: Date | null;
}
const SUBJECT = `select subject, told_at as "toldAt", came, seen_event as "seenEvent",
    waiting_event as "waitingEvent", due_at as "dueAt" from notice_subject`;
const toState = (row: SubjectRow): SubjectState => ({
  toldAt: row.toldAt,
  came: row.came,
  seenEvent: row.seenEvent,
  waiting: row.waitingEvent !== null && row.dueAt ? { event: row.waitingEvent, dueAt: row.dueAt } : null,
});

export async function subjectStates(tx: Tx, subjects: readonly string[]): Promise<Map<string, SubjectState>> {
  const { rows } = await tx.raw<{ rows: SubjectRow[] }>(`${SUBJECT} where subject = any (?::text[])`, [
    [...subjects],
  ]);
  return new Map(rows.map((row) => [row.subject, toState(row)]));
}

/** What waited long enough. */
export async function dueSubjects(tx: Tx, now: Date): Promise<{ subject: string; state: SubjectState }[]> {
  const { rows } = await tx.raw<{ rows: SubjectRow[] }>(
    `${SUBJECT} where due_at <= ? order by due_at limit 500`,
    [now],
  );
  return rows.map((row) => ({ subject: row.subject, state: toState(row) }));
}

export async function saveSubject(
  tx: Tx,
  of: { subject: string; organisationId: number; siteId: number },
  state: SubjectState,
): Promise<void> {
  await tx.raw(
    `insert into notice_subject (subject, organisation_id, site_id, told_at, came, seen_event, waiting_event, due_at)
     values (:subject, :organisationId, :siteId, :toldAt, :came, :seenEvent, :waitingEvent, :dueAt)
     on conflict (subject) do update set told_at = excluded.told_at, came = excluded.came,
       seen_event = excluded.seen_event, waiting_event = excluded.waiting_event, due_at = excluded.due_at`,
    {
      ...of,
      toldAt: state.toldAt,
      came: state.came,
      seenEvent: state.seenEvent,
      waitingEvent: state.waiting?.event ?? null,
      dueAt: state.waiting?.dueAt ?? null,
    },
  );
}

export interface CauseFacts {
  ref: string;
  kind: string;
  headline: string;
  evidence: string;
  alternatives: string[];
  units: { stringName: string; position: number | null }[];
  stringIds: number[];
  sharedPart: { kind: string; name: string } | null;
  since: Date;
  closedAt: Date | null;
  lossWhDay: number | null;
  acknowledgedBy: string | null;
}

export async function causesByRef(tx: Tx, refs: readonly string[]): Promise<Map<string, CauseFacts>> {
  if (refs.length === 0) return new Map();
  const { rows } = await tx.raw<{ rows: CauseFacts[] }>(
    `select c.ref, c.kind, c.headline, c.evidence, c.alternatives, c.units, c.string_ids as "stringIds",
            c.shared_part as "sharedPart", c.since, c.closed_at as "closedAt", c.loss_wh_day as "lossWhDay",
            p.name as "acknowledgedBy"
     from cause c left join person p on p.id = c.acknowledged_by
     where c.ref::text = any (?::text[])`,
    [[...refs]],
  );
  return new Map(rows.map((row) => [row.ref, row]));
}

/** Who opened these cases, by the case's identifier. */
export async function openersOf(tx: Tx, caseRefs: readonly string[]): Promise<Map<string, number>> {
  if (caseRefs.length === 0) return new Map();
  const { rows } = await tx.raw<{ rows: { ref: string; openedBy: number }[] }>(
    `select ref, opened_by as "openedBy" from case_file where ref::text = any (?::text[]) and opened_by is not null`,
    [[...caseRefs]],
  );
  return new Map(rows.map((row) => [row.ref, row.openedBy]));
}

/** Whether a logger is without a connection now. */
export async function loggerGone(tx: Tx, siteId: number, serial: string): Promise<boolean> {
  const { rows } = await tx.raw<{ rows: unknown[] }>(
    'select from logger where site_id = ? and serial = ? and connected_at is null',
    [siteId, serial],
  );
  return rows.length > 0;
}

/** Whether an open cause says already what a silent gateway means. */
export async function gatewayExplained(tx: Tx, siteId: number, gateway: string): Promise<boolean> {
  const { rows } = await tx.raw<{ rows: unknown[] }>(
    `select from cause where site_id = ? and closed_at is null
       and shared_part ->> 'kind' = 'gateway' and shared_part ->> 'name' = ?`,
    [siteId, gateway],
  );
  return rows.length > 0;
}

export interface RecipientRow {
  personId: number;
  organisationId: number;
  organisationName: string;
  organisationPhone: string | null;
  ref: string;
  name: string;
  email: string;
  role: Role;
  timeZone: string;
  sites: number[];
  rules: Partial<Record<string, How>>;
  chosenSites: number[] | null;
  digestAt: number;
  quietFrom: number | null;
  quietTo: number | null;
  /** Signs the way out of letters. */
  key: Buffer;
}

/** Everybody of these organisations who can sign in, or these persons; each has a row of choices from now on. */
export async function recipients(
  tx: Tx,
  which: { organisationIds: readonly number[] } | { personIds: readonly number[] },
): Promise<RecipientRow[]> {
  const by = 'personIds' in which ? 'p.id' : 'p.organisation_id';
  const ids = 'personIds' in which ? which.personIds : which.organisationIds;
  if (ids.length === 0) return [];
  await tx.raw(
    `insert into notice_choice (person_id, organisation_id)
     select p.id, p.organisation_id from person p where p.active and ${by} = any (?::int4[])
       and not exists (select from notice_choice c where c.person_id = p.id)
     on conflict do nothing`,
    [[...ids]],
  );
  const { rows } = await tx.raw<{ rows: RecipientRow[] }>(
    `select p.id as "personId", p.organisation_id as "organisationId", o.name as "organisationName",
            o.phone as "organisationPhone", p.ref, p.name, p.email, p.role,
            coalesce(p.time_zone, o.time_zone) as "timeZone",
            coalesce((select array_agg(site_id) from site_access a where a.person_id = p.id), '{}') as sites,
            c.rules, c.site_ids as "chosenSites", c.digest_at as "digestAt", c.quiet_from as "quietFrom",
            c.quiet_to as "quietTo", c.key
     from person p join organisation o on o.id = p.organisation_id join notice_choice c on c.person_id = p.id
     where p.active and ${by} = any (?::int4[]) order by p.id`,
    [[...ids]],
  );
  return rows;
}

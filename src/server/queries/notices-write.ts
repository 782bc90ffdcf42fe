import type { NoticeKind } from '../../domain/notices/kinds';
import type { Tx } from '../db/transaction';
import { CHANNELS } from './live-notices';

/** Notices as the teller writes them. Runs as ingest. */

export interface NewNotice {
  organisationId: number;
  personId: number;
  siteId: number | null;
  eventKey: string;
  eventId: number | null;
  kind: NoticeKind;
  subject: string | null;
  headline: string;
  body: string;
  href: string;
  hazard: boolean;
  createdAt: Date;
  /** When a letter that gathers several is written; null: none of those. */
  letterDue: Date | null;
}

/** @returns whether it is new: one notice a person and event */
export async function addNotice(tx: Tx, notice: NewNotice): Promise<boolean> {
  const { rows } = await tx.raw<{ rows: unknown[] }>(
    `insert into notice (organisation_id, person_id, site_id, event_key, event_id, kind, subject, headline, body, href,
       hazard, created_at, letter_due)
     values (:organisationId, :personId, :siteId, :eventKey, :eventId, :kind, :subject, :headline, :body, :href,
       :hazard, :createdAt, :letterDue)
     on conflict (person_id, event_key) do nothing returning id`,
    { ...notice },
  );
  return rows.length > 0;
}

/** The lines that told of it say how often it came back, and who has read them sees them anew. */
export async function markCameBack(tx: Tx, subject: string, came: number): Promise<number[]> {
  const { rows } = await tx.raw<{ rows: { personId: number }[] }>(
    `update notice set came = ? where subject = ? and over_at is null returning person_id as "personId"`,
    [came, subject],
  );
  return rows.map((r) => r.personId);
}

/** The lines that told of it: it is over. */
export async function markOver(tx: Tx, subject: string, at: Date): Promise<void> {
  await tx.raw('update notice set over_at = ? where subject = ? and over_at is null', [at, subject]);
}

/** Wakes the pages of these persons. */
export async function tellNoticed(tx: Tx, personIds: Iterable<number>): Promise<void> {
  const ids = [...new Set(personIds)];
  for (let i = 0; i < ids.length; i += 600)
    await tx.raw('select pg_notify(?, ?)', [CHANNELS.noticed, JSON.stringify(ids.slice(i, i + 600))]);
}

export interface GatheredLine {
  id: string;
  kind: NoticeKind;
  siteId: number | null;
  siteName: string | null;
  timeZone: string | null;
  subject: string | null;
  headline: string;
  body: string;
  href: string;
  came: number;
  over: boolean;
  createdAt: Date;
  causeKind: string | null;
  sharedPart: { kind: string; name: string } | null;
  units: { stringName: string; position: number | null }[] | null;
  stringIds: number[] | null;
  lossWhDay: number | null;
  /** Per kWh, as entered for the site; null: no price. */
  price: number | null;
  currency: string | null;
}

/** The space of our advisory locks by person. */
const GATHERED_LOCK = 7_001;

/** A person whose gathered letter is due, with its lines; held until the transaction ends. */
export async function dueLetters(
  tx: Tx,
  now: Date,
): Promise<{ personId: number; lines: GatheredLine[] } | undefined> {
  // one process a person: locked by number, since lines locked one after the other by two would wait for each other
  const { rows: first } = await tx.raw<{ rows: { personId: number }[] }>(
    `select due.person_id as "personId" from (
       select distinct person_id from notice where letter_due <= ? and lettered_at is null order by 1 limit 100) due
     where pg_try_advisory_xact_lock(${GATHERED_LOCK}, due.person_id) limit 1`,
    [now],
  );
  const personId = first[0]?.personId;
  if (personId === undefined) return undefined;
  const { rows: lines } = await tx.raw<{ rows: GatheredLine[] }>(
    `select n.id, n.kind, n.site_id as "siteId", site.name as "siteName", site.time_zone as "timeZone", n.subject,
            n.headline, n.body, n.href, n.came, (n.over_at is not null or c.closed_at is not null) as over,
            n.created_at as "createdAt", c.kind as "causeKind", c.shared_part as "sharedPart", c.units,
            c.string_ids as "stringIds", c.loss_wh_day as "lossWhDay", o.currency,
            (select price_kwh::float8 from tariff t where t.site_id = n.site_id and t.from_on <= current_date
             order by from_on desc limit 1) as price
     from notice n
     join organisation o on o.id = n.organisation_id
     left join site on site.id = n.site_id
     left join cause c on n.subject = 'cause:' || c.ref
     where n.person_id = :personId and n.lettered_at is null and n.letter_due <= :now
     order by n.id`,
    { personId, now },
  );
  return { personId, lines };
}

export async function markLettered(tx: Tx, ids: readonly string[], at: Date): Promise<void> {
  await tx.raw('update notice set lettered_at = ? where id = any (?::int8[])', [at, [...ids]]);
}

import type { EventKind } from '../../domain/verdicts/codes';
import type { Acknowledgement, MissedItem, SiteContact } from '../../schemas/api/fleet';
import type { CauseNow } from '../../schemas/api/now';
import type { Tx } from '../db/transaction';
import { SITE_VISIBLE } from './visible-site';

/** Whom to call at each of the sites, by their numbers or public identifiers, as far as the actor sees them. */
export async function contactsOf(tx: Tx, sites: readonly (number | string)[]): Promise<SiteContact[]> {
  if (sites.length === 0) return [];
  const { rows } = await tx.raw<{ rows: SiteContact[] }>(
    `select site.ref as "siteId", site.contact_name as name, site.contact_phone as phone,
            site.shutdown_switch_place as "shutdownSwitchPlace"
     from site where ${SITE_VISIBLE} and (site.id = any (:numbers) or site.ref = any (:refs::uuid[]))
     order by site.name`,
    {
      numbers: sites.filter((s) => typeof s === 'number'),
      refs: sites.filter((s) => typeof s === 'string'),
    },
  );
  return rows;
}

/**
 * Who has taken each cause on. It counts only for what was there then: a unit that joined the cause afterwards, or a
 * cause that came back, asks anew.
 */
export async function acknowledgementsOf(
  tx: Tx,
  causes: readonly Pick<CauseNow, 'key' | 'siteId' | 'since' | 'units'>[],
): Promise<Acknowledgement[]> {
  if (causes.length === 0) return [];
  const { rows } = await tx.raw<{ rows: { key: string; siteId: string; at: Date; person: string }[] }>(
    `select distinct on (e.detail ->> 'key') e.detail ->> 'key' as key, site.ref as "siteId", e.at,
            e.detail ->> 'person' as person
     from event e join site on site.id = e.site_id
     where e.kind = 'hazard_acknowledged' and e.detail ->> 'key' = any (:keys) and ${SITE_VISIBLE}
     order by e.detail ->> 'key', e.at desc`,
    { keys: causes.map((c) => c.key) },
  );
  const newest = new Map(
    causes.map((c) => [c.key, [c.since, ...c.units.map((u) => u.since)].sort().at(-1) ?? c.since]),
  );
  const said = rows
    .map((r) => ({ ...r, at: r.at.toISOString() }))
    .filter((r) => r.at >= (newest.get(r.key) ?? ''));
  const known = new Set(said.map((r) => r.key));
  return [
    ...said,
    ...(await takenOnApart(
      tx,
      causes.filter((c) => !known.has(c.key)),
    )),
  ];
}

/** Units that stand alone are one entry here and a row each on record: all rows taken on, the entry is. */
async function takenOnApart(
  tx: Tx,
  causes: readonly Pick<CauseNow, 'key' | 'siteId' | 'units'>[],
): Promise<Acknowledgement[]> {
  if (causes.length === 0) return [];
  const { rows } = await tx.raw<{
    rows: {
      siteId: string;
      at: Date;
      person: string;
      units: { stringId: string; position: number | null }[];
    }[];
  }>(
    `select site.ref as "siteId", c.acknowledged_at as at, p.name as person, c.units
     from cause c join site on site.id = c.site_id join person p on p.id = c.acknowledged_by
     where c.hazard and c.closed_at is null and c.acknowledged_at is not null and site.ref::text = any (:sites) and ${SITE_VISIBLE}
     order by c.acknowledged_at`,
    { sites: [...new Set(causes.map((c) => c.siteId))] },
  );
  const unitKey = (u: { stringId: string; position: number | null }): string =>
    `${u.stringId} ${u.position ?? ''}`;
  return causes.flatMap((c) => {
    const here = rows.filter((r) => r.siteId === c.siteId);
    const taken = new Set(here.flatMap((r) => r.units.map(unitKey)));
    const last = here.at(-1);
    return last && c.units.length > 0 && c.units.every((u) => taken.has(unitKey(u)))
      ? [{ key: c.key, siteId: c.siteId, at: last.at.toISOString(), person: last.person }]
      : [];
  });
}

export async function addAcknowledgement(
  tx: Tx,
  entry: { siteId: number; at: Date; key: string; headline: string; person: string },
): Promise<void> {
  await tx.raw(
    `insert into event (at, organisation_id, site_id, kind, detail)
     select :at, site.organisation_id, site.id, 'hazard_acknowledged', :detail::jsonb
     from site where site.id = :siteId and ${SITE_VISIBLE}`,
    {
      at: entry.at,
      siteId: entry.siteId,
      detail: JSON.stringify({ key: entry.key, headline: entry.headline, person: entry.person }),
    },
  );
}

/** A pause this long ends a visit, seconds. */
export const VISIT_PAUSE_S = 30 * 60;

/**
 * Notes that a person looks at the fleet now.
 * @returns when the visit before this one ended; null on the first
 */
export async function noteLook(tx: Tx, personId: number, at: Date): Promise<Date | null> {
  const { rows } = await tx.raw<{ rows: { before: Date | null }[] }>(
    `update person
     set fleet_looked_before_at =
           case when fleet_looked_at < :at::timestamptz - make_interval(secs => :pause) then fleet_looked_at
                else fleet_looked_before_at end,
         fleet_looked_at = greatest(fleet_looked_at, :at::timestamptz)
     where id = :personId and organisation_id = (select actor_organisation())
     returning fleet_looked_before_at as before`,
    { at, personId, pause: VISIT_PAUSE_S },
  );
  return rows[0]?.before ?? null;
}

/** What is worth telling somebody who was away, the gravest first. */
const MISSED_KINDS: readonly EventKind[] = [
  'units_not_shutting_down',
  'string_finding',
  'units_stuck',
  'units_unconfirmed',
  'logger_lost',
  'gateway_silent',
  'units_silent',
  'command',
  'roll_call_started',
  'roll_call_stopped',
  'units_recovered',
  'string_finding_ended',
  'hazard_acknowledged',
];

/** A replayed event happened before it was recorded; older than this it is history, not news. */
const NEWS_DAYS = 30;

export async function missedSince(
  tx: Tx,
  since: Date,
  limit: number,
): Promise<{ items: MissedItem[]; more: number }> {
  const { rows } = await tx.raw<{
    rows: (Omit<MissedItem, 'newestAt'> & { newestAt: Date; total: number })[];
  }>(
    `select site.ref as "siteId", site.name as "siteName", site.time_zone as "timeZone", e.kind,
            count(*)::int as events,
            coalesce(sum(case when jsonb_typeof(e.detail -> 'positions') = 'array'
                              then jsonb_array_length(e.detail -> 'positions') end), 0)::int as units,
            max(e.at) as "newestAt", (count(*) over ())::int as total
     from event e join site on site.id = e.site_id
     where ${SITE_VISIBLE} and e.organisation_id = (select actor_organisation()) and e.recorded_at > :since
       and e.at > greatest(:since::timestamptz - make_interval(days => ${NEWS_DAYS}), now() - make_interval(days => 400))
       and e.kind = any (:kinds)
     group by site.id, e.kind
     order by array_position(:kinds::text[], e.kind), max(e.at) desc
     limit :limit`,
    { since, kinds: [...MISSED_KINDS], limit },
  );
  return {
    items: rows.map(({ total: _, newestAt, ...r }) => ({ ...r, newestAt: newestAt.toISOString() })),
    more: Math.max(0, (rows[0]?.total ?? 0) - rows.length),
  };
}

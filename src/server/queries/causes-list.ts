import type { CauseItem, CausePage, CausesView } from '../../schemas/api/causes';
import type { EventItem } from '../../schemas/api/now';
import type { Tx } from '../db/transaction';
import { SITE_VISIBLE } from './visible-site';

/** Causes for people: what the actor may see. */

/** Causes that ended within so many days are still listed. */
const OVER_DAYS = 90;

type Row = Omit<CauseItem, 'lossMoney' | 'lossMoneyDay' | 'since' | 'openedAt' | 'closedAt'> & {
  since: Date;
  openedAt: Date;
  closedAt: Date | null;
  priceKWh: number | null;
};

const ITEM = `c.ref as id, c.kind, c.hazard, c.headline, site.ref as "siteId", site.name as "siteName",
  site.time_zone as "timeZone", c.since, c.opened_at as "openedAt", c.closed_at as "closedAt", c.reopened,
  c.confidence::float8, c.units, c.loss_wh_day as "lossWhDay", c.loss_wh as "lossWh",
  case when c.acknowledged_at is not null then json_build_object('person', coalesce(p.name, 'Somebody'), 'at', c.acknowledged_at) end
    as acknowledged,
  (select json_build_object('id', f.ref, 'number', f.number) from case_file f
   where f.cause_id = c.id and f.closed_at is null order by f.number limit 1) as "openCase",
  (select t.price_kwh::float8 from tariff t
   where t.site_id = c.site_id and t.from_on <= (now() at time zone site.time_zone)::date order by t.from_on desc limit 1)
    as "priceKWh"`;
const FROM = `cause c join site on site.id = c.site_id left join person p on p.id = c.acknowledged_by`;

const ORDER: Record<CausesView['sort'], string> = {
  gravity: `array_position(array['not_shutting_down','stuck','unconfirmed','low_output','weak_unit','wrong_string','loop_resistance','silent'], c.kind), c.since`,
  newest: 'c.opened_at desc',
  oldest: 'c.since',
  loss: 'c.loss_wh desc',
};

const itemOf = ({ priceKWh, since, openedAt, closedAt, ...row }: Row, currency: string | null): CauseItem => {
  const worth = (wh: number | null): number | null =>
    priceKWh === null || currency === null || wh === null ? null : (wh / 1000) * priceKWh;
  return {
    ...row,
    acknowledged: row.acknowledged && {
      person: row.acknowledged.person,
      at: new Date(row.acknowledged.at).toISOString(),
    },
    since: since.toISOString(),
    openedAt: openedAt.toISOString(),
    closedAt: closedAt?.toISOString() ?? null,
    lossMoney: worth(row.lossWh),
    lossMoneyDay: worth(row.lossWhDay),
  };
};

/** The currency of the actor's organisation; null: no money is shown. */
export async function currencyOf(tx: Tx): Promise<string | null> {
  const { rows } = await tx.raw<{ rows: { currency: string | null }[] }>(
    'select currency from organisation where id = (select actor_organisation())',
  );
  return rows[0]?.currency ?? null;
}

/** What a list shows, in its order; words and values of `bindingsOf`. */
const shown = (view: CausesView): string => `
  ${SITE_VISIBLE}
  and ${{ open: 'c.closed_at is null', over: `c.closed_at > now() - interval '${OVER_DAYS} days'`, all: `(c.closed_at is null or c.closed_at > now() - interval '${OVER_DAYS} days')` }[view.show]}
  ${view.kind === 'any' ? '' : 'and c.kind = :kind'} ${view.site ? 'and site.ref = :site' : ''}
  ${
    view.q
      ? `and (c.headline ilike :q or site.name ilike :q or exists (
           select from jsonb_array_elements(c.units) u where u ->> 'serial' ilike :q or u ->> 'stringName' ilike :q))`
      : ''
  }
  order by c.closed_at is not null, ${ORDER[view.sort]}, c.id`;
const bindingsOf = (view: CausesView): Record<string, string> => ({
  kind: view.kind,
  site: view.site ?? '',
  q: `%${view.q.replace(/[\\%_]/g, (c) => `\\${c}`)}%`,
});

export async function listCauses(
  tx: Tx,
  view: CausesView,
  currency: string | null,
  limit: number,
): Promise<CauseItem[]> {
  const { rows } = await tx.raw<{ rows: Row[] }>(
    `select ${ITEM} from ${FROM} where ${shown(view)} limit :limit`,
    { ...bindingsOf(view), limit },
  );
  return rows.map((r) => itemOf(r, currency));
}

/** Identifiers of all that a list shows, in its order. */
export async function causesInOrder(tx: Tx, view: CausesView): Promise<string[]> {
  const { rows } = await tx.raw<{ rows: { id: string }[] }>(
    `select c.ref as id from ${FROM} where ${shown(view)}`,
    bindingsOf(view),
  );
  return rows.map((r) => r.id);
}

/** These causes in this order; without those that are gone. */
export async function causesOf(
  tx: Tx,
  refs: readonly string[],
  currency: string | null,
): Promise<CauseItem[]> {
  const { rows } = await tx.raw<{ rows: Row[] }>(
    `select ${ITEM} from ${FROM} join unnest(:refs::uuid[]) with ordinality listed (ref, place) on listed.ref = c.ref
     where ${SITE_VISIBLE} order by listed.place`,
    { refs: [...refs] },
  );
  return rows.map((r) => itemOf(r, currency));
}

/** Sites of the actor that have or lately had causes. */
export async function sitesWithCauses(tx: Tx): Promise<{ id: string; name: string }[]> {
  const { rows } = await tx.raw<{ rows: { id: string; name: string }[] }>(
    `select site.ref as id, site.name from site
     where ${SITE_VISIBLE} and exists (select from cause c where c.site_id = site.id
       and (c.closed_at is null or c.closed_at > now() - interval '${OVER_DAYS} days')) order by site.name`,
  );
  return rows;
}

export type CauseOne = CauseItem &
  Pick<CausePage, 'key' | 'sharedPart' | 'evidence' | 'alternatives' | 'figures' | 'clearSince'> & {
    siteNumber: number;
  };

/** One cause, if the actor may see its site. */
export async function oneCause(tx: Tx, ref: string, currency: string | null): Promise<CauseOne | undefined> {
  const { rows } = await tx.raw<{
    rows: (Row &
      Pick<CauseOne, 'key' | 'sharedPart' | 'evidence' | 'alternatives' | 'figures' | 'siteNumber'> & {
        clearSince: Date | null;
      })[];
  }>(
    `select ${ITEM}, c.key, c.shared_part as "sharedPart", c.evidence, c.alternatives, c.figures, c.clear_since as "clearSince",
            c.site_id as "siteNumber"
     from ${FROM} where c.ref = :ref and ${SITE_VISIBLE}`,
    { ref },
  );
  const row = rows[0];
  if (!row) return undefined;
  const { key, sharedPart, evidence, alternatives, figures, clearSince, siteNumber, ...item } = row;
  return {
    ...itemOf(item, currency),
    key,
    sharedPart,
    evidence,
    alternatives,
    figures,
    clearSince: clearSince?.toISOString() ?? null,
    siteNumber,
  };
}

/** What happened to a cause, newest first: its own events and who took it on. */
export async function causeEvents(
  tx: Tx,
  cause: Pick<CauseOne, 'id' | 'key' | 'siteNumber' | 'since'>,
): Promise<EventItem[]> {
  const { rows } = await tx.raw<{
    rows: (Omit<EventItem, 'at' | 'recordedAt'> & { at: Date; recordedAt: Date })[];
  }>(
    `select e.id::text, e.at, e.recorded_at as "recordedAt", site.ref as "siteId", site.name as "siteName",
            s.ref as "stringId", s.name as "stringName", e.kind, e.detail
     from event e join site on site.id = e.site_id left join string s on s.id = e.string_id
     where e.site_id = :site and ${SITE_VISIBLE} and e.at >= :since::timestamptz - interval '1 day'
       and ((e.kind in ('cause_opened', 'cause_changed', 'cause_closed', 'cause_reopened') and e.detail ->> 'cause' = :ref)
         or (e.kind = 'hazard_acknowledged' and e.detail ->> 'key' = :key)
         or (e.kind in ('case_opened', 'case_closed', 'case_reopened') and e.detail ->> 'case' in (
           select f.ref::text from case_file f join cause c on c.id = f.cause_id where c.ref = :ref::uuid)))
     order by e.at desc, e.id desc limit 200`,
    { site: cause.siteNumber, since: cause.since, ref: cause.id, key: cause.key },
  );
  return rows.map((r) => ({ ...r, at: r.at.toISOString(), recordedAt: r.recordedAt.toISOString() }));
}

/** An open hazard of a site by its key: who acknowledges it may come from its own page. */
export async function openHazard(
  tx: Tx,
  siteId: number,
  key: string,
): Promise<{ since: Date; headline: string; units: CauseItem['units'] } | undefined> {
  const { rows } = await tx.raw<{ rows: { since: Date; headline: string; units: CauseItem['units'] }[] }>(
    `select since, headline, units from cause where site_id = :siteId and key = :key and closed_at is null and hazard`,
    { siteId, key },
  );
  return rows[0];
}

/** Puts a person's name to the open hazards of a site all of whose units are among these ("string position"). */
export async function takeOnHazards(
  tx: Tx,
  siteId: number,
  units: readonly string[],
  person: { id: number; at: Date },
): Promise<void> {
  await tx.raw(
    `update cause set acknowledged_by = :person, acknowledged_at = :at
     where site_id = :siteId and hazard and closed_at is null and acknowledged_at is null
       and not exists (select from jsonb_array_elements(units) u
         where (u ->> 'stringId') || ' ' || coalesce(u ->> 'position', '') <> all (:units::text[]))`,
    { siteId, person: person.id, at: person.at, units: [...units] },
  );
}

import type { CauseChange, FoundCause, FoundUnit, StoredCause } from '../../domain/causes/changes';
import { isHazardKind, type CauseKind } from '../../domain/causes/kinds';
import type { Tx } from '../db/transaction';

/** Causes as they are written down. Judgement and jobs write them, under the site's lock; people only acknowledge. */

/** What the writing of causes needs to know of a site besides its units. */
export interface CauseSiteFacts {
  id: number;
  ref: string;
  organisationId: number;
  stage: 'commissioning' | 'operating';
  timeZone: string;
  latitude: number;
  longitude: number;
  altitude: number;
}

/** Holds a site's causes until the transaction ends: one writer at a time. Undefined: there is no such site. */
export async function lockCauses(tx: Tx, siteId: number): Promise<CauseSiteFacts | undefined> {
  await tx.raw('select pg_advisory_xact_lock(727005, ?)', [siteId]);
  const { rows } = await tx.raw<{ rows: CauseSiteFacts[] }>(
    `select id, ref, organisation_id as "organisationId", stage, time_zone as "timeZone", latitude, longitude, altitude
     from site where id = ?`,
    [siteId],
  );
  return rows[0];
}

export type CauseRow = StoredCause & { ref: string; lossWh: number; lossUntilS: number | null };

interface Row extends Omit<CauseRow, 'units'> {
  units: (Omit<FoundUnit, 'sinceS'> & { since: string })[];
}

const seconds = (column: string, as: string): string => `extract(epoch from ${column})::float8 as "${as}"`;

const STORED = `id, ref, key, kind, shared_part as "sharedPart", headline, evidence, figures, alternatives, confidence,
  units, ${seconds('since', 'sinceS')}, ${seconds('opened_at', 'openedS')}, ${seconds('changed_at', 'changedS')},
  ${seconds('closed_at', 'closedS')}, ${seconds('clear_since', 'clearSinceS')}, loss_wh_day as "lossWhDay",
  loss_wh as "lossWh", ${seconds('loss_until', 'lossUntilS')}`;

const rowOf = ({ units, ...row }: Row): CauseRow => ({
  ...row,
  units: units.map(({ since, ...u }) => ({ ...u, sinceS: Date.parse(since) / 1000 })),
});

/** A site's causes of these kinds: the open ones, and those that closed after `closedAfter`. */
export async function storedCauses(
  tx: Tx,
  siteId: number,
  kinds: readonly CauseKind[],
  closedAfter: Date,
): Promise<CauseRow[]> {
  const { rows } = await tx.raw<{ rows: Row[] }>(
    `select ${STORED} from cause
     where site_id = :siteId and kind = any (:kinds) and (closed_at is null or closed_at > :closedAfter) order by id`,
    { siteId, kinds: [...kinds], closedAfter },
  );
  return rows.map(rowOf);
}

/** Sites that have a cause of these kinds open, or a unit or string that is not as it should be. */
export async function sitesToJudge(tx: Tx, kinds: readonly CauseKind[]): Promise<number[]> {
  const { rows } = await tx.raw<{ rows: { id: number }[] }>(
    `select site_id as id from cause where closed_at is null and kind = any (:kinds)
     union
     select site_id from string_judgement
     where stuck > 0 or not_shutting_down > 0 or unconfirmed > 0 or silent > 0 or finding is not null
     union
     select site_id from gateway where silent_since is not null
     order by id`,
    { kinds: [...kinds] },
  );
  return rows.map((r) => r.id);
}

/** Planned works that go on at a site at this instant: strings by reference, null: all of them. */
export async function worksNow(tx: Tx, siteId: number, at: Date): Promise<(string[] | null)[]> {
  const { rows } = await tx.raw<{ rows: { strings: string[] | null }[] }>(
    `select case when w.string_ids is null then null
              else array(select s.ref::text from string s where s.id = any (w.string_ids)) end as strings
     from planned_work w where w.site_id = :siteId and w.starts_at <= :at and w.ends_at > :at`,
    { siteId, at },
  );
  return rows.map((r) => r.strings);
}

const iso = (s: number): string => new Date(s * 1000).toISOString();
const unitsJson = (units: readonly FoundUnit[]): string =>
  JSON.stringify(
    units.map((u) => ({
      stringId: u.stringId,
      stringName: u.stringName,
      position: u.position,
      serial: u.serial,
      since: iso(u.sinceS),
    })),
  );

const values = (cause: FoundCause) => ({
  key: cause.key,
  kind: cause.kind,
  hazard: isHazardKind(cause.kind),
  part: cause.sharedPart === null ? null : JSON.stringify(cause.sharedPart),
  headline: cause.headline,
  evidence: cause.evidence,
  figures: JSON.stringify(cause.figures),
  alternatives: JSON.stringify(cause.alternatives),
  confidence: Math.min(1, Math.max(0, cause.confidence)),
  units: unitsJson(cause.units),
  refs: [...new Set(cause.units.map((u) => u.stringId))],
  since: iso(cause.sinceS),
  lossWhDay: cause.lossWhDay,
});

const SAID = `key = :key, shared_part = :part::jsonb, headline = :headline, evidence = :evidence, figures = :figures::jsonb,
  alternatives = :alternatives::jsonb, confidence = :confidence, units = :units::jsonb,
  string_ids = array(select s.id from string s where s.site_id = cause.site_id and s.ref = any (:refs::uuid[]) order by s.id),
  since = :since, loss_wh_day = :lossWhDay`;

/** A change as it was written: the row's public identifier, for its event. */
export interface WrittenChange {
  change: Exclude<CauseChange, { do: 'note' }>;
  ref: string;
  lossWh: number;
}

/** Writes one change. `at` is the instant of the run that found it. */
export async function writeCauseChange(
  tx: Tx,
  siteId: number,
  change: CauseChange,
  at: Date,
): Promise<WrittenChange | null> {
  const one = async (sql: string, bindings: Record<string, unknown>) => {
    const { rows } = await tx.raw<{ rows: { ref: string; lossWh: number }[] }>(
      `${sql} returning ref, loss_wh as "lossWh"`,
      bindings as Record<string, string>,
    );
    const row = rows[0];
    return row && change.do !== 'note' ? { change, ...row } : null;
  };
  switch (change.do) {
    case 'open':
      return one(
        `insert into cause (site_id, key, kind, hazard, shared_part, headline, evidence, figures, alternatives, confidence,
           units, string_ids, since, opened_at, changed_at, loss_wh_day, loss_until)
         values (:siteId, :key, :kind, :hazard, :part::jsonb, :headline, :evidence, :figures::jsonb, :alternatives::jsonb,
           :confidence, :units::jsonb,
           array(select s.id from string s where s.site_id = :siteId and s.ref = any (:refs::uuid[]) order by s.id),
           :since, :at, :at, :lossWhDay, least(:since::timestamptz, :at::timestamptz))`,
        { ...values(change.cause), siteId, at },
      );
    case 'reopen':
      return one(
        `update cause set ${SAID}, closed_at = null, clear_since = null, changed_at = :at, reopened = reopened + 1,
           loss_until = :at, acknowledged_by = null, acknowledged_at = null
         where id = :id`,
        { ...values(change.cause), id: change.stored.id, at },
      );
    case 'change':
      // what was taken on was taken on as it was: a unit that joins a hazard asks anew
      return one(
        `update cause set ${SAID}, clear_since = null, changed_at = :at,
           acknowledged_by = case when :grows then null else acknowledged_by end,
           acknowledged_at = case when :grows then null else acknowledged_at end
         where id = :id`,
        { ...values(change.cause), id: change.stored.id, at, grows: grows(change) },
      );
    case 'close':
      return one(`update cause set closed_at = greatest(:at, opened_at), changed_at = :at where id = :id`, {
        id: change.stored.id,
        at,
      });
    case 'note':
      return one(`update cause set ${SAID}, clear_since = to_timestamp(:clear) where id = :id`, {
        ...values(change.cause),
        id: change.stored.id,
        clear: change.clearSinceS,
      });
  }
}

const grows = ({ stored, cause }: { stored: StoredCause; cause: FoundCause }): boolean => {
  const key = (u: FoundUnit): string => `${u.stringId} ${u.position ?? ''} ${u.serial ?? ''}`;
  const before = new Set(stored.units.map(key));
  return cause.units.some((u) => !before.has(key(u)));
};

/** Adds to what causes have cost so far, up to `until`; what was counted up to there already stays. */
export async function addLosses(
  tx: Tx,
  losses: readonly { id: number; wh: number }[],
  until: Date,
): Promise<void> {
  if (losses.length === 0) return;
  await tx.raw(
    `update cause set loss_wh = loss_wh + l.wh, loss_until = :until
     from unnest(:ids::int8[], :wh::float8[]) l(id, wh)
     where cause.id = l.id and (loss_until is null or loss_until < :until)`,
    { ids: losses.map((l) => l.id), wh: losses.map((l) => l.wh), until },
  );
}

/** Adds events of a site in the order given. */
export async function addSiteEvents(
  tx: Tx,
  site: Pick<CauseSiteFacts, 'id' | 'organisationId'>,
  events: readonly { at: Date; kind: string; stringRef: string | null; detail: Record<string, unknown> }[],
): Promise<void> {
  if (events.length === 0) return;
  await tx.raw(
    `insert into event (at, organisation_id, site_id, string_id, kind, detail)
     select e.at, :organisationId, :siteId, s.id, e.kind, e.detail
     from unnest(:at::timestamptz[], :kinds::text[], :strings::uuid[], :details::jsonb[])
       with ordinality e(at, kind, string, detail, n)
     left join string s on s.ref = e.string and s.site_id = :siteId
     order by e.n`,
    {
      siteId: site.id,
      organisationId: site.organisationId,
      at: events.map((e) => e.at.toISOString()),
      kinds: events.map((e) => e.kind),
      strings: events.map((e) => e.stringRef),
      details: events.map((e) => JSON.stringify(e.detail)),
    },
  );
}

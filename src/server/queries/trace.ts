import type { CommandNow } from '../../schemas/api/now';
import type { StringTrace } from '../../schemas/api/trace';
import type { Tx } from '../db/transaction';

/** Traces that begin so much apart belong to the same act: zones are switched one after the other. */
const SAME_ACT_S = 20;

export interface TraceRows {
  startedAt: Date | null;
  traces: StringTrace[];
}

/** The traces of the newest act at a site, or of its newest act that concerned one string; by string. */
export async function newestTraces(tx: Tx, siteId: number, stringRef?: string): Promise<TraceRows> {
  const { rows } = await tx.raw<{ rows: (StringTrace & { startedAt: Date })[] }>(
    `with own as (
       select t.*, s.ref, s.name, s.roster_index
       from trace t join string s on s.id = t.string_id
       where t.site_id = :siteId and (cast(:string as uuid) is null or s.ref = cast(:string as uuid))
     ), newest as (select max(started_at) as at from own)
     select own.ref as "stringId", own.name as "stringName", own.measuring_point as "measuringPoint", own.accuracy,
            own.started_at as "startedAt",
            (select array_agg(v / 10.0::float8 order by o) from unnest(own.voltage) with ordinality u(v, o)) as voltage
     from own, newest
     where own.started_at > newest.at - make_interval(secs => :apart)
     order by own.roster_index, own.name, own.measuring_point`,
    { siteId, string: stringRef ?? null, apart: SAME_ACT_S },
  );
  const starts = rows.map((r) => r.startedAt.getTime());
  return {
    startedAt: starts.length > 0 ? new Date(Math.max(...starts)) : null,
    traces: rows.map(({ startedAt: _, ...trace }) => trace),
  };
}

/** The command of a zone or a transmitter nearest to an instant, within the span of one act. */
export async function commandNear(
  tx: Tx,
  siteId: number,
  at: Date,
): Promise<Pick<CommandNow, 'inForce' | 'where' | 'since' | 'by'> | null> {
  const { rows } = await tx.raw<{ rows: (Pick<CommandNow, 'inForce' | 'where' | 'by'> & { since: Date })[] }>(
    `select c.in_force as "inForce", coalesce(z.name, t.name) as where, c.since, c.said_by as by
     from command c left join zone z on z.id = c.zone_id left join transmitter t on t.id = c.transmitter_id
     where c.site_id = :siteId
       and c.since between cast(:at as timestamptz) - make_interval(secs => :apart)
                       and cast(:at as timestamptz) + make_interval(secs => :apart)
     order by abs(extract(epoch from c.since - cast(:at as timestamptz))), c.zone_id nulls last limit 1`,
    { siteId, at, apart: SAME_ACT_S },
  );
  const [row] = rows;
  return row ? { ...row, since: row.since.toISOString() } : null;
}

export async function ruleSetOf(
  tx: Tx,
  siteId: number,
): Promise<'rapid_shutdown_30s' | 'rapid_shutdown_10s' | 'hazard_control' | 'none'> {
  const row = await tx('site').where('id', siteId).first('rule_set');
  return row.rule_set;
}

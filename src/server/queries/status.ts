import type { InstallationStatus } from '../../schemas/api/status';
import type { Tx } from '../db/transaction';
import { BY_HTTPS } from './ingest-loggers';
import { SITE_VISIBLE } from './visible-site';

const iso = (at: Date | null): string | null => at?.toISOString() ?? null;

/** Three reports missed, as everywhere. */
const SPOKE_WITHIN = `make_interval(secs => 3 * greatest(60, site.report_interval_s))`;

export async function databaseStatus(tx: Tx): Promise<InstallationStatus['database']> {
  const { rows } = await tx.raw<{ rows: InstallationStatus['database'][] }>(
    `select current_setting('server_version') as version, pg_database_size(current_database())::int8 as bytes,
            row_security_active('site') as "rowSecurity"`,
  );
  return rows[0] ?? { version: '', bytes: 0, rowSecurity: false };
}

export async function loggerStatus(tx: Tx): Promise<InstallationStatus['loggers']> {
  interface Row {
    siteId: string;
    siteName: string;
    timeZone: string;
    serial: string;
    firmware: string | null;
    connected: boolean;
    lastSpokeAt: Date | null;
    lastAddress: string | null;
    refused: number;
    lastRefusal: { at?: string; field?: string; reason?: string } | null;
  }
  const { rows } = await tx.raw<{ rows: Row[] }>(
    `select site.ref as "siteId", site.name as "siteName", site.time_zone as "timeZone", l.serial, l.firmware,
            coalesce(l.connected_at is not null and l.last_spoke_at > now() - ${SPOKE_WITHIN}, false) as connected,
            l.last_spoke_at as "lastSpokeAt", l.last_address as "lastAddress", l.refused_count as refused,
            l.last_refusal as "lastRefusal"
     from logger l join site on site.id = l.site_id
     where ${SITE_VISIBLE}
     order by (l.last_refusal ->> 'at') desc nulls last, site.name, l.serial`,
  );
  return rows.map((r) => ({
    ...r,
    lastSpokeAt: iso(r.lastSpokeAt),
    lastRefusal: r.lastRefusal && {
      at: r.lastRefusal.at ? new Date(r.lastRefusal.at).toISOString() : null,
      field: r.lastRefusal.field ?? '',
      reason: r.lastRefusal.reason ?? '',
    },
  }));
}

/** Processes by the loggers of this organisation that they hold. */
export async function processStatus(tx: Tx): Promise<InstallationStatus['processes']> {
  const { rows } = await tx.raw<{ rows: { name: string; loggers: number; until: Date }[] }>(
    `select l.leased_by as name, count(*)::int as loggers, max(l.leased_until) as until
     from logger l join site on site.id = l.site_id
     where ${SITE_VISIBLE} and l.leased_until > now() and l.leased_by <> '${BY_HTTPS}'
     group by l.leased_by order by l.leased_by`,
  );
  return rows.map((r) => ({ ...r, until: r.until.toISOString() }));
}

/** How far judgement, roll-ups and partitions are behind what has come in. */
export async function workStatus(tx: Tx): Promise<InstallationStatus['work']> {
  interface Row {
    newestFrameAt: Date | null;
    unjudgedSince: Date | null;
    unjudgedStrings: number;
    rolledUpTo: Date | null;
    quartersWaiting: number;
    lateFrames: number;
    preparedTo: string | null;
  }
  const { rows } = await tx.raw<{ rows: Row[] }>(
    `with newest as (
       select st.at, j.frame_at from string_state st
       join site on site.id = st.site_id
       left join string_judgement j on j.string_id = st.string_id
       where ${SITE_VISIBLE})
     select (select max(at) from newest) as "newestFrameAt",
            (select min(at) from newest where frame_at is null or frame_at < at) as "unjudgedSince",
            (select count(*)::int from newest where frame_at is null or frame_at < at) as "unjudgedStrings",
            (select quarter from rollup_watermark) as "rolledUpTo",
            (select count(*)::int from rollup_dirty) as "quartersWaiting",
            (select count(*)::int from late_frame) as "lateFrames",
            (select to_char(max(to_date(right(c.relname, 8), 'YYYYMMDD')), 'YYYY-MM-DD')
             from pg_inherits i join pg_class c on c.oid = i.inhrelid
             where i.inhparent = 'string_frame'::regclass) as "preparedTo"`,
  );
  const [row] = rows;
  if (!row) throw new Error('the state of the work has no row');
  return {
    ...row,
    newestFrameAt: iso(row.newestFrameAt),
    unjudgedSince: iso(row.unjudgedSince),
    rolledUpTo: iso(row.rolledUpTo),
  };
}

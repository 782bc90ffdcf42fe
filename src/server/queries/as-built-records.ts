import type { PartKind } from '../../domain/commissioning/as-built/parts';
import type { Tx } from '../db/transaction';

/** What hangs on a part of a site, so that it can't go without being missed. */

export type HangingPart = 'string' | 'sensor' | 'zone' | 'transmitter';
export type HangingRecord =
  | 'reading'
  | 'input_reading'
  | 'command'
  | 'shutdown_test'
  | 'roster'
  | 'unit_heard'
  | 'connection'
  | 'meter_reading'
  | 'install_check'
  | 'sign_off'
  | 'file'
  | 'trace'
  | 'event'
  | 'day';
export interface Hanging {
  /** Other parts by name: they go or are changed first. */
  parts: { what: HangingPart; names: string[] }[];
  /** Records and telemetry, counted: they stay, and so does the part. */
  records: { what: HangingRecord; count: number }[];
}

const names = (what: HangingPart, sql: string) => ({ what, sql });
const count = (what: HangingRecord, sql: string) => ({ what, sql });

/** `?` is the part's number. `parts` give names, `records` give a number each. */
const HANGING: Record<
  Exclude<PartKind, 'site'>,
  { parts: { what: HangingPart; sql: string }[]; records: { what: HangingRecord; sql: string }[] }
> = {
  plane: {
    parts: [
      names('string', 'select name from string where plane_id = ?'),
      names('sensor', 'select number::text as name from sensor where plane_id = ?'),
    ],
    records: [],
  },
  inverter: {
    parts: [
      names(
        'string',
        'select s.name from string s join input i on i.id = s.input_id where i.inverter_id = ?',
      ),
    ],
    records: [
      count('reading', 'select 1 from inverter_frame where inverter_id = ? limit 1'),
      count('reading', 'select 1 from inverter_state where inverter_id = ?'),
      count(
        'input_reading',
        'select 1 from input_state x join input i on i.id = x.input_id where i.inverter_id = ?',
      ),
    ],
  },
  initiator: {
    parts: [names('zone', 'select name from zone where initiator_id = ?')],
    records: [],
  },
  zone: {
    parts: [
      names('string', 'select name from string where zone_id = ?'),
      names('transmitter', 'select name from transmitter where zone_id = ?'),
    ],
    records: [
      count('command', 'select 1 from command where zone_id = ?'),
      count('shutdown_test', 'select 1 from shutdown_test where zone_id = ?'),
    ],
  },
  transmitter: {
    parts: [
      names(
        'string',
        'select s.name from transmitter_string t join string s on s.id = t.string_id where t.transmitter_id = ?',
      ),
    ],
    records: [count('command', 'select 1 from command where transmitter_id = ?')],
  },
  logger: {
    parts: [
      names('string', 'select name from string where logger_id = ?'),
      names('sensor', 'select number::text as name from sensor where logger_id = ?'),
    ],
    records: [
      count('roster', 'select 1 from roster_version where logger_id = ?'),
      count('unit_heard', 'select 1 from heard where logger_id = ?'),
      count('connection', 'select 1 from logger where id = ? and connected_at is not null'),
    ],
  },
  sensor: {
    parts: [],
    records: [
      count('reading', 'select 1 from weather_state where sensor_id = ?'),
      count('reading', 'select 1 from weather_frame where sensor_id = ? limit 1'),
    ],
  },
  string: {
    parts: [],
    records: [
      count('meter_reading', 'select 1 from meter_reading where string_id = ?'),
      count('install_check', 'select 1 from install_check where string_id = ?'),
      count('sign_off', 'select 1 from string_sign_off where string_id = ?'),
      count('file', 'select 1 from attachment where string_id = ?'),
      count(
        'shutdown_test',
        `select 1 from string s join shutdown_test t on t.site_id = s.site_id
         where s.id = ? and t.detail::text like '%' || s.ref::text || '%'`,
      ),
      count('trace', 'select 1 from trace where string_id = ?'),
      count('event', 'select 1 from event where string_id = ?'),
      count(
        'reading',
        `select 1 from string s where s.id = ? and (exists (select from string_frame f where f.string_id = s.id)
           or exists (select from packed_frame p where p.string_id = s.id))`,
      ),
      count('day', 'select 1 from string_day where string_id = ?'),
    ],
  },
};

export async function hangingOn(tx: Tx, kind: Exclude<PartKind, 'site'>, id: number): Promise<Hanging> {
  const { parts, records } = HANGING[kind];
  const hanging: Hanging = { parts: [], records: [] };
  for (const { what, sql } of parts) {
    const { rows } = await tx.raw<{ rows: { name: string }[] }>(`${sql} order by 1`, [id]);
    if (rows.length > 0) hanging.parts.push({ what, names: rows.map((r) => r.name) });
  }
  for (const { what, sql } of records) {
    const { rows } = await tx.raw<{ rows: { count: number }[] }>(
      `select count(*)::int as count from (${sql}) x`,
      [id],
    );
    const found = rows[0]?.count ?? 0;
    if (found > 0 && !hanging.records.some((r) => r.what === what))
      hanging.records.push({ what, count: found });
  }
  return hanging;
}

/** Who last changed one of these fields of a part, and when. */
export async function lastChanges(
  tx: Tx,
  siteId: number,
  subject: string,
  keys: readonly string[],
): Promise<Map<string, { name: string; at: Date }>> {
  const { rows } = await tx.raw<{ rows: { key: string; name: string; at: Date }[] }>(
    `select distinct on (k.key) k.key, p.name, a.at
     from unnest(:keys::text[]) k(key)
     join audit_entry a on a.site_id = :siteId and a.subject = :subject and jsonb_exists(a.after, k.key)
     join person p on p.id = a.person_id
     order by k.key, a.id desc`,
    { siteId, subject, keys: [...keys] },
  );
  return new Map(rows.map((r) => [r.key, { name: r.name, at: r.at }]));
}

/** Who deleted a part, if somebody did. */
export async function deletedBy(
  tx: Tx,
  siteId: number,
  subject: string,
): Promise<{ name: string; at: Date } | undefined> {
  const { rows } = await tx.raw<{ rows: { name: string; at: Date }[] }>(
    `select p.name, a.at from audit_entry a join person p on p.id = a.person_id
     where a.site_id = ? and a.subject = ? and a.action like 'as\\_built.%\\_deleted' order by a.id desc limit 1`,
    [siteId, subject],
  );
  return rows[0];
}

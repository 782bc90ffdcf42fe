import type pg from 'pg';

/** The roll call's record: each serial's first answer at a site, on the as-built or not. */

export interface HeardRow {
  siteId: number;
  loggerId: number;
  serial: string;
  gateway: number;
  /** Epoch seconds. */
  at: number;
  /** dBm */
  signal: number;
  /** cV */
  voltage: number | null;
  /** mA */
  current: number | null;
}

/**
 * Keeps what was heard in one statement; every serial heard for the first time is an event, grouped by string, and
 * by site where it is on no as-built. Returns the strings and sites whose roll call moved.
 */
export async function writeHeard(
  client: pg.ClientBase,
  rows: readonly HeardRow[],
): Promise<{ siteId: number; stringId: number | null }[]> {
  const { rows: told } = await client.query<{ siteId: number; stringId: number | null }>({
    name: 'write_heard',
    text: `with x as materialized (
        select site_id, serial, (array_agg(logger_id order by at desc))[1] logger_id,
          (array_agg(gateway order by at desc))[1] gateway, to_timestamp(min(at)) first_at, to_timestamp(max(at)) last_at,
          max(signal) signal, (array_agg(voltage order by at desc))[1] voltage, (array_agg(current order by at desc))[1] current
        from unnest($1::int4[], $2::int4[], $3::text[], $4::int2[], $5::int4[], $6::int2[], $7::int2[], $8::int2[])
          x(site_id, logger_id, serial, gateway, at, signal, voltage, current)
        group by site_id, serial),
      placed as (
        select x.*, u.id unit_id, slot.string_id, slot.position
        from x join site s on s.id = x.site_id
          left join (unit u join placement p on p.unit_id = u.id and p.placed_to is null join slot on slot.id = p.slot_id)
            on u.organisation_id = s.organisation_id and u.serial = x.serial and slot.site_id = x.site_id),
      kept as (
        insert into heard as h (site_id, serial, unit_id, roll_call_id, logger_id, gateway_number, first_heard_at, last_heard_at, signal, voltage, current)
        select p.site_id, p.serial, p.unit_id, (select id from roll_call r where r.site_id = p.site_id and r.stopped_at is null),
          p.logger_id, p.gateway, p.first_at, p.last_at, p.signal, p.voltage, p.current
        from placed p order by p.site_id, p.serial
        on conflict (site_id, serial) do update set unit_id = coalesce(excluded.unit_id, h.unit_id),
          first_heard_at = least(h.first_heard_at, excluded.first_heard_at),
          gateway_number = case when excluded.last_heard_at >= h.last_heard_at then excluded.gateway_number else h.gateway_number end,
          voltage = case when excluded.last_heard_at >= h.last_heard_at then excluded.voltage else h.voltage end,
          current = case when excluded.last_heard_at >= h.last_heard_at then excluded.current else h.current end,
          last_heard_at = greatest(h.last_heard_at, excluded.last_heard_at), signal = greatest(h.signal, excluded.signal)
        returning h.site_id, h.serial, h.xmax = 0 as fresh)
      insert into event (at, organisation_id, site_id, string_id, kind, detail)
      select min(p.first_at), s.organisation_id, s.id, p.string_id, 'units_heard',
        jsonb_build_object('positions', coalesce(jsonb_agg(p.position order by p.position) filter (where p.position is not null), '[]'),
          'serials', jsonb_agg(p.serial order by p.position, p.serial))
      from kept k join placed p using (site_id, serial) join site s on s.id = k.site_id
      where k.fresh group by s.organisation_id, s.id, p.string_id
      returning site_id as "siteId", string_id as "stringId"`,
    values: [
      rows.map((r) => r.siteId),
      rows.map((r) => r.loggerId),
      rows.map((r) => r.serial),
      rows.map((r) => r.gateway),
      rows.map((r) => r.at),
      rows.map((r) => r.signal),
      rows.map((r) => r.voltage),
      rows.map((r) => r.current),
    ],
  });
  return told;
}

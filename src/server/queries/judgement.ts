import type { Knex } from 'knex';
import { groupedBy } from '../../domain/grouped-by';
import { config } from '../config';
import { oneString, packedFrames } from './frames';
import type pg from 'pg';
import type { StringMemory, UnitCounts } from '../../domain/verdicts/memory';
import type { EventKind } from '../../domain/verdicts/codes';
import { CHANNELS } from './live-notices';

/** What judgement keeps: its memory of each string up to the frame at `frame_at`, what changed, and events. */

export interface KeptMemory {
  memory: StringMemory;
  /** The units that it is about, in slot order. */
  serials: (string | null)[];
}

export interface KeptJudgement {
  stringId: number;
  kept: KeptMemory | null;
}

export async function judgementsOf(db: Knex, siteId: number): Promise<KeptJudgement[]> {
  const { rows } = await db.raw<{ rows: KeptJudgement[] }>(
    `select string_id as "stringId", memory as kept from string_judgement where site_id = ?`,
    [siteId],
  );
  return rows;
}

export interface StoredFrame {
  stringId: number;
  at: number;
  voltage: (number | null)[];
  voltageIn: (number | null)[] | null;
  state: (number | null)[];
}

/** Frames that are later than each string's instant (epoch s), oldest first, at most `limit` a string. */
export async function framesAfter(
  db: Knex,
  after: readonly { stringId: number; atS: number }[],
  limit: number,
): Promise<StoredFrame[]> {
  const single = await singleAfter(db, after, limit);
  // a string's first judgement, or the first after days without any: some of its frames may be packed by now
  const packedBeforeS = Date.now() / 1000 - config().PACKED_AFTER_DAYS * 86_400;
  const behind = after.filter((a) => a.atS < packedBeforeS);
  if (behind.length === 0) return single;
  const packed = await packedAfter(db, behind, limit);
  if (packed.length === 0) return single;
  const taken = new Map<number, number>();
  return [...packed, ...single]
    .sort((a, b) => a.at - b.at)
    .filter(({ stringId }) => {
      const n = taken.get(stringId) ?? 0;
      taken.set(stringId, n + 1);
      return n < limit;
    });
}

async function packedAfter(
  db: Knex,
  after: readonly { stringId: number; atS: number }[],
  limit: number,
): Promise<StoredFrame[]> {
  // by day first: the days after those that are enough need not be unpacked
  const frames = packedFrames({
    columns: ['voltage', 'voltage_in', 'state'],
    strings: oneString('s.id'),
    from: `(to_timestamp(s.after) + interval '1 microsecond')`,
    to: `'infinity'::timestamptz`,
  });
  const { rows } = await db.raw<{ rows: StoredFrame[] }>(
    `select s.id as "stringId", extract(epoch from f.at)::int4 as at, f.voltage, f.voltage_in as "voltageIn", f.state
     from unnest(?::int4[], ?::int4[]) s(id, after) cross join lateral (${frames} order by p.day, x.at limit ?) f`,
    [after.map((a) => a.stringId), after.map((a) => a.atS), limit],
  );
  return rows;
}

async function singleAfter(
  db: Knex,
  after: readonly { stringId: number; atS: number }[],
  limit: number,
): Promise<StoredFrame[]> {
  const { rows } = await db.raw<{ rows: StoredFrame[] }>(
    `select s.id as "stringId", extract(epoch from f.at)::int4 as at, f.voltage, f.voltage_in as "voltageIn", f.state
     from unnest(?::int4[], ?::int4[]) s(id, after)
     cross join lateral (select at, voltage, voltage_in, state from string_frame f
       where f.string_id = s.id and f.at > to_timestamp(s.after) order by f.at limit ?) f`,
    [after.map((a) => a.stringId), after.map((a) => a.atS), limit],
  );
  return rows;
}

/** An input's newest report. Epoch s, V, A. */
export interface InputRead {
  inputId: number;
  atS: number;
  voltageV: number | null;
  currentA: number | null;
}

/** The newest report of each input, by site. */
export async function inputsOf(db: Knex, siteIds: readonly number[]): Promise<Map<number, InputRead[]>> {
  const { rows } = await db.raw<{ rows: (InputRead & { siteId: number })[] }>(
    `select site_id as "siteId", input_id as "inputId", extract(epoch from at)::int4 as "atS",
       voltage / 10.0::float8 as "voltageV", current / 100.0::float8 as "currentA"
     from input_state where site_id = any (?)`,
    [[...siteIds]],
  );
  return groupedBy(rows, (input) => input.siteId);
}

/** The coldest air (°C) that a site's sensors report now; null: none does. */
export async function temperatureAirOf(db: Knex, siteId: number): Promise<number | null> {
  const { rows } = await db.raw<{ rows: { temperatureAir: number | null }[] }>(
    `select min(temperature_air) / 10.0::float8 as "temperatureAir" from weather_state
     where site_id = ? and at > now() - interval '2 hours'`,
    [siteId],
  );
  return rows[0]?.temperatureAir ?? null;
}

/** A judgement as it is at one moment: copied, for the memory goes on changing. */
export interface JudgementRow {
  stringId: number;
  siteId: number;
  /** Epoch s; 0: no frame yet. */
  frameAtS: number;
  /** Array literals. */
  state: string;
  verdict: string;
  since: string;
  finding: string | null;
  findingSinceS: number | null;
  /** JSON: {units: {position: evidence}, finding} */
  evidence: string;
  /** JSON of KeptMemory. */
  kept: string;
  counts: UnitCounts;
}
export interface UnitEventRow {
  atS: number;
  stringId: number;
  position: number;
  siteId: number;
  state: number;
  stateBefore: number;
  verdict: number;
  verdictBefore: number;
}
export interface EventRow {
  atS: number;
  organisationId: number;
  siteId: number;
  stringId: number | null;
  kind: EventKind;
  detail: Record<string, unknown>;
}

const known = (code: number): number | null => (code < 0 ? null : code);

/** Writes what was concluded, in one transaction of its own. Rows of strings in their order. */
export async function writeJudgements(
  client: pg.ClientBase,
  judgements: readonly JudgementRow[],
  unitEvents: readonly UnitEventRow[],
  events: readonly EventRow[],
): Promise<void> {
  await client.query('begin');
  try {
    if (judgements.length > 0) await upsertJudgements(client, judgements);
    if (unitEvents.length > 0)
      await client.query({
        name: 'unit_events',
        text: `insert into unit_event as e (at, string_id, position, site_id, state, state_before, verdict, verdict_before)
          select to_timestamp(at), string_id, position, site_id, coalesce(state, -1), state_before, verdict, verdict_before
          from unnest($1::int4[], $2::int4[], $3::int2[], $4::int4[], $5::int2[], $6::int2[], $7::int2[], $8::int2[])
            x(at, string_id, position, site_id, state, state_before, verdict, verdict_before)
          where exists (select from string where id = string_id)
          order by string_id, position, at
          on conflict (string_id, position, at) do update set state = excluded.state, verdict = excluded.verdict`,
        values: [
          unitEvents.map((e) => e.atS),
          unitEvents.map((e) => e.stringId),
          unitEvents.map((e) => e.position),
          unitEvents.map((e) => e.siteId),
          unitEvents.map((e) => e.state),
          unitEvents.map((e) => known(e.stateBefore)),
          unitEvents.map((e) => e.verdict),
          unitEvents.map((e) => e.verdictBefore),
        ],
      });
    if (events.length > 0)
      await client.query({
        name: 'events',
        text: `insert into event (at, organisation_id, site_id, string_id, kind, detail)
          select to_timestamp(at), organisation_id, site_id, string_id, kind, detail
          from unnest($1::int4[], $2::int4[], $3::int4[], $4::int4[], $5::text[], $6::jsonb[])
            with ordinality x(at, organisation_id, site_id, string_id, kind, detail, n) order by n`,
        values: [
          events.map((e) => e.atS),
          events.map((e) => e.organisationId),
          events.map((e) => e.siteId),
          events.map((e) => e.stringId),
          events.map((e) => e.kind),
          events.map((e) => JSON.stringify(e.detail)),
        ],
      });
    const sites = [...new Set([...unitEvents, ...events].map((e) => e.siteId))];
    if (sites.length > 0)
      await client.query('select pg_notify($1, id::text) from unnest($2::int4[]) id', [
        CHANNELS.judged,
        sites,
      ]);
    await client.query('commit');
  } catch (error) {
    // where the connection is gone the server rolls back by itself
    await client.query('rollback').catch(() => undefined);
    throw error;
  }
}

async function upsertJudgements(client: pg.ClientBase, rows: readonly JudgementRow[]): Promise<void> {
  const count = (pick: (c: UnitCounts) => number) => rows.map((r) => pick(r.counts));
  // one a line: array literals and JSON have no raw ends of lines, and as an array every mark in them would be escaped
  // here and undone there
  const lines = (pick: (r: JudgementRow) => string) => rows.map(pick).join('\n');
  await client.query({
    name: 'judgements',
    text: `insert into string_judgement as j (string_id, site_id, frame_at, judged_at, state, verdict, since, finding, finding_since,
        evidence, memory, passing, shutdown, unheard, silent, dark, stuck, not_shutting_down, unconfirmed)
      select string_id, site_id, to_timestamp(nullif(frame_at, 0)), now(), state::int2[], verdict::int2[], since::int4[], finding,
        to_timestamp(finding_since), evidence, memory, passing, shutdown, unheard, silent, dark, stuck, not_shutting_down, unconfirmed
      from unnest($1::int4[], $2::int4[], $3::int4[], string_to_array($4, e'\\n'), string_to_array($5, e'\\n'),
        string_to_array($6, e'\\n'), $7::text[], $8::int4[], string_to_array($9, e'\\n')::jsonb[],
        string_to_array($10, e'\\n')::json[], $11::int2[], $12::int2[], $13::int2[], $14::int2[], $15::int2[],
        $16::int2[], $17::int2[], $18::int2[])
        x(string_id, site_id, frame_at, state, verdict, since, finding, finding_since, evidence, memory, passing, shutdown,
          unheard, silent, dark, stuck, not_shutting_down, unconfirmed)
      where exists (select from string where id = string_id)
      order by string_id
      on conflict (string_id) do update set frame_at = excluded.frame_at, judged_at = excluded.judged_at, state = excluded.state,
        verdict = excluded.verdict, since = excluded.since, finding = excluded.finding, finding_since = excluded.finding_since,
        evidence = excluded.evidence, memory = excluded.memory, passing = excluded.passing, shutdown = excluded.shutdown,
        unheard = excluded.unheard, silent = excluded.silent, dark = excluded.dark, stuck = excluded.stuck,
        not_shutting_down = excluded.not_shutting_down, unconfirmed = excluded.unconfirmed`,
    values: [
      rows.map((r) => r.stringId),
      rows.map((r) => r.siteId),
      rows.map((r) => r.frameAtS),
      lines((r) => r.state),
      lines((r) => r.verdict),
      lines((r) => r.since),
      rows.map((r) => r.finding),
      rows.map((r) => r.findingSinceS),
      lines((r) => r.evidence),
      lines((r) => r.kept),
      count((c) => c.passing),
      count((c) => c.shutdown),
      count((c) => c.unheard),
      count((c) => c.silent),
      count((c) => c.dark),
      count((c) => c.verdicts.stuck),
      count((c) => c.verdicts.not_shutting_down),
      count((c) => c.verdicts.unconfirmed),
    ],
  });
}

/**
 * Takes the sites that no process judges, for as long as this connection lives. The two numbers of the lock are ours
 * and the site's.
 */
export async function takeSites(client: pg.ClientBase, held: readonly number[]): Promise<number[]> {
  const { rows } = await client.query<{ id: number }>(
    `with free as materialized (select id from site where id <> all ($1::int4[]))
     select id from free where pg_try_advisory_lock(727002, id) order by id`,
    [held],
  );
  return rows.map((r) => r.id);
}

export async function releaseSites(client: pg.ClientBase): Promise<void> {
  await client.query('select pg_advisory_unlock_all()');
}

/** Units whose reports came without a `heard`: they answered all the same, and are written down as heard. */
export async function hearReportingUnits(
  client: pg.ClientBase,
  stringIds: readonly number[],
): Promise<number> {
  const { rowCount } = await client.query(
    `with new as (
       insert into heard (site_id, serial, unit_id, roll_call_id, logger_id, gateway_number, first_heard_at, last_heard_at, signal, voltage, current)
       select st.site_id, u.serial, u.id, (select id from roll_call r where r.site_id = st.site_id and r.stopped_at is null),
         s.logger_id, st.via[slot.position], to_timestamp(st.seen[slot.position]), to_timestamp(st.seen[slot.position]),
         st.signal[slot.position], coalesce(st.voltage[slot.position], st.voltage_in[slot.position]), st.current[slot.position]
       from string_state st join string s on s.id = st.string_id join slot on slot.string_id = s.id
         join placement p on p.slot_id = slot.id and p.placed_to is null join unit u on u.id = p.unit_id
       where st.string_id = any ($1::int4[]) and s.logger_id is not null
         -- what was reported from there before this unit came is another's
         and st.seen[slot.position] >= extract(epoch from p.placed_from)
         and st.via[slot.position] is not null
       order by u.serial
       on conflict do nothing returning site_id, serial, first_heard_at)
     insert into event (at, organisation_id, site_id, string_id, kind, detail)
     select min(n.first_heard_at), site.organisation_id, site.id, slot.string_id, 'units_heard',
       jsonb_build_object('positions', jsonb_agg(slot.position order by slot.position), 'serials', jsonb_agg(n.serial order by slot.position))
     from new n join site on site.id = n.site_id join unit u on u.organisation_id = site.organisation_id and u.serial = n.serial
       join placement p on p.unit_id = u.id and p.placed_to is null join slot on slot.id = p.slot_id
     group by site.organisation_id, site.id, slot.string_id`,
    [stringIds],
  );
  return rowCount ?? 0;
}

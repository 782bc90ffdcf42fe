import type { Knex } from 'knex';

/**
 * A day's frames once nothing more is expected of it: one row a string and day, columns over time, each coded as
 * server/queries/packed-values.ts says. Packed beside the frames by a job, then swapped for them in one transaction.
 * Quarters are given up by age like raw readings, and DDL in a running system waits for seconds only.
 */
const COLUMNS = ['voltage', 'voltage_in', 'current', 'power', 'temperature', 'signal', 'via', 'state'];
const OPTIONAL = ['voltage_in', 'power'];
const VISIBLE = `exists (select from string where string.id = packed_frame.string_id)
  and (packed_frame.day + 1)::timestamp at time zone 'UTC' > (select actor_raw_from())`;
const FUNCTIONS = ['begin_packing(date)', 'finish_packing(date, int8)', 'drop_quarters_before(date)'];

export async function up(knex: Knex): Promise<void> {
  await knex.raw(`
    create type packed_values as (
      level int2[], -- a frame
      share int2[], -- a span of 60 frames and slot
      width int2[], -- bits of a rest, a span
      start int4[], -- where a span's rests begin, bytes
      rest bytea,
      has int8[] -- which slots have a value, a frame; NULL: those of the frame's mask
    );
    create table packed_frame (
      day date not null, -- UTC
      string_id int4 not null,
      part int2 not null, -- a string whose slots or measured quantities changed that day has several
      slots int2 not null,
      frames int4 not null,
      steps int8[] not null, -- µs: the first from the day's beginning, each other from the one before
      mask int8[] not null,
      voltage_sum int4[] not null,
      power_sum int4[] not null,
      ${COLUMNS.map((c) => `${c} packed_values${OPTIONAL.includes(c) ? '' : ' not null'}`).join(',\n      ')},
      primary key (string_id, day, part)
    ) partition by range (day);

    -- instants of the packed frames within [from_at, to_at), and which frames they are; no row where there is none
    create function packed_span(day date, steps int8[], from_at timestamptz, to_at timestamptz,
      out at timestamptz[], out first int4, out last int4) returns setof record
      language plpgsql stable parallel safe rows 1 as $f$
    declare midnight timestamptz := day::timestamp at time zone 'UTC';
    begin
      return query
        select array_agg(t.at order by t.o), min(t.o)::int4, max(t.o)::int4
        from (select u.o, midnight + interval '1 microsecond' * sum(u.step) over (order by u.o)::float8 as at
              from unnest(steps) with ordinality u(step, o)) t
        where t.at >= from_at and t.at < to_at having count(*) > 0;
    end $f$;

    -- one column of packed frames first … last, in their order
    create function unpack_values(packed packed_values, slots int4, mask int8[], first int4, last int4)
      returns setof int2[] language plpgsql immutable parallel safe rows 1440 as $f$
    declare
      level int2[] := packed.level; share int2[] := packed.share;
      width int2[] := packed.width; start int4[] := packed.start;
      rest bytea := packed.rest; has int8[] := coalesce(packed.has, mask);
    begin
      if packed.level is null then return; end if;
      return query
        select array(
          select case when (fr.told >> s) & 1 = 1 then
              (((fr.level + share[fr.at_share + s] + ((z.z >> 1) # -(z.z & 1)) + 163840) & 65535) - 32768)::int2 end
          from generate_series(0, slots - 1) s
            cross join lateral (select fr.at_bit + s * fr.width as bit) b
            cross join lateral (select case when fr.width = 0 then 0 else
              ((get_byte(rest, fr.start + (b.bit >> 3)) | (get_byte(rest, fr.start + (b.bit >> 3) + 1) << 8)
                | (get_byte(rest, fr.start + (b.bit >> 3) + 2) << 16)) >> (b.bit & 7)) & ((1 << fr.width) - 1) end as z) z)
        from (select level[f]::int4 as level, has[f] as told, width[(f - 1) / 60 + 1]::int4 as width,
                start[(f - 1) / 60 + 1] as start, (f - 1) / 60 * slots + 1 as at_share,
                (f - 1) % 60 * slots * width[(f - 1) / 60 + 1] as at_bit
              from generate_series(first, last) f offset 0) fr;
    end $f$;

    create function refuse_closed_day() returns trigger language plpgsql as $f$
    begin
      raise exception 'the day of this frame is being packed' using errcode = 'check_violation';
    end $f$;

    -- from here on nothing is written into the day; its packed rows come into a table of their own
    create function begin_packing(d date) returns boolean language plpgsql security definer
      set search_path = public, pg_temp set lock_timeout = '3s' as $f$
    declare hot text := 'string_frame_' || to_char(d, 'YYYYMMDD'); packed text := 'packed_frame_' || to_char(d, 'YYYYMMDD');
    begin
      perform pg_advisory_xact_lock(727001);
      if to_regclass(hot) is null then return false; end if;
      if to_regclass(packed) is null then
        execute format('create table %I (like packed_frame including all, check (day >= %L and day < %L))
          with (toast_tuple_target = 256)', packed, d, d + 1);
        if exists (select from pg_roles where rolname = 'wakeline_ingest') then
          execute format('grant select, insert, update on %I to wakeline_ingest', packed);
        end if;
        execute format('create trigger closed before insert or update on %I
          for each row execute function refuse_closed_day()', hot);
      end if;
      return true;
    end $f$;

    -- swaps the frames for the packed rows, if these hold as many
    create function finish_packing(d date, expected int8) returns void language plpgsql security definer
      set search_path = public, pg_temp set lock_timeout = '3s' as $f$
    declare hot text := 'string_frame_' || to_char(d, 'YYYYMMDD'); packed text := 'packed_frame_' || to_char(d, 'YYYYMMDD'); n int8;
    begin
      perform pg_advisory_xact_lock(727001);
      if to_regclass(hot) is null then return; end if;
      execute format('select coalesce(sum(frames), 0) from %I', packed) into n;
      if n <> expected then
        raise exception '% frames are packed of the %, which has %', n, d, expected;
      end if;
      execute format('alter table packed_frame attach partition %I for values from (%L) to (%L)', packed, d, d + 1);
      execute format('drop table %I', hot);
    end $f$;

    create or replace function ensure_days(d0 date, d1 date) returns void language plpgsql security definer
      set search_path = public, pg_temp set lock_timeout = '5s' as $f$
    declare d date; t text;
    begin
      perform pg_advisory_xact_lock(727001);
      d := d0;
      while d <= d1 loop
        foreach t in array array['string_frame', 'input_frame', 'inverter_frame', 'weather_frame', 'string_quarter'] loop
          -- a packed day has no place for single frames any more
          continue when t = 'string_frame' and to_regclass('packed_frame_' || to_char(d, 'YYYYMMDD')) is not null;
          if to_regclass(t || '_' || to_char(d, 'YYYYMMDD')) is null then
            execute format('create table %I partition of %I for values from (%L) to (%L)',
              t || '_' || to_char(d, 'YYYYMMDD'), t, d::text || ' 00:00Z', (d + 1)::text || ' 00:00Z');
          end if;
        end loop;
        d := d + 1;
      end loop;
    end $f$;

    create or replace function drop_days_before(d date) returns int4 language plpgsql security definer
      set search_path = public, pg_temp set lock_timeout = '5s' as $f$
    declare part text; dropped int4 := 0;
    begin
      perform pg_advisory_xact_lock(727001);
      -- by name: also a day that was given up in the middle of its packing
      for part in select c.relname from pg_class c
                  where c.relnamespace = 'public'::regnamespace and c.relkind = 'r'
                    and c.relname ~ '^(string|input|inverter|weather|packed)_frame_\\d{8}$'
                    and right(c.relname, 8) < to_char(d, 'YYYYMMDD') order by 1 loop
        execute format('drop table %I', part);
        dropped := dropped + 1;
      end loop;
      return dropped;
    end $f$;

    -- quarters of an hour before this UTC day; days stay for ever
    create function drop_quarters_before(d date) returns int4 language plpgsql security definer
      set search_path = public, pg_temp set lock_timeout = '5s' as $f$
    declare part text; place int4; dropped int4 := 0;
    begin
      perform pg_advisory_xact_lock(727001);
      for part in select c.relname from pg_inherits i join pg_class c on c.oid = i.inhrelid
                  where i.inhparent = 'string_quarter'::regclass and right(c.relname, 8) < to_char(d, 'YYYYMMDD') loop
        execute format('drop table %I', part);
        dropped := dropped + 1;
      end loop;
      for place in select id from site loop
        delete from site_quarter where site_id = place and at < d::timestamp at time zone 'UTC';
      end loop;
      return dropped;
    end $f$;
  `);
  // a server that was built without lz4 packs with its own method
  await knex.raw(`
    do $$ begin
      ${['steps', 'mask', 'voltage_sum', 'power_sum', ...COLUMNS]
        .map((c) => `alter table packed_frame alter ${c} set compression lz4;`)
        .join('\n      ')}
    exception when feature_not_supported then null;
    end $$;
  `);
  const { rows } = await knex.raw<{ rows: { roles_made: boolean }[] }>('select roles_made from installation');
  if (!rows[0]?.roles_made) return;
  await knex.raw(`
    alter table packed_frame enable row level security;
    create policy packed_frame_app on packed_frame to wakeline_app using (${VISIBLE}) with check (${VISIBLE});
    create policy packed_frame_ingest on packed_frame to wakeline_ingest using (true) with check (true);
    grant select on packed_frame to wakeline_app, wakeline_ingest;
    grant insert, update, delete on packed_frame to wakeline_ingest;
  `);
  for (const name of FUNCTIONS)
    await knex.raw(
      `revoke execute on function ${name} from public; grant execute on function ${name} to wakeline_ingest`,
    );
}

/** Refuses while days are packed: their frames would be lost. */
export async function down(knex: Knex): Promise<void> {
  await knex.raw(`
    do $$ begin
      if exists (select from pg_inherits where inhparent = 'packed_frame'::regclass) then
        raise exception 'days are packed: their readings would be lost';
      end if;
    end $$;
    create or replace function ensure_days(d0 date, d1 date) returns void language plpgsql security definer
      set search_path = public, pg_temp as $f$
    declare d date; t text;
    begin
      perform pg_advisory_xact_lock(727001);
      d := d0;
      while d <= d1 loop
        foreach t in array array['string_frame', 'input_frame', 'inverter_frame', 'weather_frame', 'string_quarter'] loop
          if to_regclass(t || '_' || to_char(d, 'YYYYMMDD')) is null then
            execute format('create table %I partition of %I for values from (%L) to (%L)',
              t || '_' || to_char(d, 'YYYYMMDD'), t, d::text || ' 00:00Z', (d + 1)::text || ' 00:00Z');
          end if;
        end loop;
        d := d + 1;
      end loop;
    end $f$;
    create or replace function drop_days_before(d date) returns int4 language plpgsql security definer
      set search_path = public, pg_temp as $f$
    declare t text; part text; dropped int4 := 0;
    begin
      perform pg_advisory_xact_lock(727001);
      foreach t in array array['string_frame', 'input_frame', 'inverter_frame', 'weather_frame'] loop
        for part in select c.relname from pg_inherits i join pg_class c on c.oid = i.inhrelid
                    where i.inhparent = t::regclass and right(c.relname, 8) < to_char(d, 'YYYYMMDD') loop
          execute format('drop table %I', part);
          dropped := dropped + 1;
        end loop;
      end loop;
      return dropped;
    end $f$;
    drop function drop_quarters_before, finish_packing, begin_packing, refuse_closed_day, unpack_values, packed_span;
    drop table packed_frame;
    drop type packed_values;
  `);
}

import type { Knex } from 'knex';

/**
 * Readings as they come, the newest of each string, roll-ups. Arrays run over a string's slots in order
 * (index = position − 1); NULL means that the unit did not report. Daily partitions by UTC day.
 */
export async function up(knex: Knex): Promise<void> {
  await knex.raw(`
    create table string_frame (
      at timestamptz not null,
      mask int8 not null, -- bit (position − 1) set: that unit reported
      string_id int4 not null,
      voltage_sum int4 not null, -- cV, over the units' outputs (inputs where the type measures no output)
      power_sum int4 not null, -- dW
      voltage int2[] not null, -- cV, output side
      voltage_in int2[], -- cV, module side, where the type measures it
      current int2[] not null, -- mA, output side
      power int2[], -- dW, where the unit reports it
      temperature int2[] not null, -- 0.1 °C
      signal int2[] not null, -- dBm
      via int2[] not null, -- gateway number
      state int2[] not null, -- the unit's claim: 0 unknown 1 passing 2 shutdown 3 starting 4 fault
      primary key (string_id, at) include (voltage_sum, power_sum)
    ) partition by range (at);
    create index string_frame_at on string_frame using brin (at) with (pages_per_range = 16);

    create table input_frame (
      at timestamptz not null,
      input_id int4 not null,
      voltage int4, -- dV
      current int4, -- cA
      primary key (input_id, at)
    ) partition by range (at);

    create table inverter_frame (
      at timestamptz not null,
      inverter_id int4 not null,
      ac_power int4, -- W
      energy int8, -- Wh, counter
      status text not null check (status in ('standby', 'running', 'derated', 'curtailed', 'grid_lost', 'fault')),
      power_limit int4, -- W
      insulation int4, -- kohm
      arc_flag boolean not null default false,
      earth_fault_flag boolean not null default false,
      primary key (inverter_id, at)
    ) partition by range (at);

    create table weather_frame (
      at timestamptz not null,
      sensor_id int4 not null,
      irradiance int2, -- W/m², as the sensor's kind says
      temperature_air int2, -- 0.1 °C
      temperature_module int2, -- 0.1 °C
      wind_speed int2, -- 0.1 m/s
      primary key (sensor_id, at)
    ) partition by range (at);

    create table string_quarter ( -- 15 minutes from "at"
      at timestamptz not null,
      string_id int4 not null,
      frames int2 not null,
      voltage_avg int4 not null, -- cV
      voltage_min int4 not null,
      voltage_max int4 not null,
      energy int4 not null, -- dW·min
      unit_voltage int2[], -- cV, mean
      unit_current int2[], -- mA, mean
      unit_energy int4[], -- dW·min
      unit_temperature_max int2[], -- 0.1 °C
      primary key (string_id, at)
    ) partition by range (at);

    -- frames whose day has no partition any more (packed or past retention), kept for the merge job
    create table late_frame (
      id int8 generated always as identity primary key,
      string_id int4 not null,
      at timestamptz not null,
      frame jsonb not null,
      received_at timestamptz not null default now()
    );

    create table string_state ( -- the newest frame of each string; seen holds each slot's own time
      string_id int4 primary key references string on delete cascade,
      site_id int4 not null,
      at timestamptz not null,
      mask int8 not null,
      voltage_sum int4, power_sum int4,
      voltage int2[], voltage_in int2[], current int2[], power int2[], temperature int2[], signal int2[], via int2[], state int2[],
      seen int4[] not null -- epoch seconds of each slot's newest value
    ) with (fillfactor = 50, autovacuum_vacuum_scale_factor = 0.05);
    create index string_state_site on string_state (site_id);

    create table input_state (
      input_id int4 primary key references input on delete cascade,
      site_id int4 not null,
      at timestamptz not null,
      voltage int4, current int4
    ) with (fillfactor = 50);
    create index input_state_site on input_state (site_id);

    create table inverter_state (
      inverter_id int4 primary key references inverter on delete cascade,
      site_id int4 not null,
      at timestamptz not null,
      ac_power int4, energy int8, status text not null, power_limit int4, insulation int4,
      arc_flag boolean not null, earth_fault_flag boolean not null
    ) with (fillfactor = 50);
    create index inverter_state_site on inverter_state (site_id);

    create table weather_state (
      sensor_id int4 primary key references sensor on delete cascade,
      site_id int4 not null,
      at timestamptz not null,
      irradiance int2, temperature_air int2, temperature_module int2, wind_speed int2
    ) with (fillfactor = 50);
    create index weather_state_site on weather_state (site_id);

    create table rollup_dirty (
      quarter timestamptz not null,
      string_id int4 not null,
      primary key (quarter, string_id)
    );
    create table rollup_watermark ( -- quarters before this instant are closed and rolled up
      only_row boolean primary key default true check (only_row),
      quarter timestamptz not null
    );

    create table string_day ( -- the site's local date, made from quarters
      day date not null,
      string_id int4 not null references string on delete cascade,
      site_id int4 not null,
      frames int4 not null,
      voltage_avg int4 not null, -- cV, over the quarters with energy
      voltage_max int4 not null,
      energy int4 not null, -- Wh
      unit_energy int4[], -- Wh
      primary key (string_id, day)
    );
    create index string_day_site on string_day (site_id, day) include (energy);

    create table site_quarter (
      at timestamptz not null,
      site_id int4 not null references site on delete cascade,
      ac_power int4 not null, -- W, mean
      poa_insolation int4, -- Wh/m² in the quarter, where a sensor says
      primary key (site_id, at)
    );
    create table site_day (
      day date not null,
      site_id int4 not null references site on delete cascade,
      energy_ac int8 not null, -- Wh
      energy_dc int8 not null, -- Wh
      energy_expected int8, -- Wh: what the day's weather allowed
      lost_minutes int2 not null default 0, -- daylight minutes without production
      lost_minutes_grid int2 not null default 0, -- of them with the grid gone
      complete real not null default 1 check (complete between 0 and 1),
      primary key (site_id, day)
    );

    create table trace ( -- second-by-second voltages after a command
      id int8 generated always as identity primary key,
      site_id int4 not null references site on delete cascade,
      string_id int4 not null,
      started_at timestamptz not null,
      measuring_point text not null check (measuring_point in ('home_run', 'input', 'unit_sum')),
      accuracy real not null, -- V
      voltage int4[] not null, -- dV, one a second from started_at; NULL where unknown
      unit_voltage jsonb, -- [[cV per slot] per second], where known
      unique (string_id, started_at, measuring_point)
    );

    -- daily partitions of every frame table and of the quarters, for the days d0 … d1 (UTC)
    create function ensure_days(d0 date, d1 date) returns void language plpgsql security definer
      set search_path = public as $f$
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

    -- raw readings before this UTC day are given up, partition by partition; roll-ups stay
    create function drop_days_before(d date) returns int4 language plpgsql security definer
      set search_path = public as $f$
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

    create function merge_values(a int2[], b int2[]) returns int2[] language sql immutable parallel safe as
      $f$ select array_agg(coalesce(x, y) order by o) from unnest(a, b) with ordinality u(x, y, o) $f$;
    create function sum_values(a int2[]) returns int4 language sql immutable parallel safe as
      $f$ select coalesce(sum(x), 0)::int4 from unnest(a) x $f$;
    create function newest_values(a int2[], a_seen int4[], b int2[], b_seen int4[]) returns int2[]
      language sql immutable parallel safe as
      $f$ select array_agg(case when coalesce(tb, 0) > coalesce(ta, 0) then y else x end order by o)
          from unnest(a, a_seen, b, b_seen) with ordinality u(x, ta, y, tb, o) $f$;
    create function newest_seen(a int4[], b int4[]) returns int4[] language sql immutable parallel safe as
      $f$ select array_agg(greatest(coalesce(x, 0), coalesce(y, 0)) order by o)
          from unnest(a, b) with ordinality u(x, y, o) $f$;
    -- cV over a string's units: outputs, or inputs where the type measures no output
    create function frame_voltage(voltage int2[], voltage_in int2[]) returns int4 language sql immutable parallel safe as
      $f$ select coalesce(sum(coalesce(o, i)), 0)::int4 from unnest(voltage, voltage_in) u(o, i) $f$;
    -- dW over a string's units: as reported, else output voltage by current, else input voltage of the units that pass
    create function frame_power(voltage int2[], voltage_in int2[], current int2[], power int2[], state int2[])
      returns int4 language sql immutable parallel safe as
      $f$ select coalesce(round(sum(case when p is not null then p::int8 * 10000 when o is not null then o::int8 * c
                                         when s = 1 then i::int8 * c end) / 10000.0), 0)::int4
          from unnest(voltage, voltage_in, current, power, state) u(o, i, c, p, s) $f$;
  `);
}

export async function down(knex: Knex): Promise<void> {
  await knex.raw(`
    drop function frame_power, frame_voltage, newest_seen, newest_values, sum_values, merge_values, drop_days_before, ensure_days;
    drop table trace, site_day, site_quarter, string_day, rollup_watermark, rollup_dirty, weather_state, inverter_state, input_state,
      string_state, late_frame, string_quarter, weather_frame, inverter_frame, input_frame, string_frame;
  `);
}

import type { Knex } from 'knex';

/**
 * Ingest copies frames into the partition of their day, by its own name: COPY does not go through row-level security, which
 * lets ingest write everything as it is. Nobody else may touch a partition by its name.
 */

/** As it was, where nothing is done besides. */
const ensureDays = (also = ''): string => `
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
              t || '_' || to_char(d, 'YYYYMMDD'), t, d::text || ' 00:00Z', (d + 1)::text || ' 00:00Z');${also}
          end if;
        end loop;
        d := d + 1;
      end loop;
    end $f$;`;

/** Where the role is, one deed for each partition that there is, as a text for `format`. */
const eachPartition = (deed: string): string => `
    do $do$
    declare part text;
    begin
      if exists (select from pg_roles where rolname = 'wakeline_ingest') then
        for part in select c.relname from pg_inherits i join pg_class c on c.oid = i.inhrelid
                    where i.inhparent = 'string_frame'::regclass loop
          execute format('${deed}', part);
        end loop;
      end if;
    end $do$;`;

const GRANT = 'grant insert on %I to wakeline_ingest';

export async function up(knex: Knex): Promise<void> {
  await knex.raw(`
    ${ensureDays(`
            if t = 'string_frame' and exists (select from pg_roles where rolname = 'wakeline_ingest') then
              execute format('${GRANT}', t || '_' || to_char(d, 'YYYYMMDD'));
            end if;`)}
    set local lock_timeout = '5s';
    ${eachPartition(GRANT)}
  `);
}

export async function down(knex: Knex): Promise<void> {
  await knex.raw(`
    ${ensureDays()}
    ${eachPartition('revoke all on %I from wakeline_ingest')}
  `);
}

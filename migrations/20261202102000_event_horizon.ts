import type { Knex } from 'knex';

/**
 * Below which transaction no event can appear any more: what a reader by cursor may read. PostgreSQL's own answer
 * (pg_snapshot_xmin) waits for the transactions of every database of the cluster.
 */
export async function up(knex: Knex): Promise<void> {
  await knex.raw(`
    create function event_horizon() returns xid8 language plpgsql stable parallel restricted as $f$
    declare
      here pg_snapshot := pg_current_snapshot(); -- the one that reads the events: a stable function has its caller's
      strangers int4[];
    begin
      if pg_snapshot_xmin(here) = pg_snapshot_xmax(here) then return pg_snapshot_xmax(here); end if;
      -- who is where, as of now, comes before who holds what: then a process that still holds a number of this snapshot
      -- was its holder all the while, and no other process can have come by its pid
      perform pg_stat_clear_snapshot();
      strangers := array(select pid from pg_stat_activity
        where datid <> (select oid from pg_database where datname = current_database()));
      if strangers = '{}' then return pg_snapshot_xmin(here); end if;
      -- what isn't certainly another database's counts as ours: prepared, over by now, not yet locked. A snapshot does not
      -- list its own transaction, and on a standby none
      return (
        with elsewhere as materialized (
          select transactionid from pg_locks
          where locktype = 'transactionid' and mode = 'ExclusiveLock' and granted and pid = any (strangers))
        select coalesce(min(x), pg_snapshot_xmax(here))
        from (select pg_snapshot_xip(here) as x
              union all values (pg_snapshot_xmin(here)), (pg_current_xact_id_if_assigned())) running
        where x is not null and not exists (select from elsewhere where transactionid = x::xid));
    end $f$;
  `);
}

export async function down(knex: Knex): Promise<void> {
  await knex.raw('drop function event_horizon()');
}

import type { Knex } from 'knex';

/**
 * Shutdown tests, guided and signed. What people do during a test is written step by step (`shutdown_test_act`, only
 * ever added to) under a draft; signing makes one row of `shutdown_test`, which nobody changes again. A newer test of
 * the zone that covers its strings supersedes it: the database sets that mark itself.
 */
const BY_SITE = ['shutdown_test_draft', 'shutdown_test_act', 'shutdown_test_string'];

export async function up(knex: Knex): Promise<void> {
  await knex.raw(`
    create table shutdown_test_draft (
      id int4 generated always as identity primary key,
      ref uuid not null unique default gen_random_uuid(),
      site_id int4 not null references site,
      zone_id int4 not null,
      started_by int4 not null references person,
      started_at timestamptz not null default now(),
      follows int4 references shutdown_test, -- repeats what this signed test left open
      closed_at timestamptz,
      closed_by int4 references person,
      close_reason text,
      foreign key (zone_id, site_id) references zone (id, site_id),
      unique (id, site_id),
      check ((closed_at is null) = (closed_by is null) and (closed_at is null) = (close_reason is null)),
      check (close_reason is null or length(btrim(close_reason)) between 3 and 2000)
    );
    create unique index shutdown_test_draft_one_open on shutdown_test_draft (zone_id) where closed_at is null;
    create index shutdown_test_draft_site on shutdown_test_draft (site_id, started_at desc);

    create table shutdown_test_act (
      id int8 generated always as identity primary key,
      ref uuid not null unique, -- made on the phone: sent twice is stored once
      draft_id int4 not null,
      site_id int4 not null,
      kind text not null, -- src/domain/commissioning/shutdown-test-record.ts
      body jsonb not null,
      person_id int4 not null references person,
      at timestamptz not null, -- by the phone's clock
      recorded_at timestamptz not null default clock_timestamp(),
      foreign key (draft_id, site_id) references shutdown_test_draft (id, site_id)
    );
    create index shutdown_test_act_draft on shutdown_test_act (draft_id, id);

    alter table shutdown_test
      add signed_by int4 references person, -- null: recorded before tests were signed here
      add fingerprint text, -- sha-256 over detail, canonical JSON
      add draft_id int4 unique references shutdown_test_draft,
      add follows int4 references shutdown_test,
      add supersedes int4[] not null default '{}',
      add check ((signed_by is null) = (fingerprint is null)),
      add unique (id, site_id);

    create table shutdown_test_string ( -- the result of each string, as signed
      test_id int4 not null,
      string_id int4 not null,
      site_id int4 not null,
      result text not null check (result in ('passed', 'failed', 'consistent', 'not_witnessed')),
      carried_from int4 references shutdown_test, -- not tested again: the result of the test that this one repeats
      primary key (test_id, string_id),
      foreign key (test_id, site_id) references shutdown_test (id, site_id),
      foreign key (string_id, site_id) references string (id, site_id)
    );
    create index shutdown_test_string_string on shutdown_test_string (string_id);

    -- a signed test stands as it is, whoever asks; only the mark that a newer one has come may be set, once
    create function shutdown_test_stands() returns trigger language plpgsql as $f$
    begin
      if tg_op = 'UPDATE' and tg_table_name = 'shutdown_test' then
        if old.superseded_by is null and new.superseded_by is not null
           and to_jsonb(new) - 'superseded_by' = to_jsonb(old) - 'superseded_by'
           and exists (select from shutdown_test newer where newer.id = new.superseded_by
                         and newer.site_id = old.site_id and newer.zone_id is not distinct from old.zone_id
                         and old.id = any (newer.supersedes))
        then return new; end if;
      end if;
      raise exception 'a signed shutdown test is not changed: make a newer one'
        using errcode = 'integrity_constraint_violation', constraint = 'shutdown_test_stands';
    end $f$;
    create trigger shutdown_test_stands before update or delete on shutdown_test
      for each row execute function shutdown_test_stands();
    create trigger shutdown_test_string_stands before update or delete on shutdown_test_string
      for each row execute function shutdown_test_stands();
    create trigger shutdown_test_act_stands before update or delete on shutdown_test_act
      for each row execute function shutdown_test_stands();

    create function shutdown_test_supersedes() returns trigger language plpgsql security definer
      set search_path = public as $f$
    declare marked int4;
    begin
      update shutdown_test set superseded_by = new.id where id = any (new.supersedes) and id < new.id;
      get diagnostics marked = row_count;
      if marked <> cardinality(new.supersedes) then
        raise exception 'shutdown test % names tests that it can not supersede', new.id
          using errcode = 'integrity_constraint_violation', constraint = 'shutdown_test_supersedes';
      end if;
      return null;
    end $f$;
    create trigger shutdown_test_supersedes after insert on shutdown_test
      for each row when (cardinality(new.supersedes) > 0) execute function shutdown_test_supersedes();

    -- results of the strings of a test belong to its own transaction: nobody adds one later
    create function shutdown_test_string_with_test() returns trigger language plpgsql as $f$
    begin
      if not exists (select from shutdown_test t where t.id = new.test_id and t.xmin = pg_current_xact_id()::xid) then
        raise exception 'a signed shutdown test is not changed: make a newer one'
          using errcode = 'integrity_constraint_violation', constraint = 'shutdown_test_stands';
      end if;
      return new;
    end $f$;
    create trigger shutdown_test_string_with_test before insert on shutdown_test_string
      for each row execute function shutdown_test_string_with_test();

    -- nothing is added to a test that was ended or signed
    create function shutdown_test_draft_is_open() returns trigger language plpgsql as $f$
    begin
      perform from shutdown_test_draft where id = new.draft_id and closed_at is null for share;
      if not found then
        raise exception 'this shutdown test is closed'
          using errcode = 'integrity_constraint_violation', constraint = 'shutdown_test_draft_is_open';
      end if;
      return new;
    end $f$;
    create trigger shutdown_test_draft_is_open before insert on shutdown_test_act
      for each row execute function shutdown_test_draft_is_open();
  `);
  const { rows } = await knex.raw<{ rows: { roles_made: boolean }[] }>('select roles_made from installation');
  if (!rows[0]?.roles_made) return;
  for (const t of BY_SITE)
    await knex.raw(`
      alter table ${t} enable row level security;
      create policy ${t}_app on ${t} to wakeline_app
        using (exists (select from site where site.id = ${t}.site_id))
        with check (exists (select from site where site.id = ${t}.site_id));
      create policy ${t}_ingest on ${t} to wakeline_ingest using (true) with check (true);
      grant select on ${t} to wakeline_app, wakeline_ingest;
      grant insert on ${t} to wakeline_app;
    `);
  await knex.raw(`
    grant update (closed_at, closed_by, close_reason) on shutdown_test_draft to wakeline_app;
    revoke execute on function shutdown_test_supersedes() from public;
    grant usage on all sequences in schema public to wakeline_app, wakeline_ingest;
  `);
}

export async function down(knex: Knex): Promise<void> {
  await knex.raw(`
    drop trigger shutdown_test_supersedes on shutdown_test;
    drop trigger shutdown_test_stands on shutdown_test;
    drop table shutdown_test_string, shutdown_test_act;
    alter table shutdown_test
      drop signed_by, drop fingerprint, drop draft_id, drop follows, drop supersedes,
      drop constraint shutdown_test_id_site_id_key;
    drop table shutdown_test_draft;
    drop function shutdown_test_draft_is_open, shutdown_test_string_with_test, shutdown_test_supersedes, shutdown_test_stands;
  `);
}

import type { Knex } from 'knex';

/** Tokens by which programs read and write for a person, and the replies of writes that may be sent again. */
export async function up(knex: Knex): Promise<void> {
  await knex.raw(`
    create table api_token (
      id int4 generated always as identity primary key,
      ref uuid not null unique default gen_random_uuid(),
      organisation_id int4 not null references organisation,
      person_id int4 not null references person on delete cascade,
      name text not null check (length(btrim(name)) between 1 and 80),
      scopes text[] not null check (cardinality(scopes) > 0), -- src/domain/access/scopes.ts
      sites int4[], -- null: every site that its person sees
      hash bytea not null unique, -- sha-256 of the token
      ending text not null check (length(ending) = 4), -- its last characters, to know it again
      created_at timestamptz not null default now(),
      expires_at timestamptz not null,
      ended_at timestamptz,
      ended_by int4 references person,
      last_used_at timestamptz,
      last_address text,
      check (sites is null or cardinality(sites) > 0)
    );
    create index api_token_person on api_token (person_id);

    create table api_reply ( -- what a write with an Idempotency-Key came to, written in its own transaction
      token_id int4 not null references api_token on delete cascade,
      key text not null check (length(key) between 1 and 255),
      fingerprint text not null, -- sha-256 over method, address and body
      status int2 not null,
      body jsonb,
      at timestamptz not null default now(),
      primary key (token_id, key)
    );
    create index api_reply_at on api_reply (at);
  `);
  const { rows } = await knex.raw<{ rows: { roles_made: boolean }[] }>('select roles_made from installation');
  if (!rows[0]?.roles_made) return;
  const enable = (table: string, app: string) =>
    knex.raw(`
      alter table ${table} enable row level security;
      create policy ${table}_app on ${table} to wakeline_app using (${app}) with check (${app});
    `);
  await enable('api_token', `organisation_id = (select actor_organisation()) or (select signing_in())`);
  await enable('api_reply', `exists (select from api_token where api_token.id = api_reply.token_id)`);
  await knex.raw(`
    grant select, insert, update (ended_at, ended_by, last_used_at, last_address) on api_token to wakeline_app;
    grant select, insert, delete on api_reply to wakeline_app;
    grant usage on all sequences in schema public to wakeline_app, wakeline_ingest;
  `);
}

export async function down(knex: Knex): Promise<void> {
  await knex.raw('drop table api_reply, api_token');
}

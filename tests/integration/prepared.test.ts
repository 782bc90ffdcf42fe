import { afterAll, beforeAll, expect, it } from 'vitest';
import { database } from '../../src/server/db/pools';
import { asActor, asIngest } from '../../src/server/db/transaction';
import { siteRefs } from '../../src/server/queries/visible-site';
import { testDatabase, type TestDatabase } from '../support/database';
import { testFleet } from '../support/fleet';

/** Statements that are prepared because they come again. */

let db: TestDatabase;
beforeAll(async () => {
  db = await testDatabase();
});
afterAll(() => db.drop());

const asked = `select tried.n, tried.text as "text", '${'a statement as long as those of pages are '.repeat(4)}' as words
  from tried where tried.n = :n::int4`;

it('are planned once, see who asks each time, and come back where the schema has changed', async () => {
  await db.owner
    .query(`create table tried (n int4, text text); insert into tried values (1, 'one'), (2, 'two');
    grant select on tried to public`);
  const ask = (n: number) =>
    asIngest(async (tx) => (await tx.raw<{ rows: { text: unknown }[] }>(asked, { n })).rows[0]?.text);
  for (let i = 0; i < 6; i++) expect(await ask(1 + (i % 2))).toBe(i % 2 === 0 ? 'one' : 'two');
  const { rows } = await database('ingest').raw<{ rows: { n: number }[] }>(
    `select count(*)::int as n from pg_prepared_statements where statement like '%a statement as long%'
     and statement not like '%pg_prepared_statements%'`,
  );
  expect(rows[0]?.n).toBe(1);

  await db.owner.query(`alter table tried alter text type int4 using n; alter table tried alter n type int8`);
  await expect(ask(1)).rejects.toMatchObject({ code: '0A000' });
  for (let i = 0; i < 6; i++) expect(await ask(1)).toBe(1);
});

it('show each actor their own', async () => {
  const fleet = await testFleet(db, ['Weirside Clinic']);
  const site = fleet.site('Weirside Clinic');
  const mine = await fleet.actor('analyst@lowfield.example');
  const stranger = await fleet.actor('manager@harbourline.example');
  const padded = (actor: typeof mine) =>
    asActor(actor, async (tx) => {
      const { rows } = await tx.raw<{ rows: { ref: string }[] }>(
        `select site.ref, '${'walls hold for statements that are prepared as well '.repeat(4)}' as words from site where id = :id`,
        { id: site.id },
      );
      return rows.map((r) => r.ref);
    });
  const { id } = site;
  const expected = (await asIngest((tx) => siteRefs(tx, [id]))).map((r) => r.ref);
  for (let i = 0; i < 6; i++) {
    expect(await padded(mine)).toEqual(expected);
    expect(await padded(stranger)).toEqual([]);
  }
});

import type pg from 'pg';
import { afterAll, afterEach, beforeAll, describe, expect, it } from 'vitest';
import type { Actor } from '../../src/domain/access/permissions';
import { asActor, asIngest } from '../../src/server/db/transaction';
import { horizon } from '../../src/server/queries/horizon';
import { eventsBetween } from '../../src/server/queries/live';
import { eventsAsRecorded } from '../../src/server/queries/v1-history';
import { testDatabase, type TestDatabase } from '../support/database';
import { transactionElsewhere, type Elsewhere } from '../support/elsewhere';
import { testFleet } from '../support/fleet';

/** Asked as the product asks: by the roles that see of other databases no more than that somebody is there. */
const HERE = 'Weirside Clinic';
let db: TestDatabase;
let siteId: number;
let analyst: Actor;
const elsewhere: Elsewhere[] = [];
const writers: pg.PoolClient[] = [];

beforeAll(async () => {
  db = await testDatabase();
  const fleet = await testFleet(db, [HERE]);
  siteId = fleet.site(HERE).id;
  analyst = await fleet.actor('analyst@lowfield.example');
});
afterEach(async () => {
  for (const client of writers.splice(0)) {
    await client.query('rollback');
    client.release();
  }
  for (const other of elsewhere.splice(0)) await other.end();
});
afterAll(() => db.drop());

const other = async (): Promise<Elsewhere> => {
  const transaction = await transactionElsewhere(db);
  elsewhere.push(transaction);
  return transaction;
};
const write = async (by: pg.Pool | pg.PoolClient): Promise<{ id: string; xid: bigint }> => {
  const { rows } = await by.query<{ id: string; xid: string }>(
    `insert into event (at, organisation_id, site_id, kind) select now(), organisation_id, id, 'roster_changed'
     from site where id = $1 returning id::text, xid::text`,
    [siteId],
  );
  return { id: rows[0]!.id, xid: BigInt(rows[0]!.xid) };
};
/** Writes an event in a transaction of our own database that stays open. */
const begins = async () => {
  const client = await db.owner.connect();
  writers.push(client);
  await client.query('begin');
  return { client, ...(await write(client)) };
};
const below = async (): Promise<bigint> => BigInt((await asIngest(horizon)).below);
const followed = async (): Promise<string[]> =>
  (await asActor(analyst, (tx) => eventsAsRecorded(tx, {}, null, 1000))).map((e) => e.id);
/** What a reader by cursor gets, from one round to the next. */
const read = async (from: string): Promise<{ ids: string[]; to: string; held: boolean }> =>
  asIngest(async (tx) => {
    const { below: to, held } = await horizon(tx);
    const { events } = await eventsBetween(tx, from, to, { siteIds: [siteId] }, 1000);
    return { ids: events.map((e) => e.id), to, held };
  });

describe('how far events may be read', () => {
  it('does not hang on transactions of other databases', async () => {
    const { xid } = await other();
    const event = await write(db.owner);
    expect(event.xid).toBeGreaterThan(BigInt(xid));
    // another test's may be counted for the moment between its number and its lock
    await expect.poll(below).toBeGreaterThan(event.xid);
    await expect.poll(followed).toContain(event.id);
    await expect.poll(async () => (await asIngest(horizon)).held).toBe(false);
  });

  it('ends at the oldest writer of our own, among those of other databases; none is missed', async () => {
    const { to } = await read('0');
    await other();
    const early = await begins();
    await other();
    const late = await write(db.owner);
    await other();
    await expect.poll(below).toBe(early.xid);
    const during = await read(to);
    expect(during).toEqual({ ids: [], to: String(early.xid), held: true });
    expect(await followed()).not.toContain(late.id);
    await early.client.query('commit');
    await expect.poll(below).toBeGreaterThan(late.xid);
    expect((await read(during.to)).ids).toEqual([early.id, late.id]);
    expect((await followed()).slice(-2)).toEqual([early.id, late.id]);
  });

  it('ends at the oldest of several writers, and moves on as they end', async () => {
    const [first, second] = [await begins(), await begins()];
    await other();
    await expect.poll(below).toBe(first.xid);
    await first.client.query('commit');
    await expect.poll(below).toBe(second.xid);
    expect(await followed()).toContain(first.id);
    expect(await followed()).not.toContain(second.id);
    await second.client.query('rollback');
    await expect.poll(below).toBeGreaterThan(second.xid);
  });

  it('does not pass over what the reader itself has yet to write', async () => {
    await other();
    const { own, to } = await asIngest(async (tx) => {
      const { rows } = await tx.raw<{ rows: { xid: string }[] }>(
        'select pg_current_xact_id()::text as xid from site limit 1',
      );
      await write(db.owner);
      return { own: rows[0]!.xid, to: await horizon(tx) };
    });
    expect(BigInt(to.below)).toBeLessThanOrEqual(BigInt(own));
    expect(to.held).toBe(true);
  });
});

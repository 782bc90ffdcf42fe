import { setTimeout as sleep } from 'node:timers/promises';
import pg from 'pg';
import { afterAll, beforeAll, expect, it } from 'vitest';
import { WebSocket } from 'ws';
import type { LiveMessage } from '../../src/schemas/live';
import { paths } from '../../src/schemas/paths';
import { openSession } from '../../src/server/auth/sessions';
import { startLive, stopLive } from '../../src/server/live/service';
import { testDatabase, type TestDatabase } from '../support/database';
import { testFleet } from '../support/fleet';
import { Inbox, openSockets, until, type Sockets } from '../support/ingest';

let db: TestDatabase;
let sockets: Sockets;
let ws: WebSocket;
let inbox: Inbox<LiveMessage>;
let siteId = 0;

beforeAll(async () => {
  db = await testDatabase();
  const fleet = await testFleet(db, ['Old Tannery Market Hall']);
  const site = fleet.site('Old Tannery Market Hall');
  siteId = site.id;
  await startLive();
  sockets = await openSockets();
  const person = fleet.seeded.people.get('analyst@lowfield.example')?.id ?? 0;
  const cookie = (await openSession(person, false)).split(';')[0] ?? '';
  ws = new WebSocket(`${sockets.url}${paths.live()}`, { headers: { cookie } });
  inbox = new Inbox<LiveMessage>(ws);
  await new Promise((resolve) => ws.once('open', resolve));
  ws.send(JSON.stringify({ type: 'subscribe', topic: `site:${site.ref}` }));
  await inbox.next('snapshot');
});
afterAll(async () => {
  ws.terminate();
  await stopLive();
  await sockets.close();
  await db.drop();
});

it('a browser hears every few seconds that the database answers, and nothing while a reading of it hangs', async () => {
  for (const _ of [1, 2]) {
    const { change } = await inbox.next('delta', () => true, 6500);
    expect(change).toEqual({});
  }
  const other = new pg.Client(db.url);
  await other.connect();
  await other.query('begin');
  await other.query('lock table event in access exclusive mode');
  try {
    await db.owner.query(
      `select pg_notify('changed', json_build_object('sites', json_build_array($1::int4))::text)`,
      [siteId],
    );
    await sleep(6000);
    const heard = inbox.all.length;
    await sleep(7000);
    expect(inbox.all).toHaveLength(heard);
  } finally {
    await other.query('rollback');
    await other.end();
  }
  const heard = inbox.all.length;
  await until(async () => inbox.all.length > heard, 'it is told again', 8000);
});

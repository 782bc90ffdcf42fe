import path from 'node:path';
import pg from 'pg';
import { afterAll, beforeAll, beforeEach, describe, expect, it, vi } from 'vitest';
import type { Actor } from '../../src/domain/access/permissions';
import { GET as history } from '../../src/pages/api/strings/[string]/history';
import { closePools } from '../../src/server/db/pools';
import { asActor, type Tx } from '../../src/server/db/transaction';
import { hasJustWritten, justWrittenCookie } from '../../src/server/http/just-written';
import { log } from '../../src/server/log';
import { asOnlooker, piecesAsOnlooker, replicaStatus } from '../../src/server/replica';
import { readStatus } from '../../src/server/services/status';
import { atPort, baseBackup, startServer, type SecondServer } from '../../src/server/up/second-cluster.mjs';
import { askV1, tokenFor, writeFrames } from '../support/api-v1';
import { testFleet, type TestFleet } from '../support/fleet';
import { ownCluster, type OwnCluster } from '../support/own-cluster';

/** A streaming replica in a second cluster: who reads from it, and what happens when it lags, refuses or is gone. */
const CLINIC = 'Weirside Clinic';
const MINUTES = 60;
const FROM = new Date(Math.floor(Date.now() / 86_400_000) * 86_400_000 - 86_400_000);
const SETTINGS = { max_standby_streaming_delay: '200ms', hot_standby_feedback: 'off' };

let cluster: OwnCluster;
let fleet: TestFleet;
let manager: Actor;
let other: Actor;
let standby: SecondServer | undefined;
let standbyData: string;
let at: number;
let admin: pg.Client | undefined;
let warned: string[];

beforeAll(async () => {
  cluster = await ownCluster();
  fleet = await testFleet(cluster, [CLINIC]);
  await writeFrames(cluster.owner, fleet.site(CLINIC).id, FROM, MINUTES);
  manager = await fleet.actor('manager@lowfield.example');
  other = await fleet.actor('manager@harbourline.example');
  standbyData = path.join(cluster.folder, 'standby');
  await baseBackup(cluster.superUrl, standbyData, { standby: true });
  standby = await startServer(standbyData, SETTINGS);
  at = standby.port;
  process.env.DATABASE_REPLICA_URL = `postgres://127.0.0.1:${at}`;
  process.env.DATABASE_REPLICA_LAG_S = '2';
  admin = new pg.Client(atPort(cluster.superUrl, at));
  admin.on('error', () => undefined);
  await admin.connect();
});
afterAll(async () => {
  await admin?.end().catch(() => undefined);
  await closePools();
  await standby?.stop('immediate');
  await cluster.drop();
});
beforeEach(() => {
  warned = [];
  vi.spyOn(log, 'warn').mockImplementation(((_: unknown, words: string) => warned.push(words)) as never);
});

const isReplica = async (tx: Tx): Promise<boolean> => {
  const { rows } = await tx.raw<{ rows: { is: boolean }[] }>('select pg_is_in_recovery() as "is"');
  return rows[0]?.is ?? false;
};
const state = async () => (await replicaStatus()).state;
const served = () => expect.poll(state).toBe('serves');
/** Writes on the primary, and gives what the replica has to reach. */
const write = () =>
  cluster.owner.query(`insert into organisation (name) values ('Written ' || clock_timestamp())`);

describe('a replica that keeps up', () => {
  it('answers readers, who see by its policies what they may see, and nobody who writes', async () => {
    await served();
    const sites = (tx: Tx) => tx.raw<{ rows: { name: string }[] }>('select name from site');
    const seen = await asOnlooker(manager, async (tx) => ({ on: await isReplica(tx), ...(await sites(tx)) }));
    expect(seen.on).toBe(true);
    expect(seen.rows.map((r) => r.name)).toEqual([CLINIC]);
    expect((await asOnlooker(other, sites)).rows).toEqual([]);
    const customer = { organisationId: manager.organisationId, sites: [] };
    expect((await asOnlooker(customer, sites)).rows).toEqual([]);
    expect(await asActor(manager, isReplica)).toBe(false);
    await expect(asOnlooker(manager, (tx) => tx.raw(`update site set name = 'X'`))).rejects.toThrow(
      /read-only/,
    );
    expect(await replicaStatus()).toMatchObject({ configured: true, lagS: expect.any(Number) as number });
    const status = await asActor(manager, (tx) => readStatus(tx, new Date()));
    expect(status.replica).toMatchObject({ state: 'serves', lagS: expect.any(Number) as number });
  });

  it('gives the same history of a string and the same stream as the primary, and reads a stream to its end', async () => {
    await served();
    const [string] = [...fleet.site(CLINIC).strings.values()];
    const ask = async (cookie: string): Promise<unknown> => {
      const url = new URL(`http://localhost/api/strings/x/history?on=${FROM.toISOString().slice(0, 10)}`);
      const request = new Request(url, { headers: { cookie } });
      const params = { string: string?.ref };
      const answer = await history({
        locals: { requestId: 'test', actor: manager, viewer: null, sessionId: null },
        url,
        request,
        params,
      } as never);
      expect(answer.status).toBe(200);
      return answer.json();
    };
    expect(await ask('')).toEqual(await ask('wakeline_wrote=1'));
    const { token } = await tokenFor(manager);
    await expect
      .poll(async () => {
        const answer = await askV1(
          `/telemetry/frames?${new URLSearchParams({
            site: fleet.site(CLINIC).ref,
            from: FROM.toISOString(),
            to: new Date(FROM.getTime() + MINUTES * 60_000).toISOString(),
          }).toString()}`,
          { token },
        );
        return (await answer.text()).trim().split('\n').length;
      })
      .toBe(fleet.site(CLINIC).strings.size * MINUTES);
  });

  it('does not answer a browser that has just written, until the replica surely has it', async () => {
    await served();
    const cookie = justWrittenCookie() ?? '';
    expect(cookie).toContain('Max-Age=4;');
    expect(
      hasJustWritten(new Request('http://localhost', { headers: { cookie: cookie.split(';')[0] ?? '' } })),
    ).toBe(true);
    expect(
      hasJustWritten(new Request('http://localhost', { headers: { cookie: 'wakeline_session=1' } })),
    ).toBe(false);
    await asOnlooker(manager, async (tx) => expect(await isReplica(tx)).toBe(false), true);
  });
});

describe('a replica that is behind', () => {
  it('is read from up to the limit, and the primary answers beyond it', async () => {
    await admin?.query('select pg_wal_replay_pause()');
    try {
      await write();
      await expect.poll(state).toBe('behind');
      expect((await replicaStatus()).lagS).toBeGreaterThan(2);
      expect(await asOnlooker(manager, isReplica)).toBe(false);
      expect(warned).toContain('the replica does not serve; the primary answers its readers');
    } finally {
      await admin?.query('select pg_wal_replay_resume()');
    }
    await served();
    expect(await asOnlooker(manager, isReplica)).toBe(true);
  });

  it('ends a reader that holds up what it has to replay: the primary answers that one', async () => {
    await served();
    const asked: boolean[] = [];
    const slow = asOnlooker(manager, async (tx) => {
      const on = await isReplica(tx);
      asked.push(on);
      await tx.raw('select count(*) from string_frame');
      if (on) {
        // as dropping a day's partition does, once it is replayed
        await cluster.owner.query('begin; lock table string_frame in access exclusive mode; commit');
        await tx.raw('select pg_sleep(20)');
      }
      return isReplica(tx);
    });
    expect(await slow).toBe(false);
    expect(asked).toEqual([true, false]);
    expect(warned).toContain('the replica failed a reader');
  });
});

describe('a replica that is gone', () => {
  it('is not missed, also in the middle, and is used again when it is back', async () => {
    await served();
    async function* read(tx: Tx): AsyncGenerator<boolean, void, void> {
      if (await isReplica(tx)) await standby?.stop('immediate');
      yield await isReplica(tx);
    }
    const pieces: boolean[] = [];
    for await (const piece of piecesAsOnlooker(manager, read)) pieces.push(piece);
    expect(pieces).toEqual([false]);
    expect(await asOnlooker(manager, isReplica)).toBe(false);
    expect(await replicaStatus()).toMatchObject({ state: 'away', lagS: null });
    standby = await startServer(standbyData, { port: at });
    await served();
    expect(await asOnlooker(manager, isReplica)).toBe(true);
  });
});

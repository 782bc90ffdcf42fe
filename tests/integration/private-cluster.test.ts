import { execFile, spawn, type ChildProcess } from 'node:child_process';
import { once } from 'node:events';
import fs from 'node:fs';
import net from 'node:net';
import os from 'node:os';
import path from 'node:path';
import { promisify } from 'node:util';
import pg from 'pg';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { startCluster, postmasterOf, type Cluster } from '../../src/server/up/cluster.mjs';
import { isAlive } from '../../src/server/up/processes.mjs';

const exec = promisify(execFile);
const CLUSTER = new URL('../../src/server/up/cluster.mjs', import.meta.url).href;
let home: string;

beforeAll(() => {
  home = fs.mkdtempSync(path.join(os.tmpdir(), 'wakeline-cluster-'));
  fs.chmodSync(home, 0o755); // the postgres account must be able to enter
});
afterAll(() => fs.rmSync(home, { recursive: true, force: true }));

async function using<T>(work: (cluster: Cluster, db: pg.Client) => Promise<T>): Promise<T> {
  const cluster = await startCluster(home, { durable: false });
  const db = new pg.Client(cluster.url);
  db.on('error', () => undefined);
  try {
    await db.connect();
    return await work(cluster, db);
  } finally {
    await db.end().catch(() => undefined);
    await cluster.stop();
  }
}
const kept = () =>
  using(async (_, db) => (await db.query<{ word: string }>('select word from kept')).rows[0]?.word);
const data = () => path.join(home, 'pgdata');

/** A process of its own that starts the cluster, says so, and holds it until its input ends. */
async function otherUser(): Promise<ChildProcess> {
  const script = `const { startCluster } = await import('${CLUSTER}');
    const c = await startCluster('${home}', { durable: false });
    console.log('UP ' + c.state.port);
    process.stdin.resume().on('end', () => c.stop().then(() => process.exit(0)));`;
  const child = spawn(process.execPath, ['--input-type=module', '-e', script], {
    stdio: ['pipe', 'pipe', 'inherit'],
  });
  for await (const chunk of child.stdout as AsyncIterable<Buffer>)
    if (chunk.toString().includes('UP ')) break;
  return child;
}

describe('the private cluster', () => {
  it('is made, serves an owner without superuser rights, and stops', async () => {
    const pid = await using(async (_, db) => {
      await db.query(`create table kept (word text); insert into kept values ('still here')`);
      const { rows } = await db.query(
        'select rolsuper, rolcreaterole, rolcreatedb from pg_roles where rolname = current_user',
      );
      expect(rows).toEqual([{ rolsuper: false, rolcreaterole: true, rolcreatedb: true }]);
      expect((await db.query('show listen_addresses')).rows).toEqual([{ listen_addresses: '127.0.0.1' }]);
      return postmasterOf(home)?.pid ?? 0;
    });
    expect(isAlive(pid)).toBe(false);
    expect(postmasterOf(home)).toBeNull();
    expect(fs.statSync(path.join(home, 'state.json')).mode & 0o077).toBe(0);
  });

  it('comes back after its server was killed, with its data', async () => {
    await using(async () => {
      const pid = postmasterOf(home)?.pid ?? 0;
      process.kill(pid, 'SIGKILL');
      while (isAlive(pid)) await new Promise((resolve) => setTimeout(resolve, 20));
      expect(fs.existsSync(path.join(data(), 'postmaster.pid'))).toBe(true);
      expect(await kept()).toBe('still here');
    });
  });

  it('does not take another living process under a reused pid for its server', async () => {
    const other = path.join(data(), 'postmaster.pid');
    fs.writeFileSync(other, `${process.pid}\n${data()}\n1\n1\n\n127.0.0.1\n\n`);
    expect(postmasterOf(home)).toMatchObject({ alive: true, ours: false });
    expect(await kept()).toBe('still here');
  });

  it('moves to a free port where its own is taken, and remembers it', async () => {
    const before = await using((cluster) => Promise.resolve(cluster.state.port));
    const squatter = net.createServer().listen(before, '127.0.0.1');
    await once(squatter, 'listening');
    try {
      const moved = await using((cluster) => Promise.resolve(cluster.state.port));
      expect(moved).not.toBe(before);
      expect(
        (JSON.parse(fs.readFileSync(path.join(home, 'state.json'), 'utf8')) as { port: number }).port,
      ).toBe(moved);
      expect(await kept()).toBe('still here');
    } finally {
      squatter.close();
    }
  });

  it('sets new passwords where its own were lost, and keeps the data', async () => {
    fs.rmSync(path.join(home, 'state.json'));
    expect(await kept()).toBe('still here');
    fs.writeFileSync(path.join(home, 'state.json'), '{"port": 54');
    expect(await kept()).toBe('still here');
  });

  it('is stopped by the last of two processes that use it', async () => {
    const [one, two] = await Promise.all([otherUser(), otherUser()]);
    const pid = postmasterOf(home)?.pid ?? 0;
    one.stdin?.end();
    await once(one, 'exit');
    expect(isAlive(pid)).toBe(true);
    two.stdin?.end();
    await once(two, 'exit');
    expect(isAlive(pid)).toBe(false);
  });

  it('is not kept up by a user that was killed', async () => {
    const lost = await otherUser();
    lost.kill('SIGKILL');
    await once(lost, 'exit');
    const pid = postmasterOf(home)?.pid ?? 0;
    expect(isAlive(pid)).toBe(true);
    expect(await kept()).toBe('still here');
    expect(isAlive(pid)).toBe(false);
  });

  it('puts aside a folder that is no database, and clears what a killed initdb left', async () => {
    const half = fs.mkdtempSync(path.join(os.tmpdir(), 'wakeline-half-'));
    fs.chmodSync(half, 0o755);
    try {
      fs.mkdirSync(path.join(half, 'pgdata'));
      fs.writeFileSync(path.join(half, 'pgdata', 'postgresql.conf'), '');
      fs.mkdirSync(path.join(half, 'pgdata.123.tmp'));
      const cluster = await startCluster(half, { durable: false });
      await cluster.stop();
      const names = fs.readdirSync(half);
      expect(names.filter((name) => name.startsWith('pgdata.unusable-'))).toHaveLength(1);
      expect(names).not.toContain('pgdata.123.tmp');
    } finally {
      fs.rmSync(half, { recursive: true, force: true });
    }
  });

  it('says what to do where PostgreSQL is not where it was said to be', async () => {
    const script = `import('${CLUSTER}').then((m) => m.startCluster('${home}-none')).catch((e) => console.log(e.message))`;
    const { stdout } = await exec(process.execPath, ['-e', script], {
      env: { ...process.env, WAKELINE_PG_BIN: '/nowhere' },
    });
    expect(stdout).toContain('WAKELINE_PG_BIN is /nowhere');
    expect(stdout).toContain('Correct it, or unset it');
    fs.rmSync(`${home}-none`, { recursive: true, force: true });
  });
});

import pg from 'pg';
import type { TestProject } from 'vitest/node';
import { startCluster } from '../../src/server/up/cluster.mjs';
import { checkGiven, migrate, roleAddresses } from '../../src/server/up/database.mjs';
import { dismissGuard, startGuard } from '../../src/server/up/guard-line.mjs';
import { homeOf } from '../../src/server/up/home.mjs';
import { isAlive } from '../../src/server/up/processes.mjs';

/** What a test file needs to make databases of its own: see tests/support/database.ts. */
export interface TestServer {
  /** Owner's address of the migrated template. */
  templateUrl: string;
  template: string;
  appUrl: string;
  ingestUrl: string;
  oneRole: boolean;
}

declare module 'vitest' {
  interface ProvidedContext {
    testServer: TestServer;
  }
}

interface Shared {
  users: number;
  ready: Promise<{ server: TestServer; stop: () => Promise<void> }>;
}
// one server and one template for all projects of a run
const KEY = Symbol.for('wakeline.test.server');
const shared = globalThis as unknown as Record<symbol, Shared | undefined>;

export const withDatabase = (url: string, name: string): string => {
  const other = new URL(url);
  other.pathname = `/${name}`;
  return other.href;
};

async function query(url: string, sql: string): Promise<Record<string, unknown>[]> {
  const client = new pg.Client(url);
  await client.connect();
  try {
    return (await client.query<Record<string, unknown>>(sql)).rows;
  } finally {
    await client.end();
  }
}

/** Databases of runs that were killed: their names carry the process. */
async function sweep(url: string): Promise<void> {
  for (const { name } of await query(
    url,
    `select datname as name from pg_database where datname like 'wt\\_%'`,
  )) {
    const pid = Number(/^wt_(\d+)_/.exec(String(name))?.[1]);
    if (pid && !isAlive(pid)) await query(url, `drop database if exists "${String(name)}" with (force)`);
  }
}

async function start(): Promise<{ server: TestServer; stop: () => Promise<void> }> {
  const given = process.env.DATABASE_URL;
  if (given) await checkGiven(given);
  else startGuard();
  const cluster = given ? undefined : await startCluster(homeOf('test'), { durable: false });
  const base = given ?? cluster?.url ?? '';
  if (cluster) await sweep(base);
  const template = `wt_${process.pid}_template`;
  const templateUrl = withDatabase(base, template);
  await query(base, `drop database if exists "${template}" with (force)`);
  await query(base, `create database "${template}"`);
  await migrate(templateUrl);
  const roles = await roleAddresses(
    templateUrl,
    cluster?.state.rolesSecret ?? (new URL(base).password || template),
  );
  return {
    server: { templateUrl, template, ...roles },
    stop: async () => {
      for (const { name } of await query(
        base,
        `select datname as name from pg_database where datname like 'wt\\_${process.pid}\\_%'`,
      ))
        await query(base, `drop database if exists "${String(name)}" with (force)`);
      await cluster?.stop();
      if (!given) dismissGuard();
    },
  };
}

export default async function setup(project: TestProject): Promise<() => Promise<void>> {
  const run: Shared = (shared[KEY] ??= { users: 0, ready: start() });
  run.users++;
  const { server, stop } = await run.ready;
  project.provide('testServer', server);
  return async () => {
    run.users--;
    if (run.users > 0) return;
    shared[KEY] = undefined;
    await stop();
  };
}

import { randomBytes } from 'node:crypto';
import pg from 'pg';
import { inject } from 'vitest';
import { closePools } from '../../src/server/db/pools';

export interface TestDatabase {
  name: string;
  /** The owner's address: sees everything, migrates. */
  url: string;
  /** The web's account, under row-level security. */
  appUrl: string;
  /** The account that writes telemetry. */
  ingestUrl: string;
  /** Connections of the owner, to set a scene and to look behind the curtain. */
  owner: pg.Pool;
  /** The addresses as the server's configuration reads them; already set in this process. */
  env: Record<string, string>;
  /** Drops the database; ends whatever is still connected. */
  drop(): Promise<void>;
}

/**
 * A database of its own for a test file: a copy of the migrated, empty template. The environment of this process
 * then names it, so that the server's own `database()` works on it. Drop it in `afterAll`.
 */
export async function testDatabase(): Promise<TestDatabase> {
  const server = inject('testServer');
  const name = `${server.template.replace(/_template$/, '')}_${process.pid}_${randomBytes(5).toString('hex')}`;
  const at = (url: string): string => {
    const address = new URL(url);
    address.pathname = `/${name}`;
    return address.href;
  };
  const admin = async (sql: string): Promise<void> => {
    const address = new URL(server.templateUrl);
    address.pathname = '/postgres'; // a template must have no connection while it is copied
    const client = new pg.Client(address.href);
    await client.connect();
    try {
      await client.query(sql);
    } finally {
      await client.end();
    }
  };
  await admin(`create database "${name}" template "${server.template}" strategy file_copy`);
  const urls = { url: at(server.templateUrl), appUrl: at(server.appUrl), ingestUrl: at(server.ingestUrl) };
  const env = {
    DATABASE_URL: urls.url,
    DATABASE_URL_APP: urls.appUrl,
    DATABASE_URL_INGEST: urls.ingestUrl,
    DATABASE_ONE_ROLE: server.oneRole ? '1' : '0',
  };
  Object.assign(process.env, env);
  const owner = new pg.Pool({ connectionString: urls.url, max: 4 });
  owner.on('error', () => undefined); // a test that ends the server's connections may end an idle one of these
  return {
    name,
    ...urls,
    owner,
    env,
    drop: async () => {
      await Promise.all([owner.end(), closePools()]);
      // autovacuum may be at work in it: that one leaves by itself and can't be ended by the owner
      for (let tries = 0; ; tries++)
        try {
          await admin(`drop database if exists "${name}" with (force)`);
          return;
        } catch (error) {
          if ((error as { code?: string }).code !== '42501' || tries >= 100) throw error;
          await new Promise((resolve) => setTimeout(resolve, 200));
        }
    },
  };
}

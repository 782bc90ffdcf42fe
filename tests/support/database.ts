import pg from 'pg';
import { inject } from 'vitest';

export interface TestDatabase {
  name: string;
  /** The owner's address: sees everything, migrates. */
  url: string;
  /** The web's account, under row-level security. */
  appUrl: string;
  /** The account that writes telemetry. */
  ingestUrl: string;
  /** The environment that the server's configuration reads. */
  env: Record<string, string>;
  /** Drops the database; ends whatever is still connected. */
  drop(): Promise<void>;
}

let made = 0;

/** A database of its own for a test file: a copy of the migrated, empty template. Drop it in `afterAll`. */
export async function testDatabase(): Promise<TestDatabase> {
  const server = inject('testServer');
  const name = `${server.template.replace(/_template$/, '')}_${process.pid}_${process.env.VITEST_POOL_ID ?? 0}_${made++}`;
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
  await admin(`create database "${name}" template "${server.template}"`);
  const urls = { url: at(server.templateUrl), appUrl: at(server.appUrl), ingestUrl: at(server.ingestUrl) };
  return {
    name,
    ...urls,
    env: {
      DATABASE_URL: urls.url,
      DATABASE_URL_APP: urls.appUrl,
      DATABASE_URL_INGEST: urls.ingestUrl,
      DATABASE_ONE_ROLE: server.oneRole ? '1' : '0',
    },
    drop: () => admin(`drop database if exists "${name}" with (force)`),
  };
}

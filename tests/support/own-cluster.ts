import fs from 'node:fs';
import os from 'node:os';
import path from 'node:path';
import pg from 'pg';
import { startCluster } from '../../src/server/up/cluster.mjs';
import { migrate, roleAddresses } from '../../src/server/up/database.mjs';
import { closePools } from '../../src/server/db/pools';
import type { TestDatabase } from './database';

export interface OwnCluster extends TestDatabase {
  /** The superuser's address: copies the cluster, makes restore points. */
  superUrl: string;
  /** Folder for further clusters beside it; goes with it. */
  folder: string;
}

/**
 * A cluster of a test's own with a migrated database, where a superuser is needed (copies, standbys): the one that all
 * tests share has none to give. Set in this process's environment; drop it in `afterAll`.
 */
export async function ownCluster(): Promise<OwnCluster> {
  const folder = fs.mkdtempSync(path.join(os.tmpdir(), 'wakeline-second-'));
  fs.chmodSync(folder, 0o755); // the postgres account must be able to enter
  const cluster = await startCluster(path.join(folder, 'home'), { durable: false });
  await migrate(cluster.url);
  const { appUrl, ingestUrl } = await roleAddresses(cluster.url, cluster.state.rolesSecret);
  const superAt = new URL(cluster.url);
  Object.assign(superAt, { username: 'postgres', password: cluster.state.superPassword });
  const env = {
    DATABASE_URL: cluster.url,
    DATABASE_URL_APP: appUrl,
    DATABASE_URL_INGEST: ingestUrl,
    DATABASE_ONE_ROLE: '0',
  };
  Object.assign(process.env, env);
  const owner = new pg.Pool({ connectionString: cluster.url, max: 4 });
  owner.on('error', () => undefined);
  return {
    name: 'wakeline',
    url: cluster.url,
    appUrl,
    ingestUrl,
    owner,
    env,
    superUrl: superAt.href,
    folder,
    drop: async () => {
      await Promise.all([owner.end(), closePools()]);
      await cluster.stop();
      fs.rmSync(folder, { recursive: true, force: true });
    },
  };
}

import { once } from 'node:events';
import fs from 'node:fs';
import os from 'node:os';
import path from 'node:path';
import pg from 'pg';
import { end, freePort, launch } from '../../src/server/up/processes.mjs';
import { ensurePgbouncer, serverAccount } from '../../src/server/up/programs.mjs';
import type { TestDatabase } from './database';

/** The README's recipe for pgbouncer as it stands there. */
function recipe(): string {
  const readme = fs.readFileSync(new URL('../../README.md', import.meta.url), 'utf8');
  const found = /```ini\n(\[databases\][\s\S]*?)```/.exec(readme)?.[1];
  if (!found) throw new Error('The README has no recipe for pgbouncer.');
  return found;
}

export interface Pooler {
  /** Place of the pooler, for DATABASE_POOLER_URL. */
  url: string;
  stop(): Promise<void>;
}

/** pgbouncer in front of a test's database, by the README's recipe but for its places, with so few connections behind. */
export async function startPooler(db: TestDatabase, connections: number): Promise<Pooler> {
  const folder = fs.mkdtempSync(path.join(os.tmpdir(), 'wakeline-pooler-'));
  const server = new URL(db.url);
  const port = await freePort(0);
  const users = [db.appUrl, db.ingestUrl].map((u) => new URL(u));
  const text = recipe()
    .replace(/host=\S+ port=\S+ dbname=\S+/, `host=${server.hostname} port=${server.port} dbname=${db.name}`)
    .replace(/^wakeline = /m, `${db.name} = `)
    .replace(/^listen_port = .*$/m, `listen_port = ${port}`)
    .replace(/^auth_file = .*$/m, `auth_file = ${path.join(folder, 'userlist.txt')}`)
    .replace(/^default_pool_size = .*$/m, `default_pool_size = ${connections}`);
  fs.writeFileSync(path.join(folder, 'pgbouncer.ini'), `${text}\nunix_socket_dir =\n`);
  fs.writeFileSync(
    path.join(folder, 'userlist.txt'),
    users.map((u) => `"${u.username}" "${decodeURIComponent(u.password)}"\n`).join(''),
  );
  const account = serverAccount(); // it refuses to run as root, as PostgreSQL does
  fs.chmodSync(folder, 0o755);
  const child = launch(await ensurePgbouncer(), [path.join(folder, 'pgbouncer.ini')], {
    cwd: '/',
    ...(account ?? {}),
  });
  let said = '';
  for (const stream of [child.stdout, child.stderr])
    stream?.setEncoding('utf8').on('data', (chunk: string) => (said += chunk));
  const stop = async (): Promise<void> => {
    await end(child);
    fs.rmSync(folder, { recursive: true, force: true });
  };
  const at = new URL(db.appUrl);
  at.port = String(port);
  const gone = once(child, 'exit');
  for (let i = 0; ; i++) {
    const client = new pg.Client(at.href);
    try {
      await client.connect();
      await client.end();
      break;
    } catch (error) {
      if (i > 200 || child.exitCode !== null)
        throw new Error(`pgbouncer does not answer:\n${said}`, { cause: error });
      await Promise.race([gone, new Promise((resolve) => setTimeout(resolve, 50))]);
    }
  }
  return { url: `postgres://127.0.0.1:${port}`, stop };
}

import fs from 'node:fs';
import path from 'node:path';
import { postgres } from './cluster.mjs';
import { withClient } from './database.mjs';
import { freePort } from './processes.mjs';
import { ensurePostgres, serverAccount } from './programs.mjs';

/** A second PostgreSQL server on this machine, on loopback, for a restored backup or a standby: for drills and tests. */

/** Makes a folder that the account of the server owns. */
export function makeFolder(folder) {
  fs.mkdirSync(folder, { recursive: true, mode: 0o700 });
  const account = serverAccount();
  if (account) fs.chownSync(folder, account.uid, account.gid);
  return folder;
}

/** Writes a file that the account of the server owns. */
export function writeFor(file, text) {
  fs.writeFileSync(file, text, { mode: 0o600 });
  const account = serverAccount();
  if (account) fs.chownSync(file, account.uid, account.gid);
}

/** One of PostgreSQL's programs, which must end well. @returns seconds that it took */
export async function must(program, args, options) {
  const start = performance.now();
  const result = await postgres(await ensurePostgres(), program, args, options);
  if (result.code !== 0)
    throw new Error(`${program} failed (${result.code ?? result.signal}):\n${result.out.trim()}`);
  return (performance.now() - start) / 1000;
}

/** Connection flags of PostgreSQL's programs for an address; its password goes by the environment. */
export function reach(url) {
  const at = new URL(url);
  return {
    flags: ['-h', at.hostname, '-p', at.port || '5432', '-U', decodeURIComponent(at.username), '-w'],
    database: decodeURIComponent(at.pathname.slice(1)),
    options: { env: { ...process.env, PGPASSWORD: decodeURIComponent(at.password), LC_ALL: 'C.UTF-8' } },
  };
}

/**
 * Copies a running cluster with pg_basebackup.
 * @param wal `stream`: with what is written meanwhile; `none`: that comes from an archive
 * @param standby true: the copy goes on following its primary
 */
export async function baseBackup(superUrl, data, { wal = 'stream', standby = false } = {}) {
  const { flags, options } = reach(superUrl);
  makeFolder(data);
  const seconds = await must(
    'pg_basebackup',
    [...flags, '-D', data, '-c', 'fast', '-X', wal, ...(standby ? ['-R'] : [])],
    options,
  );
  // a server that replays another's log must allow as much as that one; here that may stand on its command line
  const { rows } = await withClient(superUrl, (db) =>
    db.query(`select name, setting from pg_settings where name = any ($1::text[])`, [AS_THE_PRIMARY]),
  );
  configure(data, Object.fromEntries(rows.map((r) => [r.name, r.setting])));
  return seconds;
}
const AS_THE_PRIMARY = [
  'max_connections',
  'max_worker_processes',
  'max_wal_senders',
  'max_prepared_transactions',
  'max_locks_per_transaction',
];

/** Adds settings, name → value, to those of a data folder. */
function configure(data, settings) {
  const lines = Object.entries(settings).map(
    ([name, value]) => `${name} = '${String(value).replaceAll("'", "''")}'\n`,
  );
  fs.appendFileSync(path.join(data, 'postgresql.auto.conf'), lines.join(''));
}

/** A new, empty cluster whose superuser is `postgres`. */
export async function emptyCluster(data, password) {
  const file = `${data}.password`;
  makeFolder(data);
  writeFor(file, `${password}\n`);
  try {
    await must('initdb', [
      ...['-D', data, '-U', 'postgres', '--pwfile', file, '-A', 'scram-sha-256'],
      ...['-E', 'UTF8', '--locale', 'C.UTF-8', '--no-instructions', '--no-sync'],
    ]);
  } finally {
    fs.rmSync(file, { force: true });
  }
}

/**
 * Starts the server of a data folder on a free port of loopback and waits until it answers.
 * @param settings further ones, name → value
 * @returns its port, seconds, and what ends it
 */
export async function startServer(data, settings = {}) {
  const log = `${data}.log`;
  writeFor(log, '');
  const port = settings.port ?? (await freePort(0));
  configure(data, {
    port,
    listen_addresses: '127.0.0.1',
    unix_socket_directories: '',
    fsync: 'off', // it is thrown away afterwards
    ...settings,
  });
  const seconds = await must('pg_ctl', ['start', '-w', '-t', '600', '-s', '-D', data, '-l', log]).catch(
    (error) => {
      const tail = fs.readFileSync(log, 'utf8').trim().split('\n').slice(-8).join('\n');
      throw new Error(`${error.message}\n${tail}`);
    },
  );
  return { port, seconds, stop: (mode = 'fast') => stopServer(data, mode) };
}

export async function stopServer(data, mode = 'fast') {
  if (!fs.existsSync(path.join(data, 'postmaster.pid'))) return;
  await must('pg_ctl', ['stop', '-D', data, '-m', mode, '-w', '-s'], { evenAtEnd: true });
}

/** The same account and database at another port of this machine. */
export function atPort(url, port) {
  const at = new URL(url);
  at.hostname = '127.0.0.1';
  at.port = String(port);
  return at.href;
}

import fs from 'node:fs';
import path from 'node:path';
import { setTimeout as sleep } from 'node:timers/promises';
import { postgres } from './cluster.mjs';
import { withClient } from './database.mjs';
import { inventoryOf, sequencesOf } from './inventory.mjs';
import { end, launch } from './processes.mjs';
import { ensurePostgres, serverAccount } from './programs.mjs';
import {
  atPort,
  baseBackup,
  emptyCluster,
  makeFolder,
  must,
  reach,
  startServer,
  writeFor,
} from './second-cluster.mjs';

/**
 * The two ways to back up that the README names, by PostgreSQL's own programs, each up to a server that was restored from
 * it. What the running installation held at the moment of the backup is looked at beside it, in one snapshot.
 */
const SLOT = 'wakeline_drill';
const MOMENT = 'wakeline_drill';
const TRIES = 5;

/**
 * Holds all writers for an instant, so that a snapshot and a mark in the write-ahead log mean the same state; then lets
 * them go on and runs `work` beside them, with a client that sees that state.
 * @param mark what to do while they are held
 */
async function atOneMoment(url, mark, work) {
  await withClient(url, async (seer) => {
    const held = await withClient(url, async (holder) => {
      const { rows } = await holder.query(
        `select string_agg(format('%I.%I', n.nspname, c.relname), ', ') as tables from pg_class c
         join pg_namespace n on n.oid = c.relnamespace
         where c.relkind in ('r', 'p') and not c.relispartition and n.nspname !~ '^pg_' and n.nspname <> 'information_schema'`,
      );
      for (let attempt = 1; ; attempt++)
        try {
          await holder.query(
            `begin; set local lock_timeout = '2s'; lock table ${rows[0].tables} in share mode`,
          );
          break;
        } catch (error) {
          await holder.query('rollback');
          if (error.code !== '55P03' || attempt === TRIES) throw error;
          await sleep(500); // somebody works long on a table
        }
      const from = performance.now();
      await seer.query('begin isolation level repeatable read read only');
      const { rows: snapshots } = await seer.query('select pg_export_snapshot() as name');
      await mark(holder);
      const sequences = await sequencesOf(holder);
      await holder.query('commit');
      return { snapshot: snapshots[0].name, sequences, heldMs: performance.now() - from };
    });
    await seer.query('set statement_timeout = 0');
    await work({ ...held, seer });
    await seer.query('commit');
  });
}

/** Waits until a server has replayed its log up to the moment and takes writes. */
const promoted = (url) =>
  withClient(url, async (db) => {
    for (;;) {
      const { rows } = await db.query('select pg_is_in_recovery() as replaying');
      if (!rows[0].replaying) return;
      await sleep(50);
    }
  });

/**
 * A base backup and the write-ahead log beside it, restored to a named moment that lies after the backup.
 * @param superUrl a superuser's address of the running database
 * @param folder empty, for the backup
 * @param check called with { kept, keptSequences, restoredUrl (its superuser), figures }
 */
export async function drillBaseBackup({ superUrl, folder, meanwhile = () => Promise.resolve() }, check) {
  const wal = makeFolder(path.join(makeFolder(folder), 'wal'));
  const data = path.join(folder, 'restored');
  const { flags, options } = reach(superUrl);
  const bin = await ensurePostgres();
  const archive = ['-D', wal, '--slot', SLOT, ...flags];
  await must('pg_receivewal', ['--create-slot', '--if-not-exists', ...archive], options);
  const receiver = launch(path.join(bin, 'pg_receivewal'), archive, {
    cwd: '/',
    ...(serverAccount() ?? {}),
    ...options,
  });
  let server;
  try {
    const figures = {};
    figures.backup_s = await baseBackup(superUrl, data, { wal: 'none' });
    await meanwhile('after the backup');
    let segment;
    await atOneMoment(
      superUrl,
      async (db) => {
        const { rows } = await db.query(`select pg_walfile_name(pg_create_restore_point($1)) as segment`, [
          MOMENT,
        ]);
        segment = rows[0].segment;
        await db.query('select pg_switch_wal()'); // a segment is archived once it is full
      },
      async ({ seer, sequences, heldMs }) => {
        figures.held_ms = heldMs;
        await meanwhile('after the moment');
        const kept = await inventoryOf(seer);
        for (let i = 0; !fs.existsSync(path.join(wal, segment)); i++) {
          if (receiver.exitCode !== null || i > 1200)
            throw new Error(`pg_receivewal did not bring ${segment}`);
          await sleep(50);
        }
        writeFor(path.join(data, 'recovery.signal'), '');
        server = await startServer(data, {
          restore_command: `cp "${wal}/%f" "%p"`,
          recovery_target_name: MOMENT,
          recovery_target_action: 'promote',
        });
        const replaying = performance.now();
        await promoted(atPort(superUrl, server.port));
        figures.restore_s = server.seconds + (performance.now() - replaying) / 1000;
        await check({ kept, sequences, restoredUrl: atPort(superUrl, server.port), figures });
      },
    );
  } finally {
    await end(receiver);
    await server?.stop('immediate');
    await postgres(bin, 'pg_receivewal', ['--drop-slot', ...archive], { ...options, evenAtEnd: true });
  }
}

/**
 * A dump in several processes, restored into a new cluster with the roles of the old one.
 * @param url address of the running database; its owner's, or a superuser's, who brings the passwords of roles along
 * @param check as above
 */
export async function drillDump({ url, folder, isSuper }, check) {
  const { flags, database, options } = reach(url);
  const dump = path.join(makeFolder(folder), 'dump');
  const roles = path.join(folder, 'roles.sql');
  const data = path.join(folder, 'restored');
  const password = new URL(url).password || 'drill';
  let server;
  try {
    const figures = {};
    await atOneMoment(
      url,
      () => Promise.resolve(),
      async ({ seer, snapshot, sequences, heldMs }) => {
        figures.held_ms = heldMs;
        figures.backup_s =
          (await must(
            'pg_dumpall',
            [
              ...flags,
              '-l',
              database,
              '--roles-only',
              '-f',
              roles,
              ...(isSuper ? [] : ['--no-role-passwords']),
            ],
            options,
          )) +
          (await must(
            'pg_dump',
            [...flags, '-Fd', '-j', '2', '--snapshot', snapshot, '-f', dump, database],
            options,
          ));
        const kept = await inventoryOf(seer);
        await emptyCluster(data, password);
        server = await startServer(data);
        const superUrl = new URL(atPort(url, server.port));
        Object.assign(superUrl, { username: 'postgres', password });
        const restoredUrl = superUrl.href;
        const owner = await withClient(url, async (db) => {
          const { rows } = await db.query(
            `select pg_get_userbyid(datdba) as owner from pg_database where datname = current_database()`,
          );
          return rows[0].owner;
        });
        const at = reach(restoredUrl);
        // the new cluster's own superuser is there already: that one line of the roles fails
        await must('psql', [...at.flags, '-q', '-o', '/dev/null', '-f', roles, 'postgres'], at.options);
        const template = new URL(restoredUrl);
        template.pathname = '/postgres';
        await withClient(template.href, (db) => db.query(`create database "${database}" owner "${owner}"`));
        figures.restore_s = await must(
          'pg_restore',
          [...at.flags, '-j', '2', '--exit-on-error', '-d', database, dump],
          at.options,
        );
        await check({ kept, sequences, restoredUrl, figures });
      },
    );
  } finally {
    await server?.stop('immediate');
  }
}

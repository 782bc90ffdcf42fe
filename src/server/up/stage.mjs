import { createHash } from 'node:crypto';
import path from 'node:path';
import process from 'node:process';
import { startCluster } from './cluster.mjs';
import { checkGiven, isEmpty, migrate, roleAddresses, seed, withClient } from './database.mjs';
import { homeOf, makeHome, readState, writeState } from './home.mjs';
import { say, Stop } from './say.mjs';

/**
 * A database ready to be worked on: the private cluster's, or the one that DATABASE_URL names.
 * @param {'demo' | 'test' | 'bench'} kind
 * @returns addresses, the demo's secret and `remember` (keeps a change of state)
 */
export async function stageDatabase(kind) {
  const given = process.env.DATABASE_URL;
  if (!given) {
    const cluster = await startCluster(homeOf(kind));
    say(`PostgreSQL answers on 127.0.0.1:${cluster.state.port}`);
    return { ...cluster, own: true, hasDemo: true, remember: () => writeState(cluster.home, cluster.state) };
  }
  await checkGiven(given);
  const { host, pathname, password } = new URL(given);
  say(`using the database ${decodeURIComponent(pathname.slice(1))} on ${host} (DATABASE_URL)`);
  // secrets of a database of yours are kept apart by its address
  const home = path.join(
    homeOf(kind),
    `given-${createHash('sha256')
      .update(host + pathname)
      .digest('hex')
      .slice(0, 12)}`,
  );
  makeHome(home);
  const state = readState(home);
  // every process that knows the owner's password arrives at the same passwords of the roles
  if (password) state.rolesSecret = password;
  const remember = () =>
    writeState(home, { ...state, rolesSecret: password ? undefined : state.rolesSecret });
  remember();
  return { home, state, url: given, own: false, hasDemo: true, remember };
}

/** Migrates and finds the addresses of the roles. */
export async function prepareDatabase(stage) {
  await migrate(stage.url, { unlock: stage.own });
  const addresses = await roleAddresses(stage.url, stage.state.rolesSecret);
  if (addresses.oneRole)
    say('this account may not create roles: row-level security is off, everything runs as one role');
  return addresses;
}

async function recreate(stage) {
  const { host, pathname } = new URL(stage.url);
  const name = decodeURIComponent(pathname.slice(1));
  if (!stage.own)
    throw new Stop(
      `The database ${name} on ${host} holds data, or a demo that was not written to its end.`,
      `Empty it yourself (drop and create it), then start again: a database of yours is never emptied from here.`,
    );
  const other = new URL(stage.url);
  other.pathname = '/postgres';
  await withClient(other.href, async (db) => {
    await db.query(`drop database if exists "${name}" with (force)`);
    await db.query(`create database "${name}"`);
  });
  stage.state.seed = 'none';
  stage.remember();
}

/** Migrated and with the demo in it. `fresh`: the demo is written anew. */
export async function prepareDemo(stage, { fresh = false } = {}) {
  if (fresh || stage.state.seed === 'running') {
    say(fresh ? 'removing the old demo' : 'the demo was not written to its end last time: beginning it anew');
    if (stage.own || !(await holdsNothing(stage.url))) await recreate(stage);
  }
  const addresses = await prepareDatabase(stage);
  if (stage.state.seed === 'done') return addresses;
  if (await isEmpty(stage.url)) {
    say('writing the demo: sites, months of history, two days of minute readings');
    stage.state.seed = 'running';
    stage.state.demoSince = Math.floor(Date.now() / 60_000) * 60; // the simulator lays out the same fleet
    stage.remember();
    await seed(stage.url, stage.state);
    stage.state.seed = 'done';
    stage.remember();
  } else {
    stage.hasDemo = false;
    say('this database already holds data, and no demo from here: the simulator stays off');
  }
  return addresses;
}

async function holdsNothing(url) {
  const made = await withClient(url, async (db) => {
    const { rows } = await db.query(`select to_regclass('public.organisation') as made`);
    return rows[0].made !== null;
  });
  return !made || isEmpty(url);
}

import knexFactory, { type Knex } from 'knex';
import pg from 'pg';
import { config } from '../config';
import { log } from '../log';
import { prepareRepeated, type Querying } from './prepared';

// int8 fits a double in all that this product counts
pg.types.setTypeParser(pg.types.builtins.INT8, Number);

/** What a connection is for. `replica`: readers of the web on another server. */
export type Purpose = 'web' | 'sign_in' | 'ingest' | 'replica';

const SETTINGS = { jit: 'off', statement_timeout: '30s', lock_timeout: '10s' } as const;

/** The account of one address at the server and database of another. */
function accountAt(account: string, place: string): string {
  const url = new URL(account);
  const at = new URL(place);
  url.host = at.host;
  if (at.pathname.length > 1) url.pathname = at.pathname;
  url.search = at.search;
  return url.href;
}

/** Connection settings by purpose: which server, which account, which role, what is fixed for the whole connection. */
export function connectionOf(purpose: Purpose): pg.ClientConfig {
  const c = config();
  const own = purpose === 'ingest' ? c.DATABASE_URL_INGEST : c.DATABASE_URL_APP;
  const options = Object.entries(SETTINGS).map(([name, value]) => `-c ${name}=${value}`);
  if (!own && !c.DATABASE_ONE_ROLE)
    options.push(`-c role=${purpose === 'ingest' ? 'wakeline_ingest' : 'wakeline_app'}`);
  if (purpose === 'sign_in') options.push('-c wakeline.purpose=sign_in');
  const account = own ?? c.DATABASE_URL;
  const replica = purpose === 'replica' && c.DATABASE_REPLICA_URL;
  return {
    connectionString: replica ? (new URL(replica).username ? replica : accountAt(account, replica)) : account,
    options: options.join(' '),
    connectionTimeoutMillis: replica ? 2000 : 5000, // the primary can answer instead
  };
}

/**
 * Whether transactions of this purpose go through a pooler in transaction mode. Signing in doesn't: its connections
 * carry their purpose from their beginning. Nor does `connect()`: LISTEN, locks of a session, prepared statements.
 */
const isPooled = (purpose: Purpose): boolean =>
  config().DATABASE_POOLER_URL !== undefined && (purpose === 'web' || purpose === 'ingest');

/** The same through the pooler, which takes no options: `settingsOf` says them in each transaction. */
function pooledConnectionOf(purpose: Purpose): pg.ClientConfig {
  const { connectionString = '', connectionTimeoutMillis } = connectionOf(purpose);
  return {
    connectionString: accountAt(connectionString, config().DATABASE_POOLER_URL ?? connectionString),
    connectionTimeoutMillis,
  };
}

/** Settings that a transaction of this purpose must make for itself, because its connection could not carry them. */
export const settingsOf = (purpose: Purpose): readonly (readonly [name: string, value: string])[] =>
  isPooled(purpose) ? Object.entries(SETTINGS) : [];

const SIZES: Record<Purpose, number> = { web: 10, sign_in: 3, ingest: 6, replica: 8 };

interface Pools {
  knex: Partial<Record<Purpose, Knex>>;
  signIn?: pg.Pool;
}
// one per process, also when a development server reloads this module
const KEY = Symbol.for('wakeline.pools');
const shared = globalThis as unknown as Record<symbol, Pools | undefined>;
const pools: Pools = (shared[KEY] ??= { knex: {} });

export function database(purpose: Purpose): Knex {
  return (pools.knex[purpose] ??= knexFactory({
    client: 'pg',
    connection: (isPooled(purpose)
      ? pooledConnectionOf(purpose)
      : connectionOf(purpose)) as Knex.PgConnectionConfig,
    pool: {
      min: 0,
      max: SIZES[purpose],
      // a pooler gives each transaction another connection of the server
      ...(!isPooled(purpose) && {
        afterCreate: (connection: Querying, done: (error: Error | null, connection: Querying) => void) => {
          prepareRepeated(connection);
          done(null, connection);
        },
      }),
    },
    acquireConnectionTimeout: 5000,
  }));
}

/** The pool behind Lucia, which speaks to `pg` itself. */
export function signInPool(): pg.Pool {
  if (!pools.signIn) {
    pools.signIn = new pg.Pool({ ...connectionOf('sign_in'), max: SIZES.sign_in });
    pools.signIn.on('connect', (client) => prepareRepeated(client as Querying));
    pools.signIn.on('error', (error) =>
      log.warn({ error: error.message }, 'an idle sign-in connection was lost'),
    );
  }
  return pools.signIn;
}

/** A session of its own, past any pooler: for LISTEN, locks and the ingest lanes. The caller ends it. */
export async function connect(
  purpose: Purpose,
  settings: Readonly<Record<string, string>> = {},
): Promise<pg.Client> {
  const connection = connectionOf(purpose);
  const options = [
    connection.options,
    ...Object.entries(settings).map(([name, value]) => `-c ${name}=${value}`),
  ];
  const client = new pg.Client({ ...connection, options: options.join(' ') });
  client.on('error', (error) => log.warn({ error: error.message }, 'a database connection was lost'));
  await client.connect();
  return client;
}

/** The pools as they are, for whoever counts them. */
export const poolsNow = (): Readonly<Pools> => pools;

export async function closePools(): Promise<void> {
  const { knex, signIn } = pools;
  pools.knex = {};
  pools.signIn = undefined;
  await Promise.all([...Object.values(knex).map((k) => k.destroy()), signIn?.end() ?? Promise.resolve()]);
}

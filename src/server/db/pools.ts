import knexFactory, { type Knex } from 'knex';
import pg from 'pg';
import { config } from '../config';
import { log } from '../log';

// int8 fits a double in all that this product counts
pg.types.setTypeParser(pg.types.builtins.INT8, Number);

export type Purpose = 'web' | 'sign_in' | 'ingest';

/** Connection settings by purpose: which account, which role, what is fixed for the whole connection. */
export function connectionOf(purpose: Purpose): pg.ClientConfig {
  const c = config();
  const own = purpose === 'ingest' ? c.DATABASE_URL_INGEST : c.DATABASE_URL_APP;
  const options = ['-c jit=off', '-c statement_timeout=30s', '-c lock_timeout=10s'];
  if (!own && !c.DATABASE_ONE_ROLE)
    options.push(`-c role=${purpose === 'ingest' ? 'wakeline_ingest' : 'wakeline_app'}`);
  if (purpose === 'sign_in') options.push('-c wakeline.purpose=sign_in');
  return {
    connectionString: own ?? c.DATABASE_URL,
    options: options.join(' '),
    connectionTimeoutMillis: 5000,
  };
}

const SIZES: Record<Purpose, number> = { web: 10, sign_in: 3, ingest: 6 };

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
    connection: connectionOf(purpose) as Knex.PgConnectionConfig,
    pool: { min: 0, max: SIZES[purpose] },
    acquireConnectionTimeout: 5000,
  }));
}

/** The pool behind Lucia, which speaks to `pg` itself. */
export function signInPool(): pg.Pool {
  if (!pools.signIn) {
    pools.signIn = new pg.Pool({ ...connectionOf('sign_in'), max: SIZES.sign_in });
    pools.signIn.on('error', (error) =>
      log.warn({ error: error.message }, 'an idle sign-in connection was lost'),
    );
  }
  return pools.signIn;
}

/** A connection of its own, for LISTEN and for the ingest lanes. The caller ends it. */
export async function connect(purpose: Purpose): Promise<pg.Client> {
  const client = new pg.Client(connectionOf(purpose));
  client.on('error', (error) => log.warn({ error: error.message }, 'a database connection was lost'));
  await client.connect();
  return client;
}

export async function closePools(): Promise<void> {
  const { knex, signIn } = pools;
  pools.knex = {};
  pools.signIn = undefined;
  await Promise.all([...Object.values(knex).map((k) => k.destroy()), signIn?.end() ?? Promise.resolve()]);
}

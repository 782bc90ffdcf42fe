import pg from 'pg';
import type { TestDatabase } from './database';

export interface Elsewhere {
  /** Its transaction's number. */
  xid: string;
  end(): Promise<void>;
}

/** A transaction with a number that stays open in another database of the same cluster. */
export async function transactionElsewhere(db: TestDatabase): Promise<Elsewhere> {
  const address = new URL(db.url);
  address.pathname = '/postgres';
  const client = new pg.Client(address.href);
  await client.connect();
  await client.query('begin');
  const { rows } = await client.query<{ xid: string }>('select pg_current_xact_id()::text as xid');
  return { xid: rows[0]!.xid, end: () => client.end() };
}

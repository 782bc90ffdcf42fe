import type { Knex } from 'knex';

/** Column names with their PostgreSQL types. */
export type Columns = Record<string, string>;

const quoted = (name: string) => `"${name}"`;

/**
 * Inserts many rows in one statement, whatever their number, and gives back the columns named in `returning`.
 * Map the answer by natural keys: its order is not promised.
 */
export async function insertRows<Returned extends object>(
  db: Knex,
  table: string,
  columns: Columns,
  rows: Record<string, unknown>[],
  returning: string[] = ['id'],
): Promise<Returned[]> {
  if (rows.length === 0) return [];
  const names = Object.keys(columns).map(quoted).join(', ');
  const typed = Object.entries(columns)
    .map(([name, type]) => `${quoted(name)} ${type}`)
    .join(', ');
  const result = await db.raw<{ rows: Returned[] }>(
    `insert into ${quoted(table)} (${names}) select ${names} from jsonb_to_recordset(?::jsonb) as r(${typed})
     returning ${returning.map(quoted).join(', ')}`,
    [JSON.stringify(rows)],
  );
  return result.rows;
}

/** The value under a key that must be there; a plan that names what it does not define stops the seed. */
export function known<K, V>(map: ReadonlyMap<K, V>, key: K, what: string): V {
  const value = map.get(key);
  if (value === undefined) throw new Error(`The plan names ${what} "${String(key)}" and does not define it.`);
  return value;
}

/** As insertRows, for things that have a name: their numbers by it. */
export async function namedIds(
  db: Knex,
  table: string,
  columns: Columns,
  rows: Record<string, unknown>[],
): Promise<Map<string, number>> {
  const made = await insertRows<{ id: number; name: string }>(db, table, columns, rows, ['id', 'name']);
  return new Map(made.map((r) => [r.name, r.id]));
}

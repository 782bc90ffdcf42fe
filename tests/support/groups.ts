import { pipeline } from 'node:stream/promises';
import type pg from 'pg';
import { from as copyFrom, to as copyTo } from 'pg-copy-streams';

/**
 * Groups of organisations, each in a database of its own: what belongs to an organisation, told from the schema alone, and
 * how it moves from one database to another. Used by the test that keeps the schema ready for it, and by the bench.
 */

/** Tables that belong to an installation and stay where they are. */
export const OF_THE_INSTALLATION = new Set(['installation', 'knex_migrations', 'knex_migrations_lock']);

export interface OwnedTable {
  name: string;
  /** Columns that are stored, not computed. */
  columns: string[];
  /** Condition on its rows, with $ORGANISATION for the organisation's number. */
  where: string;
  /** Columns that lead to a table further on: filled in once that is there. */
  later: string[];
}

interface Column {
  table: string;
  name: string;
  required: boolean;
  computed: boolean;
  /** Table that its foreign key leads to. */
  leadsTo: string | null;
}

async function columnsOf(db: pg.ClientBase | pg.Pool): Promise<Map<string, Column[]>> {
  const { rows } = await db.query<Column>(
    `select c.relname as "table", a.attname as name, a.attnotnull as required, a.attgenerated <> '' as computed,
            (select f.relname from pg_constraint k join pg_class f on f.oid = k.confrelid
             where k.contype = 'f' and k.conrelid = c.oid and k.conkey[1] = a.attnum and cardinality(k.conkey) = 1
             limit 1) as "leadsTo"
     from pg_class c join pg_attribute a on a.attrelid = c.oid and a.attnum > 0 and not a.attisdropped
     where c.relnamespace = 'public'::regnamespace and c.relkind in ('r', 'p') and not c.relispartition
     order by c.relname, a.attnum`,
  );
  const tables = new Map<string, Column[]>();
  for (const row of rows) tables.set(row.table, [...(tables.get(row.table) ?? []), row]);
  return tables;
}

interface Key {
  table: string;
  column: string;
  to: string;
  required: boolean;
}
/** Foreign keys by their columns, without those from a table to itself. */
async function keysOf(db: pg.ClientBase | pg.Pool): Promise<Key[]> {
  const { rows } = await db.query<Key>(
    `select t.relname as "table", a.attname as "column", f.relname as "to", a.attnotnull as required
     from pg_constraint k join pg_class t on t.oid = k.conrelid join pg_class f on f.oid = k.confrelid
       join pg_attribute a on a.attrelid = t.oid and a.attnum = any (k.conkey)
     where k.contype = 'f' and k.connamespace = 'public'::regnamespace and k.conrelid <> k.confrelid and not t.relispartition
     order by a.attnotnull desc, 1, 2`,
  );
  return rows;
}

/**
 * How each table's rows belong to an organisation: by its number, or by what they lead to (a foreign key, or a column that
 * is named as the frames' are: `string_id`), whichever is filled in always.
 * @returns those that belong, parents first, and the names of those that do not
 */
export async function ownedTables(
  db: pg.ClientBase | pg.Pool,
): Promise<{ owned: OwnedTable[]; rest: string[] }> {
  const tables = await columnsOf(db);
  const where = new Map<string, string>([['organisation', 'id = $ORGANISATION']]);
  const parentOf = (c: Column): string | undefined => {
    const named = c.name.endsWith('_id') ? c.name.slice(0, -3) : undefined;
    return c.leadsTo ?? (named !== undefined && tables.has(named) ? named : undefined);
  };
  for (let grown = true; grown;) {
    grown = false;
    for (const [table, columns] of tables) {
      if (where.has(table)) continue;
      const own = columns.find((c) => c.name === 'organisation_id' && c.leadsTo === 'organisation');
      const by = own ?? columns.find((c) => c.required && where.has(parentOf(c) ?? ''));
      const parent = by && parentOf(by);
      if (!by || parent === undefined) continue;
      where.set(
        table,
        own
          ? 'organisation_id = $ORGANISATION'
          : `${by.name} in (select id from ${parent} where ${where.get(parent) ?? ''})`,
      );
      grown = true;
    }
  }
  const keys = await keysOf(db);
  const order: string[] = [];
  const later = new Map<string, string[]>();
  const waiting = new Set(where.keys());
  const unmet = (table: string) =>
    keys.filter((k) => k.table === table && k.to !== table && waiting.has(k.to));
  while (waiting.size > 0) {
    const names = [...waiting];
    // one that leads nowhere else any more; failing that, one whose ways on may be filled in later
    const next =
      names.find((t) => unmet(t).length === 0) ?? names.find((t) => unmet(t).every((k) => !k.required));
    if (next === undefined) throw new Error(`Foreign keys go in a circle: ${names.join(', ')}`);
    later.set(
      next,
      unmet(next).map((k) => k.column),
    );
    waiting.delete(next);
    order.push(next);
  }
  return {
    owned: order.map((name) => ({
      name,
      columns: (tables.get(name) ?? []).filter((c) => !c.computed).map((c) => c.name),
      where: where.get(name) ?? '',
      later: later.get(name) ?? [],
    })),
    rest: [...tables.keys()].filter((t) => !where.has(t)),
  };
}

const conditionOf = ({ where }: OwnedTable, organisation: number): string =>
  where.replaceAll('$ORGANISATION', String(organisation));
const rowsOf = (table: OwnedTable, organisation: number, without: readonly string[] = []): string => {
  const columns = table.columns.map((c) => (without.includes(c) ? `null as "${c}"` : `"${c}"`));
  return `(select ${columns.join(', ')} from ${table.name} where ${conditionOf(table, organisation)})`;
};

/** Rows and a checksum of every table's rows of an organisation. */
export async function holdingsOf(
  db: pg.ClientBase | pg.Pool,
  owned: readonly OwnedTable[],
  organisation: number,
): Promise<Map<string, string>> {
  const found = new Map<string, string>();
  for (const table of owned) {
    const { rows } = await db.query<{ of: string }>(
      `select concat_ws(' ', count(*), coalesce(sum(hashtextextended(t::text, 0)::numeric), 0)) as of from ${rowsOf(table, organisation)} t`,
    );
    found.set(table.name, rows[0]?.of ?? '');
  }
  return found;
}

/** Copies everything of an organisation in one transaction, table by table, parents first. @returns rows */
export async function copyOrganisation(
  from: pg.Client,
  to: pg.Client,
  owned: readonly OwnedTable[],
  organisation: number,
): Promise<number> {
  let copied = 0;
  await from.query('begin isolation level repeatable read read only');
  await to.query('begin');
  try {
    for (const table of owned) {
      const out = from.query(copyTo(`copy ${rowsOf(table, organisation, table.later)} to stdout`));
      const into = to.query(
        copyFrom(`copy ${table.name} (${table.columns.map((c) => `"${c}"`).join(', ')}) from stdin`),
      );
      await pipeline(out, into);
      copied += into.rowCount ?? 0;
    }
    for (const table of owned)
      for (const column of table.later) {
        const { rows } = await from.query<{ id: number; value: number }>(
          `select id, "${column}" as value from ${table.name} where "${column}" is not null and ${conditionOf(table, organisation)}`,
        );
        for (const { id, value } of rows)
          await to.query(`update ${table.name} set "${column}" = $2 where id = $1`, [id, value]);
      }
    await to.query('commit');
  } catch (error) {
    await to.query('rollback');
    throw error;
  } finally {
    await from.query('commit');
  }
  return copied;
}

/** Numbers of a group's rows: so many groups share each type's numbers without ever giving one twice. */
export const MOST_GROUPS = 64;

/** Gives a new, empty database the numbers of one group, so that rows of several can meet in one database. */
export async function takeNumbersOf(db: pg.ClientBase | pg.Pool, group: number): Promise<void> {
  const { rows } = await db.query<{ table: string; column: string; int8: boolean }>(
    `select c.relname as "table", a.attname as "column", a.atttypid = 'int8'::regtype as int8
     from pg_class c join pg_attribute a on a.attrelid = c.oid and a.attidentity <> ''
     where c.relnamespace = 'public'::regnamespace and c.relkind in ('r', 'p') and not c.relispartition`,
  );
  for (const { table, column, int8 } of rows) {
    const share = (int8 ? 2n ** 63n : 2n ** 31n) / BigInt(MOST_GROUPS);
    const first = BigInt(group) * share + 1n;
    await db.query(
      `alter table ${table} alter column ${column} set maxvalue ${first + share - 2n} set minvalue ${first} set start ${first} restart`,
    );
  }
}

import type { Knex } from 'knex';

/** Tables that outlive the fleet: what the installation itself is. */
const KEPT = ['installation', 'knex_migrations', 'knex_migrations_lock'];

/** Empties every table of the product, so that a fleet can be laid out afresh. */
export async function clearFleet(tx: Knex.Transaction): Promise<void> {
  const { rows } = await tx.raw<{ rows: { name: string }[] }>(
    `select format('%I', c.relname) as name from pg_class c join pg_namespace n on n.oid = c.relnamespace
     where n.nspname = 'public' and c.relkind in ('r', 'p') and not c.relispartition and c.relname <> all (?)`,
    [KEPT],
  );
  if (rows.length > 0)
    await tx.raw(`truncate ${rows.map((r) => r.name).join(', ')} restart identity cascade`);
}

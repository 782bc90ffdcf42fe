import type { Knex } from 'knex';

/** Tokens as ingest sees them: which of those in use were ended, and when each was last used. */

/** Of these tokens the ones that no longer let anybody in. */
export async function endedTokens(db: Knex, tokenIds: readonly number[]): Promise<Set<number>> {
  if (tokenIds.length === 0) return new Set();
  const { rows } = await db.raw<{ rows: { id: number }[] }>(
    `select x.id from unnest(?::int4[]) x(id) left join ingest_token t on t.id = x.id
     where t.id is null or t.ended_at <= now()`,
    [[...tokenIds]],
  );
  return new Set(rows.map((r) => r.id));
}

/** Notes that these tokens were used, from where. */
export async function touchTokens(
  db: Knex,
  used: readonly { tokenId: number; at: Date; address: string }[],
): Promise<void> {
  if (used.length === 0) return;
  await db.raw(
    `update ingest_token t set last_used_at = greatest(t.last_used_at, x.at), last_address = x.address
     from unnest(?::int4[], ?::timestamptz[], ?::text[]) x(id, at, address) where t.id = x.id`,
    [used.map((u) => u.tokenId), used.map((u) => u.at.toISOString()), used.map((u) => u.address)],
  );
}

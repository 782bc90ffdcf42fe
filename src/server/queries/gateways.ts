import type { Tx } from '../db/transaction';

/** Gateways of a site, when each was last heard and since when it is known to be silent. Epoch seconds. */
export async function gatewaysOf(
  tx: Tx,
  siteId: number,
): Promise<{ id: number; name: string; lastHeardS: number | null; silentSinceS: number | null }[]> {
  const { rows } = await tx.raw<{
    rows: { id: number; name: string; lastHeardS: number | null; silentSinceS: number | null }[];
  }>(
    `select id, name, extract(epoch from last_heard_at)::float8 as "lastHeardS",
            extract(epoch from silent_since)::float8 as "silentSinceS"
     from gateway where site_id = ? order by id`,
    [siteId],
  );
  return rows;
}

export async function markGateways(
  tx: Tx,
  marks: readonly { id: number; silentSinceS: number | null }[],
): Promise<void> {
  await tx.raw(
    `update gateway set silent_since = to_timestamp(m.since)
     from unnest(?::int4[], ?::float8[]) m(id, since) where gateway.id = m.id`,
    [marks.map((m) => m.id), marks.map((m) => m.silentSinceS) as number[]],
  );
}

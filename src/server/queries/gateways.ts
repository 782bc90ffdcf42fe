import type { Tx } from '../db/transaction';

export interface GatewayHeard {
  id: number;
  name: string;
  logger: string;
  lastHeardS: number | null;
  silentSinceS: number | null;
}

/** Gateways of a site, when each was last heard and since when it is known to be silent. Epoch seconds. */
export async function gatewaysOf(tx: Tx, siteId: number): Promise<GatewayHeard[]> {
  const { rows } = await tx.raw<{ rows: GatewayHeard[] }>(
    `select g.id, g.name, l.serial as logger, extract(epoch from g.last_heard_at)::float8 as "lastHeardS",
            extract(epoch from g.silent_since)::float8 as "silentSinceS"
     from gateway g join logger l on l.id = g.logger_id where g.site_id = ? order by g.id`,
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

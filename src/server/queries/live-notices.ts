import type { Knex } from 'knex';
import { z } from 'zod';

/**
 * What processes tell each other: NOTIFY with the database's own numbers, never data. A notice is a wake-up; whoever
 * is woken reads for itself. It leaves when the transaction commits.
 */
export const CHANNELS = {
  /** {sites: id[], strings: id[]}: something about them is new. */
  changed: 'changed',
  /** Site id: a roll call was started or stopped there. */
  rollCall: 'roll_call',
  /** Site id: its as-built, its stage, its times or its types were changed. */
  asBuilt: 'as_built',
  /** Site id: states or verdicts of its units have changed, or the findings of its strings. */
  judged: 'judged',
  /** {logger, by}: a process took a logger's lease. */
  leased: 'leased',
  /** Logger id: one of its tokens was ended, or will be. */
  tokens: 'tokens',
  /** {site, by}: frames or reports of a site were written by a process that may not be the one that judges it. */
  written: 'written',
  /** [person id]: their notices have changed. */
  noticed: 'noticed',
  /** Person id: a session of theirs ended, or what they may see has changed (by triggers). */
  access: 'access',
  /** A webhook is to be called now. */
  called: 'called',
} as const;

const changed = z.object({ sites: z.array(z.int()).default([]), strings: z.array(z.int()).default([]) });
export type Changed = z.infer<typeof changed>;
const lease = z.object({ logger: z.int(), by: z.string() });
const written = z.object({ site: z.int(), by: z.string() });

/** A notice as this version understands it; anybody may notify, so what is unreadable is nothing. */
function read<T extends z.ZodType>(schema: T, payload: string): z.infer<T> | undefined {
  try {
    return schema.safeParse(JSON.parse(payload)).data;
  } catch {
    return undefined; // no JSON: not ours
  }
}
export const readChanged = (payload: string): Changed | undefined => read(changed, payload);
export const readLeased = (payload: string): z.infer<typeof lease> | undefined => read(lease, payload);
export const readWritten = (payload: string): z.infer<typeof written> | undefined => read(written, payload);

/** The persons of a notice on `noticed`. */
export const readNoticed = (payload: string): number[] => read(z.array(z.int()), payload) ?? [];

/** A notice's payload must stay below 8000 bytes. */
const IDS_A_NOTICE = 600;

/** The payloads that tell of these changes. */
export function changedPayloads(changed: { sites: Iterable<number>; strings: Iterable<number> }): string[] {
  const sites = [...changed.sites];
  const strings = [...changed.strings];
  const payloads: string[] = [];
  for (let i = 0; i < Math.max(sites.length, strings.length); i += IDS_A_NOTICE)
    payloads.push(
      JSON.stringify({
        sites: sites.slice(i, i + IDS_A_NOTICE),
        strings: strings.slice(i, i + IDS_A_NOTICE),
      }),
    );
  return payloads;
}

export async function sendNotices(
  db: Knex,
  notices: readonly { channel: string; payload: string }[],
): Promise<void> {
  if (notices.length === 0) return;
  await db.raw('select pg_notify(c, p) from unnest(?::text[], ?::text[]) x(c, p)', [
    notices.map((n) => n.channel),
    notices.map((n) => n.payload),
  ]);
}

/** Tells /live that something at a site is new: call it in the transaction that writes it. */
export async function tellSiteChanged(tx: Knex, siteId: number): Promise<void> {
  await tx.raw('select pg_notify(?, ?)', [
    CHANNELS.changed,
    JSON.stringify({ sites: [siteId], strings: [] }),
  ]);
}

/** Tells ingest and judgement that a site's as-built has changed: loggers then get a new roster. */
export async function tellAsBuiltChanged(tx: Knex, siteId: number): Promise<void> {
  await tx.raw('select pg_notify(?, ?)', [CHANNELS.asBuilt, String(siteId)]);
}

/** Tells ingest that tokens of a logger were ended: connections that came with one of them are closed. */
export async function tellTokensEnded(tx: Knex, loggerId: number): Promise<void> {
  await tx.raw('select pg_notify(?, ?)', [CHANNELS.tokens, String(loggerId)]);
}

/** Wakes the calls to other systems: somebody looks at one. */
export async function tellCalled(tx: Knex): Promise<void> {
  await tx.raw('select pg_notify(?, ?)', [CHANNELS.called, '']);
}

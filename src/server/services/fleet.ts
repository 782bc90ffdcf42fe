import type { FleetNow, SinceLastLook } from '../../schemas/api/fleet';
import type { ShutdownNow } from '../../schemas/api/shutdown';
import type { Tx } from '../db/transaction';
import { acknowledgementsOf, contactsOf, missedSince, noteLook } from '../queries/fleet';
import { sitesForShutdown, sitesNow } from '../queries/sites-now';
import { causesNow } from './causes';

const sitesOf = (causes: readonly { siteId: string }[]): string[] => [
  ...new Set(causes.map((c) => c.siteId)),
];

/** Every site that the actor sees, as it stands, with what to act on. A fixed number of statements. */
export async function readFleet(tx: Tx, at: Date): Promise<FleetNow> {
  const sites = await sitesNow(tx, at);
  const causes = await causesNow(tx, at);
  return {
    at: at.toISOString(),
    sites,
    causes,
    contacts: await contactsOf(tx, sitesOf(causes)),
    acknowledgements: await acknowledgementsOf(tx, causes),
  };
}

/** The part of the fleet that shutdown is about: sites with a cause, or with something other than a release in force. */
export async function readShutdown(tx: Tx, at: Date): Promise<ShutdownNow> {
  const causes = await causesNow(tx, at);
  const concerned = sitesOf(causes);
  const sites = await sitesNow(tx, at, await sitesForShutdown(tx, concerned));
  return {
    at: at.toISOString(),
    sites,
    causes,
    contacts: await contactsOf(
      tx,
      sites.map((s) => s.id),
    ),
    acknowledgements: await acknowledgementsOf(tx, causes),
  };
}

/** So many lines fit before the causes without pushing them off a laptop's screen. */
const MISSED_MAX = 6;

/** Notes the look, and tells what happened since the visit before; null on a first visit. */
export async function lookAtFleet(tx: Tx, personId: number, at: Date): Promise<SinceLastLook | null> {
  const before = await noteLook(tx, personId, at);
  if (!before) return null;
  return { since: before.toISOString(), ...(await missedSince(tx, before, MISSED_MAX)) };
}

import type { FleetNow, SinceLastLook } from '../../schemas/api/fleet';
import type { ShutdownNow } from '../../schemas/api/shutdown';
import type { Tx } from '../db/transaction';
import { acknowledgementsOf, contactsOf, missedSince, noteLook } from '../queries/fleet';
import { visibleSites } from '../queries/visible-site';
import { keptSites } from './kept-sites';

/** The sites of a fleet, or of a page of it, with what explains what is amiss there. */
export type Standing = Pick<FleetNow, 'at' | 'sites' | 'causes'>;

/** Every site that the actor sees, as it stands, with what to act on. */
export async function readStanding(tx: Tx, at: Date): Promise<Standing> {
  const ids = (await visibleSites(tx)).map((s) => s.id);
  return { at: at.toISOString(), ...(await keptSites().read(tx, at, ids)) };
}

/** The sites that shutdown is about: those with a cause, or with something other than a release in force. */
export function aboutShutdown(standing: Standing): Standing {
  const concerned = new Set(standing.causes.map((c) => c.siteId));
  return { ...standing, sites: standing.sites.filter((s) => concerned.has(s.id) || s.commands.length > 0) };
}

/** The fleet or its first page, with whom to call where there is a cause, and who has taken each on. */
export const fleetWithPeople = (tx: Tx, standing: Standing): Promise<FleetNow> =>
  withPeople(tx, standing, [...new Set(standing.causes.map((c) => c.siteId))]);

/** What shutdown is about or its first page, with whom to call at each site, and who has taken each cause on. */
export const shutdownWithPeople = (tx: Tx, standing: Standing): Promise<ShutdownNow> =>
  withPeople(
    tx,
    standing,
    standing.sites.map((s) => s.id),
  );

const withPeople = async (tx: Tx, standing: Standing, siteRefs: readonly string[]): Promise<FleetNow> => ({
  ...standing,
  contacts: await contactsOf(tx, siteRefs),
  acknowledgements: await acknowledgementsOf(tx, standing.causes),
});

/** The whole fleet, as it stands. */
export const readFleet = async (tx: Tx, at: Date): Promise<FleetNow> =>
  fleetWithPeople(tx, await readStanding(tx, at));

/** The part of the fleet that shutdown is about. */
export const readShutdown = async (tx: Tx, at: Date): Promise<ShutdownNow> =>
  shutdownWithPeople(tx, aboutShutdown(await readStanding(tx, at)));

/** So many lines fit before the causes without pushing them off a laptop's screen. */
const MISSED_MAX = 6;

/** Notes the look, and tells what happened since the visit before; null on a first visit. */
export async function lookAtFleet(tx: Tx, personId: number, at: Date): Promise<SinceLastLook | null> {
  const before = await noteLook(tx, personId, at);
  if (!before) return null;
  return { since: before.toISOString(), ...(await missedSince(tx, before, MISSED_MAX)) };
}

import type { FleetNow, SinceLastLook } from '../../schemas/api/fleet';
import type { ShutdownNow } from '../../schemas/api/shutdown';
import type { Tx } from '../db/transaction';
import { acknowledgementsOf, contactsOf, missedSince, noteLook } from '../queries/fleet';
import { visibleSiteNumbers } from '../queries/visible-site';
import { keptSites } from './kept-sites';

/** The sites of a fleet, or of a page of it, with what explains what is amiss there. */
export type Standing = Pick<FleetNow, 'at' | 'sites' | 'causes'>;

/** Every site that the actor sees, as it stands, with what to act on. */
export async function readStanding(tx: Tx, at: Date): Promise<Standing> {
  const standings = await keptSites().read(tx, at, await visibleSiteNumbers(tx));
  return {
    at: at.toISOString(),
    sites: standings.map((s) => s.site),
    causes: standings.flatMap((s) => s.causes),
  };
}

/** The sites that shutdown is about: those with a cause, or with something other than a release in force. */
export function aboutShutdown(standing: Standing): Standing {
  const concerned = new Set(standing.causes.map((c) => c.siteId));
  return { ...standing, sites: standing.sites.filter((s) => concerned.has(s.id) || s.commands.length > 0) };
}

/** Adds whom to call at these sites, and who has taken these causes on. */
export async function withPeople<S extends Pick<Standing, 'causes'>>(
  tx: Tx,
  standing: S,
  siteRefs: Iterable<string>,
): Promise<S & Pick<FleetNow, 'contacts' | 'acknowledgements'>> {
  return {
    ...standing,
    contacts: await contactsOf(tx, [...new Set(siteRefs)]),
    acknowledgements: await acknowledgementsOf(tx, standing.causes),
  };
}

/** The whole fleet, as it stands. */
export async function readFleet(tx: Tx, at: Date): Promise<FleetNow> {
  const standing = await readStanding(tx, at);
  return withPeople(
    tx,
    standing,
    standing.causes.map((c) => c.siteId),
  );
}

/** The part of the fleet that shutdown is about. */
export async function readShutdown(tx: Tx, at: Date): Promise<ShutdownNow> {
  const standing = aboutShutdown(await readStanding(tx, at));
  return withPeople(
    tx,
    standing,
    standing.sites.map((s) => s.id),
  );
}

/** So many lines fit before the causes without pushing them off a laptop's screen. */
const MISSED_MAX = 6;

/** Notes the look, and tells what happened since the visit before; null on a first visit. */
export async function lookAtFleet(tx: Tx, personId: number, at: Date): Promise<SinceLastLook | null> {
  const before = await noteLook(tx, personId, at);
  if (!before) return null;
  return { since: before.toISOString(), ...(await missedSince(tx, before, MISSED_MAX)) };
}

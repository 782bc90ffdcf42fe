import type { CauseNow, SiteNow } from '../../schemas/api/now';
import type { Change } from '../../schemas/live';
import { asIngest, type Tx } from '../db/transaction';
import { eventsBetween, horizon, rollCallOpen, siteByString, type LiveEvent } from '../queries/live';
import { gatewaysNow, invertersNow, stringsNow } from '../queries/now';
import { answersOf } from '../queries/roll-call';
import { sitesNow } from '../queries/sites-now';
import { causesNow } from '../services/causes';
import { eventItemsOf, serialsHeard, type Subject } from './topics';

/** One subscription as a round sees it. */
export interface Listening {
  subject: Subject;
  /** Events of transactions below it were sent. */
  cursor: string;
  /** The causes that were sent last, as text. */
  causes: string;
}
export interface Dirty {
  sites: ReadonlySet<number>;
  strings: ReadonlySet<number>;
}
export interface Delta<L extends Listening> {
  to: L;
  cursor: string;
  change: Change;
}

const EVENTS_A_ROUND = 2000;

const isBelow = (a: string, b: string): boolean => BigInt(a) < BigInt(b);
const atSite = (l: Listening): number | null => (l.subject.kind === 'fleet' ? null : l.subject.siteId);

/** What changed at one site, read once and shared by everybody who listens to it. */
type SiteParts = Pick<Change, 'strings' | 'site' | 'inverters' | 'gateways' | 'causes'> & { open: boolean };

/** What changed over the fleet. */
interface FleetParts {
  sites: SiteNow[];
  causes: CauseNow[];
}

/**
 * Reads what changed, once for all, and gives each listener its part: every listener gets a delta, an empty one
 * where nothing concerns it. `fleetDirty`: sites whose line in the fleet is to be sent; it may lag behind `dirty`.
 */
export async function readRound<L extends Listening>(
  listening: readonly L[],
  dirty: Dirty,
  fleetDirty: ReadonlySet<number>,
): Promise<Delta<L>[]> {
  if (listening.length === 0) return [];
  return asIngest(async (tx) => {
    const at = new Date();
    const to = await horizon(tx);
    const events = await missedEvents(tx, listening, to);
    const bySite = await changedStrings(tx, dirty);
    const parts = new Map<number, SiteParts>();
    for (const siteId of new Set(listening.map(atSite)))
      if (siteId !== null && (bySite.has(siteId) || dirty.sites.has(siteId)))
        parts.set(
          siteId,
          await readSite(tx, at, siteId, bySite.get(siteId) ?? [], {
            whole: dirty.sites.has(siteId),
            here: listening.filter((l) => atSite(l) === siteId),
          }),
        );
    const fleet = await readFleet(tx, at, listening, fleetDirty);
    const deltas: Delta<L>[] = [];
    for (const l of listening) {
      const news = events.filter((e) => !isBelow(e.xid, l.cursor));
      const change = await changeFor(tx, l, news, parts, fleet);
      deltas.push({ to: l, cursor: isBelow(l.cursor, to) ? to : l.cursor, change });
    }
    return deltas;
  });
}

async function missedEvents(tx: Tx, listening: readonly Listening[], to: string): Promise<LiveEvent[]> {
  const siteIds = new Set(listening.flatMap((l) => atSite(l) ?? []));
  const from = listening.reduce((low, l) => (isBelow(l.cursor, low) ? l.cursor : low), to);
  if (siteIds.size === 0 || !isBelow(from, to)) return [];
  return eventsBetween(tx, from, to, { siteIds: [...siteIds] }, EVENTS_A_ROUND);
}

async function changedStrings(tx: Tx, dirty: Dirty): Promise<Map<number, number[]>> {
  const bySite = new Map<number, number[]>();
  if (dirty.strings.size === 0) return bySite;
  for (const [stringId, siteId] of await siteByString(tx, [...dirty.strings])) {
    const list = bySite.get(siteId);
    if (list) list.push(stringId);
    else bySite.set(siteId, [stringId]);
  }
  return bySite;
}

async function readSite(
  tx: Tx,
  at: Date,
  siteId: number,
  strings: readonly number[],
  { whole, here }: { whole: boolean; here: readonly Listening[] },
): Promise<SiteParts> {
  const page = here.some((l) => l.subject.kind === 'site');
  const all = page || here.some((l) => l.subject.kind === 'roll-call');
  const watched = new Set(here.flatMap((l) => (l.subject.kind === 'string' ? [l.subject.stringId] : [])));
  const read = all ? strings : strings.filter((id) => watched.has(id));
  const [site] = page ? await sitesNow(tx, at, [siteId]) : [];
  return {
    strings: read.length > 0 ? await stringsNow(tx, at, { stringIds: read }) : [],
    ...(site && { site }),
    ...(whole && (page || watched.size > 0) && { inverters: await invertersNow(tx, at, siteId) }),
    ...(whole && page && { gateways: await gatewaysNow(tx, at, siteId) }),
    ...(whole && page && { causes: await causesNow(tx, at, [siteId]) }),
    open: await rollCallOpen(tx, siteId),
  };
}

async function readFleet(
  tx: Tx,
  at: Date,
  listening: readonly Listening[],
  dirty: ReadonlySet<number>,
): Promise<FleetParts | null> {
  const visible = new Set(
    listening.flatMap((l) => (l.subject.kind === 'fleet' ? [...l.subject.siteIds] : [])),
  );
  const changed = [...dirty].filter((id) => visible.has(id));
  if (changed.length === 0) return null;
  return { sites: await sitesNow(tx, at, changed), causes: await causesNow(tx, at, [...visible]) };
}

async function changeFor(
  tx: Tx,
  listener: Listening,
  events: readonly LiveEvent[],
  parts: ReadonlyMap<number, SiteParts>,
  fleet: FleetParts | null,
): Promise<Change> {
  const { subject } = listener;
  if (subject.kind === 'fleet') return fleet ? fleetChange(listener, subject.refs, fleet) : {};
  const here = events.filter(
    (e) =>
      e.siteNumber === subject.siteId && (subject.kind !== 'string' || e.stringNumber === subject.stringId),
  );
  const of = parts.get(subject.siteId);
  const change: Change = {};
  const strings = subject.kind === 'string' ? of?.strings?.filter((s) => s.id === subject.ref) : of?.strings;
  if (strings && strings.length > 0) change.strings = strings;
  if (subject.kind === 'roll-call') {
    const serials = serialsHeard(here);
    if (serials.length > 0) change.heard = await answersOf(tx, subject.siteId, serials);
    if (here.some((e) => e.kind === 'roll_call_stopped' || e.kind === 'roll_call_started'))
      change.rollCallStopped = !(of?.open ?? (await rollCallOpen(tx, subject.siteId)));
    return change;
  }
  if (here.length > 0) change.events = eventItemsOf(here);
  if (of?.inverters) change.inverters = of.inverters;
  if (subject.kind === 'string') return change;
  if (of?.site) change.site = of.site;
  if (of?.gateways) change.gateways = of.gateways;
  if (of?.causes) takeCauses(listener, of.causes, change);
  return change;
}

function fleetChange(listener: Listening, refs: ReadonlySet<string>, fleet: FleetParts): Change {
  const change: Change = {};
  const sites = fleet.sites.filter((s) => refs.has(s.id));
  if (sites.length > 0) change.sites = sites;
  takeCauses(
    listener,
    fleet.causes.filter((c) => refs.has(c.siteId)),
    change,
  );
  return change;
}

/** Causes are sent as a whole list, and only when they differ from what was sent. */
function takeCauses(listener: Listening, causes: CauseNow[], change: Change): void {
  const text = JSON.stringify(causes);
  if (text === listener.causes) return;
  listener.causes = text;
  change.causes = causes;
}

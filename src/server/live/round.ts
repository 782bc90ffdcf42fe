import type { CauseSent } from '../../schemas/api/cause-sent';
import { sentCause } from '../../schemas/api/causes-on-the-way';
import type { CauseNow, SiteNow } from '../../schemas/api/now';
import type { Change } from '../../schemas/live';
import { asIngest, type Tx } from '../db/transaction';
import { horizon } from '../queries/horizon';
import { eventsBetween, rollCallOpen, type Events, type LiveEvent } from '../queries/live';
import { gatewaysNow, invertersNow, stringsNow } from '../queries/now';
import { answersOf } from '../queries/roll-call';
import { sitesNow } from '../queries/sites-now';
import { causesNow } from '../services/causes';
import { keptSites } from '../services/kept-sites';
import { noticesNow } from '../queries/notices';
import { eventItemsOf, isOfSite, serialsHeard, type Subject } from './topics';

/**
 * What changed, read once and shared by everybody who listens to it. In two kinds of round: news (strings, events,
 * units heard) go out at once; overviews (site lines, inverters, gateways, causes) are dearer and may wait a moment.
 */

/** One subscription as a round sees it. */
export interface Listening {
  subject: Subject;
  /** Events of transactions below it were sent. */
  cursor: string;
  /** The causes that were sent last, as text: of one site, or of a fleet by site. */
  causes: string;
  causesAt: Map<string, string>;
}
export interface Delta<L extends Listening> {
  to: L;
  cursor: string;
  change: Change;
}

/** Of more than these the newest are sent, and that some were left out. */
const EVENTS_A_ROUND = 2000;

const isBelow = (a: string, b: string): boolean => BigInt(a) < BigInt(b);
const atSite = (l: Listening): number | null => (isOfSite(l.subject) ? l.subject.siteId : null);

/**
 * Strings, events and units heard. Every listener gets a delta, an empty one where nothing concerns it. `held`: some
 * events may have to be asked for again in a moment.
 */
export async function readNews<L extends Listening>(
  listening: readonly L[],
  strings: ReadonlyMap<number, number>,
): Promise<{ deltas: Delta<L>[]; held: boolean }> {
  return asIngest(async (tx) => {
    const at = new Date();
    const { below: to, held } = await horizon(tx);
    const { events, leftOut } = await missedEvents(tx, listening, to);
    const changed = await changedStrings(tx, at, strings);
    const deltas: Delta<L>[] = [];
    for (const l of listening) {
      const mine = events.filter((e) => concerns(e, l.subject) && !isBelow(e.xid, l.cursor));
      const some = isOfSite(l.subject) && leftOut !== null && !isBelow(leftOut, l.cursor);
      const change = await newsFor(tx, l.subject, mine, some, changed);
      deltas.push({ to: l, cursor: isBelow(l.cursor, to) ? to : l.cursor, change });
    }
    return { deltas, held };
  });
}

/** Those of the changed strings that somebody watches: string → site. */
export function watchedStrings(
  listening: readonly Listening[],
  strings: ReadonlyMap<number, number>,
): Map<number, number> {
  const whole = new Set<number>();
  const single = new Set<number>();
  for (const { subject } of listening)
    if (subject.kind === 'string') single.add(subject.stringId);
    else if (isOfSite(subject)) whole.add(subject.siteId);
  return new Map([...strings].filter(([id, siteId]) => whole.has(siteId) || single.has(id)));
}

const concerns = (event: LiveEvent, subject: Subject): boolean =>
  isOfSite(subject) &&
  event.siteNumber === subject.siteId &&
  (subject.kind !== 'string' || event.stringNumber === subject.stringId);

async function missedEvents(tx: Tx, listening: readonly Listening[], to: string): Promise<Events> {
  const siteIds = new Set(listening.flatMap((l) => atSite(l) ?? []));
  const from = listening.reduce((low, l) => (isBelow(l.cursor, low) ? l.cursor : low), to);
  if (siteIds.size === 0 || !isBelow(from, to)) return { events: [], leftOut: null };
  return eventsBetween(tx, from, to, { siteIds: [...siteIds] }, EVENTS_A_ROUND);
}

/** The changed strings as they are now, by site. */
async function changedStrings(
  tx: Tx,
  at: Date,
  strings: ReadonlyMap<number, number>,
): Promise<Map<number, Change['strings']>> {
  const found = new Map<number, Change['strings']>();
  for (const siteId of new Set(strings.values())) {
    const stringIds = [...strings].flatMap(([id, of]) => (of === siteId ? [id] : []));
    found.set(siteId, await stringsNow(tx, at, { siteId, stringIds }));
  }
  return found;
}

async function newsFor(
  tx: Tx,
  subject: Subject,
  events: readonly LiveEvent[],
  leftOut: boolean,
  changed: ReadonlyMap<number, Change['strings']>,
): Promise<Change> {
  const change: Change = {};
  if (!isOfSite(subject)) return change;
  const here = changed.get(subject.siteId);
  const strings = subject.kind === 'string' ? here?.filter((s) => s.id === subject.ref) : here;
  if (strings && strings.length > 0) change.strings = strings;
  if (leftOut) change.leftOut = true;
  if (subject.kind !== 'roll-call') {
    if (events.length > 0) change.events = eventItemsOf(events);
    return change;
  }
  const serials = leftOut ? undefined : serialsHeard(events);
  if (serials?.length !== 0) change.heard = await answersOf(tx, subject.siteId, serials);
  if (leftOut || events.some((e) => e.kind === 'roll_call_stopped' || e.kind === 'roll_call_started'))
    change.rollCallStopped = !(await rollCallOpen(tx, subject.siteId));
  return change;
}

/** The notices of these persons, for whoever of them listens. */
export async function readNotices<L extends Listening>(
  listening: readonly L[],
  persons: ReadonlySet<number> | 'everybody',
): Promise<Delta<L>[]> {
  const mine = listening.flatMap((to) =>
    to.subject.kind === 'notices' && (persons === 'everybody' || persons.has(to.subject.personId))
      ? [{ to, personId: to.subject.personId }]
      : [],
  );
  if (mine.length === 0) return [];
  return asIngest(async (tx) => {
    const found = new Map<number, Change>();
    for (const { personId } of mine)
      if (!found.has(personId)) found.set(personId, { notices: await noticesNow(tx, personId) });
    return mine.map(({ to, personId }) => ({ to, cursor: to.cursor, change: found.get(personId) ?? {} }));
  });
}

type SiteParts = Pick<Change, 'site' | 'inverters' | 'gateways' | 'causes'>;

/** Site lines, inverters, gateways and causes of the sites that changed, for those whom they concern. */
export async function readOverviews<L extends Listening>(
  listening: readonly L[],
  sites: ReadonlySet<number>,
): Promise<Delta<L>[]> {
  return asIngest(async (tx) => {
    const at = new Date();
    const parts = new Map<number, SiteParts>();
    for (const siteId of sites) {
      const here = listening.filter((l) => atSite(l) === siteId).map((l) => l.subject.kind);
      if (here.length > 0) parts.set(siteId, await readSite(tx, at, siteId, here));
    }
    const fleet = await readFleet(tx, at, listening, sites);
    return listening.map((l) => ({ to: l, cursor: l.cursor, change: overviewFor(l, parts, fleet) }));
  });
}

async function readSite(
  tx: Tx,
  at: Date,
  siteId: number,
  kinds: readonly Subject['kind'][],
): Promise<SiteParts> {
  const page = kinds.includes('site');
  if (!page && !kinds.includes('string')) return {};
  const inverters = await invertersNow(tx, at, siteId);
  if (!page) return { inverters };
  const [site] = await sitesNow(tx, at, [siteId]);
  return {
    inverters,
    ...(site && { site }),
    gateways: await gatewaysNow(tx, at, siteId),
    causes: (await causesNow(tx, at, [siteId])).map(sentCause),
  };
}

/** The causes of a site as they are sent. */
interface Told {
  site: string;
  causes: CauseSent[];
  text: string;
}
interface FleetParts {
  sites: SiteNow[];
  causes: Told[];
}
const told = new WeakMap<CauseNow[], Told>();
/** Put into words once, as long as the list of the site is kept. */
function toldOf(site: string, list: CauseNow[]): Told {
  const known = told.get(list);
  if (known) return known;
  const causes = list.map(sentCause);
  const made = { site, causes, text: JSON.stringify(causes) };
  told.set(list, made);
  return made;
}

async function readFleet(
  tx: Tx,
  at: Date,
  listening: readonly Listening[],
  changed: ReadonlySet<number>,
): Promise<FleetParts | null> {
  const visible = new Set(
    listening.flatMap((l) => (l.subject.kind === 'fleet' ? [...l.subject.siteIds] : [])),
  );
  const wanted = [...changed].filter((id) => visible.has(id));
  if (wanted.length === 0) return null;
  const kept = keptSites();
  const inNews = await kept.readEach(tx, at, wanted);
  const others = await kept.readEach(
    tx,
    at,
    [...visible].filter((id) => !changed.has(id)),
  );
  return {
    sites: inNews.map((s) => s.site),
    causes: [...inNews, ...others].map((s) => toldOf(s.site.id, s.causes)),
  };
}

function overviewFor(
  listener: Listening,
  parts: ReadonlyMap<number, SiteParts>,
  fleet: FleetParts | null,
): Change {
  const { subject } = listener;
  const change: Change = {};
  if (subject.kind === 'fleet') {
    const sites = fleet?.sites.filter((s) => subject.refs.has(s.id)) ?? [];
    if (sites.length > 0) change.sites = sites;
    if (fleet) takeCausesAt(listener, subject.refs, fleet.causes, change);
    return change;
  }
  if (!isOfSite(subject)) return change;
  const of = parts.get(subject.siteId);
  if (!of || subject.kind === 'roll-call') return change;
  if (of.inverters) change.inverters = of.inverters;
  if (subject.kind === 'string') return change;
  if (of.site) change.site = of.site;
  if (of.gateways) change.gateways = of.gateways;
  if (of.causes) takeCauses(listener, of.causes, change);
  return change;
}

/** Of a fleet the causes of those sites are sent where they differ from what was sent. */
function takeCausesAt(
  listener: Listening,
  refs: ReadonlySet<string>,
  causes: readonly Told[],
  change: Change,
): void {
  const known = listener.causesAt;
  const gone = new Set(known.keys());
  const news: Change['causesAt'] = [];
  for (const at of causes) {
    gone.delete(at.site);
    if (!refs.has(at.site) || (known.get(at.site) ?? NONE) === at.text) continue;
    if (at.text === NONE) known.delete(at.site);
    else known.set(at.site, at.text);
    news.push({ site: at.site, causes: at.causes });
  }
  for (const site of gone) {
    known.delete(site);
    news.push({ site, causes: [] });
  }
  if (news.length > 0) change.causesAt = news;
}
const NONE = '[]';

/** Of one site they are sent as a whole list, and only when they differ from what was sent. */
function takeCauses(listener: Listening, causes: CauseSent[], change: Change): void {
  const text = JSON.stringify(causes);
  if (text === listener.causes) return;
  listener.causes = text;
  change.causes = causes;
}

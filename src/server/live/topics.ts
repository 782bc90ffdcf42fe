import { mayUse, type Actor, type Permission } from '../../domain/access/permissions';
import { sent, sentCause } from '../../schemas/api/causes-on-the-way';
import type { Change } from '../../schemas/live';
import { asActor, asIngest, type Tx } from '../db/transaction';
import { horizon } from '../queries/horizon';
import {
  eventsBetween,
  newestEvents,
  rollCallOpen,
  visibleStringNumbers,
  type LiveEvent,
} from '../queries/live';
import { noticesNow } from '../queries/notices';
import { gatewaysNow, invertersNow, stringsNow } from '../queries/now';
import { answersOf } from '../queries/roll-call';
import { sitesNow } from '../queries/sites-now';
import { visibleSite, visibleSites } from '../queries/visible-site';
import { causesNow } from '../services/causes';
import { keptSites } from '../services/kept-sites';
import { topicRefusals } from '../../words/refusals';

/** What a topic is about, in the database's numbers, once the actor was found to be allowed to hear it. */
export type Subject =
  | { kind: 'notices'; personId: number }
  | { kind: 'fleet'; siteIds: ReadonlySet<number>; refs: ReadonlySet<string> }
  | { kind: 'site'; siteId: number }
  | { kind: 'string'; siteId: number; stringId: number; ref: string }
  | { kind: 'roll-call'; siteId: number };

/** Whether a subject is one site, or a part of one. */
export const isOfSite = (subject: Subject): subject is Exclude<Subject, { kind: 'fleet' | 'notices' }> =>
  subject.kind !== 'fleet' && subject.kind !== 'notices';

const PERMISSION: Record<Subject['kind'], Permission> = {
  notices: 'notice.read',
  fleet: 'fleet.read',
  site: 'site.read',
  string: 'string.read',
  'roll-call': 'roll_call.read',
};
export const EVENTS_SHOWN = 50;
/** Who was away for long gets the newest of what was missed, and that some were left out. */
const EVENTS_MISSED = 500;

export const NOT_FOR_YOU = topicRefusals.forStaff;
export const NOT_THERE = topicRefusals.notOpen;

/** The subject of a topic, or why the actor does not get it. */
export async function subjectOf(topic: string, actor: Actor): Promise<Subject | { refused: string }> {
  const [kind, ref = ''] = topic.split(':') as [Subject['kind'], string | undefined];
  if (!mayUse(actor.role, PERMISSION[kind])) return { refused: NOT_FOR_YOU };
  if (kind === 'notices') return { kind, personId: actor.personId };
  return asActor(actor, async (tx) => {
    if (kind === 'fleet') {
      const sites = await visibleSites(tx);
      return { kind, siteIds: new Set(sites.map((s) => s.id)), refs: new Set(sites.map((s) => s.ref)) };
    }
    if (kind === 'string') {
      const found = await visibleStringNumbers(tx, ref);
      return found ? { kind, ref, ...found } : { refused: NOT_THERE };
    }
    const site = await visibleSite(tx, ref);
    return site ? { kind, siteId: site.id } : { refused: NOT_THERE };
  });
}

export const eventItemsOf = (events: readonly LiveEvent[]): Change['events'] =>
  events.map(({ id, at, recordedAt, siteId, siteName, stringId, stringName, kind, detail }) => ({
    id,
    at,
    recordedAt,
    siteId,
    siteName,
    stringId,
    stringName,
    kind,
    detail,
  }));

/** Serials that these events say were heard for the first time. */
export const serialsHeard = (events: readonly LiveEvent[]): string[] =>
  events.flatMap((e) =>
    e.kind === 'units_heard' && Array.isArray(e.detail.serials)
      ? e.detail.serials.filter((s): s is string => typeof s === 'string')
      : [],
  );

async function stateOf(tx: Tx, subject: Subject, at: Date): Promise<Change> {
  if (subject.kind === 'notices') return { notices: await noticesNow(tx, subject.personId) };
  if (subject.kind === 'fleet') return sent(await keptSites().read(tx, at, [...subject.siteIds]));
  const { siteId } = subject;
  if (subject.kind === 'string')
    return {
      strings: await stringsNow(tx, at, { siteId, stringIds: [subject.stringId] }),
      inverters: await invertersNow(tx, at, siteId),
    };
  const strings = await stringsNow(tx, at, { siteId });
  if (subject.kind === 'roll-call') return { strings };
  const [site] = await sitesNow(tx, at, [siteId]);
  return {
    ...(site && { site }),
    strings,
    inverters: await invertersNow(tx, at, siteId),
    gateways: await gatewaysNow(tx, at, siteId),
    causes: (await causesNow(tx, at, [siteId])).map(sentCause),
  };
}

/**
 * Everything that a subscriber needs to begin with, and the cursor to go on from. With the cursor of an earlier
 * connection: what holds now, and the events since then. The cursor is taken before anything is read: what happens
 * in between comes twice rather than never.
 */
export async function snapshotOf(
  subject: Subject,
  earlier: string | undefined,
): Promise<{ kind: 'snapshot' | 'delta'; cursor: string; change: Change }> {
  return asIngest(async (tx) => {
    const { below: cursor } = await horizon(tx);
    const change = await stateOf(tx, subject, new Date());
    // what is unread now is all there is to know of what was missed
    if (subject.kind === 'notices') return { kind: 'snapshot', cursor, change };
    const stringId = subject.kind === 'string' ? subject.stringId : undefined;
    const siteIds = subject.kind === 'fleet' ? [...subject.siteIds] : [subject.siteId];
    const missed =
      earlier === undefined
        ? null
        : await eventsBetween(tx, earlier, cursor, { siteIds, stringId }, EVENTS_MISSED);
    const some = missed !== null && missed.leftOut !== null;
    if (some && isOfSite(subject)) change.leftOut = true;
    if (subject.kind === 'roll-call') {
      const serials = missed && !some ? serialsHeard(missed.events) : undefined;
      change.heard = await answersOf(tx, subject.siteId, serials);
      if (!(await rollCallOpen(tx, subject.siteId))) change.rollCallStopped = true;
    } else if (subject.kind !== 'fleet')
      change.events = eventItemsOf(
        missed?.events ??
          (await newestEvents(tx, cursor, { siteId: subject.siteId, stringId }, EVENTS_SHOWN)),
      );
    return { kind: missed ? 'delta' : 'snapshot', cursor, change };
  });
}

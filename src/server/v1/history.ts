import { z } from 'zod';
import { EVENT_KINDS } from '../../domain/verdicts/codes';
import { instant, listOf, ofSite, ofString, paging, uuid } from '../../schemas/api/v1/common';
import { event, rollCall, shutdownTest } from '../../schemas/api/v1/resources';
import { found } from '../errors';
import {
  eventsAsRecorded,
  eventsNewestFirst,
  rollCallsFrom,
  shutdownTestsFrom,
  type EventRow,
  type ShutdownTestRow,
} from '../queries/v1-history';
import { cursorOf, keyOfCursor, pageOf, type Key } from './cursor';
import { reading } from './operation';

/** What happened: events, roll calls, shutdown tests. */

const pair = (key: Key | null): [string, string] | null => key && [String(key[0]), String(key[1])];

/** Numbers of the database that stand in details for readers of our own. */
const OURS = new Set(['personId', 'assigneeId', 'mentions']);
const eventItem = (row: EventRow): z.infer<typeof event> => ({
  id: row.id,
  at: row.at.toISOString(),
  recordedAt: row.recordedAt.toISOString(),
  kind: row.kind,
  site: { id: row.siteId, name: row.siteName },
  string: row.stringId === null ? null : { id: row.stringId, name: row.stringName ?? '' },
  detail: Object.fromEntries(Object.entries(row.detail).filter(([name]) => !OURS.has(name))),
});

export const listEvents = reading({
  id: 'listEvents',
  path: '/events',
  group: 'Events',
  summary: 'What happened at the sites',
  description:
    'With `order=newest`, by when it happened. With `order=recorded`, in the order in which it was recorded, for a program that follows: `next` always leads on, also when nothing new is there yet; keep it and ask again later. Nothing comes twice and nothing is missed. Late reports can record what happened long ago.',
  scope: 'events:read',
  permission: 'site.read',
  query: z.strictObject({
    ...paging,
    order: z.enum(['newest', 'recorded'], 'Give newest or recorded').default('newest'),
    site: ofSite,
    string: ofString,
    kind: z.enum(EVENT_KINDS, 'This is no kind of event').optional(),
    from: instant.optional(),
    to: instant.optional().meta({ description: 'Up to, and not including' }),
  }),
  answer: listOf(event),
  example: { query: { site: '$site', limit: '3' } },
  run: async ({ tx, query }) => {
    const after = pair(keyOfCursor(query.cursor, 2));
    if (query.order === 'newest')
      return pageOf(
        await eventsNewestFirst(tx, query, after, query.limit + 1),
        query.limit,
        (r) => [r.key, r.id],
        eventItem,
      );
    const rows = await eventsAsRecorded(tx, query, after, query.limit);
    const last = rows.at(-1);
    const key = last ? [last.xid, last.id] : (after ?? ['0', '0']);
    return { data: rows.map(eventItem), next: cursorOf(key) };
  },
});

export const listRollCalls = reading({
  id: 'listRollCalls',
  path: '/roll-calls',
  group: 'Commissioning',
  summary: 'Roll calls: who started them, who was on site',
  description: 'The newest first.',
  scope: 'commissioning:read',
  permission: 'roll_call.read',
  query: z.strictObject({
    ...paging,
    site: ofSite,
    open: z.enum(['true', 'false'], 'Give true or false').optional(),
  }),
  answer: listOf(rollCall),
  example: { query: { limit: '3' } },
  run: async ({ tx, query }) =>
    pageOf(
      await rollCallsFrom(
        tx,
        { site: query.site, open: query.open === undefined ? undefined : query.open === 'true' },
        pair(keyOfCursor(query.cursor, 2)),
        query.limit + 1,
      ),
      query.limit,
      (r) => [r.key, r.id],
      (r) => ({
        id: r.id,
        site: { id: r.siteId, name: r.siteName },
        startedAt: r.startedAt.toISOString(),
        startedBy: r.startedBy,
        personOnSite: r.personOnSite,
        stoppedAt: r.stoppedAt?.toISOString() ?? null,
        stoppedBy: r.stoppedBy,
        heard: r.heard,
      }),
    ),
});

const testItem = (r: ShutdownTestRow): z.infer<typeof shutdownTest> => ({
  id: r.id,
  site: { id: r.siteId, name: r.siteName },
  zone: r.zone,
  at: r.at.toISOString(),
  madeBy: r.madeBy,
  result: r.result,
  signed: r.signed,
  inForce: r.inForce,
  strings: r.strings,
});

export const listShutdownTests = reading({
  id: 'listShutdownTests',
  path: '/shutdown-tests',
  group: 'Commissioning',
  summary: 'Shutdown tests with the result of each string',
  description:
    'The newest first. A test says how the site did then, with what was measured; it says nothing about now.',
  scope: 'commissioning:read',
  permission: 'shutdown_test.read',
  query: z.strictObject({
    ...paging,
    site: ofSite,
    result: z
      .enum(['passed', 'failed', 'consistent', 'not_witnessed'], 'This is no result of a test')
      .optional(),
  }),
  answer: listOf(shutdownTest),
  example: { query: { limit: '3' } },
  run: async ({ tx, query }) =>
    pageOf(
      await shutdownTestsFrom(tx, query, pair(keyOfCursor(query.cursor, 2)), query.limit + 1),
      query.limit,
      (r) => [r.key, r.id],
      testItem,
    ),
});

export const readShutdownTest = reading({
  id: 'readShutdownTest',
  path: '/shutdown-tests/{test}',
  group: 'Commissioning',
  summary: 'One shutdown test',
  description: 'As in the list.',
  scope: 'commissioning:read',
  permission: 'shutdown_test.read',
  params: z.strictObject({ test: uuid }),
  answer: shutdownTest,
  example: { path: { test: '$test' } },
  run: async ({ tx, params }) => {
    const [row] = await shutdownTestsFrom(tx, { test: params.test }, null, 1);
    return testItem(found(row, 'shutdown test'));
  },
});

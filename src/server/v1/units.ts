import { z } from 'zod';
import { UNIT_STATES, VERDICTS } from '../../domain/verdicts/codes';
import type { SlotNow, StringNow } from '../../schemas/api/now';
import { causeNow } from '../../schemas/api/now';
import { listOf, ofSite, ofString, paging } from '../../schemas/api/v1/common';
import { unit, verdictNow } from '../../schemas/api/v1/resources';
import type { Tx } from '../db/transaction';
import { stringsNow } from '../queries/now';
import { placedSince, sitesFrom, stringsFrom, type StringFilter, type StringRow } from '../queries/v1-plant';
import { causesNow } from '../services/causes';
import { keyOfCursor, pageOf } from './cursor';
import { reading } from './operation';

/** Units as they are now, and what is wrong with them. Read string by string: a page reads no more than it needs. */

type Unit = z.infer<typeof unit>;
type VerdictItem = z.infer<typeof verdictNow>;
/** Strings read at once: few at first, since a page is often small; more where little fits a filter. */
const STRINGS_FIRST = 5;
const STRINGS_AT_ONCE = 25;

interface Loaded {
  row: StringRow;
  now: StringNow;
  since: ReadonlyMap<string, Date>;
}

/** Strings that fit, with what holds, from one on, a few at a time. */
async function* strings(tx: Tx, filter: StringFilter, from: [string, string] | null, at: Date) {
  let start = from && { site: from[0], name: from[1], inclusive: true };
  for (let many = STRINGS_FIRST; ; many = STRINGS_AT_ONCE) {
    const rows = await stringsFrom(tx, filter, start, many);
    const ids = rows.map((r) => r.number);
    const now = new Map((await stringsNow(tx, at, { stringIds: ids })).map((s) => [s.id, s]));
    const since = await placedSince(tx, ids);
    for (const row of rows) {
      const s = now.get(row.id);
      if (s) yield { row, now: s, since } satisfies Loaded;
    }
    const last = rows.at(-1);
    if (!last || rows.length < many) return;
    start = { site: last.siteName, name: last.name, inclusive: false };
  }
}

interface Keyed<T> {
  key: [site: string, string: string, position: number];
  item: T;
}
/** One page of what strings hold, in order of site, string and position, after the cursor. */
async function pageOfStrings<T>(
  tx: Tx,
  asked: { filter: StringFilter; cursor: string | undefined; limit: number; at: Date },
  itemsOf: (loaded: Loaded) => Keyed<T>[],
): Promise<{ data: T[]; next: string | null }> {
  const after = keyOfCursor(asked.cursor, 3);
  const [site, string, position] = after
    ? [String(after[0]), String(after[1]), Number(after[2])]
    : ['', '', -1];
  const rows: Keyed<T>[] = [];
  for await (const loaded of strings(tx, asked.filter, after ? [site, string] : null, asked.at)) {
    const same = loaded.row.siteName === site && loaded.row.name === string;
    rows.push(...itemsOf(loaded).filter((k) => !same || k.key[2] > position));
    if (rows.length > asked.limit) break;
  }
  return pageOf(
    rows.slice(0, asked.limit + 1),
    asked.limit,
    (r) => r.key,
    (r) => r.item,
  );
}

const named = ({ row }: Loaded) => ({
  site: { id: row.siteId, name: row.siteName },
  string: { id: row.id, name: row.name },
});

const unitOf = (loaded: Loaded, slot: SlotNow): Unit => ({
  ...named(loaded),
  position: slot.position,
  serial: slot.serial,
  placedFrom: loaded.since.get(`${loaded.row.id} ${slot.position}`)?.toISOString() ?? null,
  roofPlace: slot.roofPlace,
  state: slot.state,
  verdict: slot.verdict,
  since: slot.since,
  seen: slot.seen,
  voltage: slot.voltage,
  voltageIn: slot.voltageIn,
  current: slot.current,
  power: slot.power,
  temperature: slot.temperature,
  signal: slot.signal,
  gateway: slot.gateway,
  assumed: slot.assumed,
});

const CLAIM_NOTE =
  'A state is what the unit says of itself. It is no proof that a conductor is dead: isolate, lock out, and prove it with a rated meter.';

export const listUnits = reading({
  id: 'listUnits',
  path: '/units',
  group: 'Units',
  summary: 'Units: where each is and how it is now',
  description: `Every slot, empty ones with a serial of null; by site, string and position. ${CLAIM_NOTE}`,
  scope: 'units:read',
  permission: 'string.read',
  query: z.strictObject({
    ...paging,
    site: ofSite,
    string: ofString,
    serial: z.string().max(40).optional(),
    state: z.enum(UNIT_STATES, `Give one of ${UNIT_STATES.join(', ')}`).optional(),
    verdict: z.enum(VERDICTS, `Give one of ${VERDICTS.join(', ')}`).optional(),
  }),
  answer: listOf(unit),
  example: { query: { string: '$string', limit: '3' } },
  run: ({ tx, query, at }) =>
    pageOfStrings(tx, { filter: query, cursor: query.cursor, limit: query.limit, at }, (loaded) =>
      loaded.now.slots
        .filter(
          (s) =>
            (query.serial === undefined || s.serial === query.serial.toUpperCase()) &&
            (query.state === undefined || s.state === query.state) &&
            (query.verdict === undefined || s.verdict === query.verdict),
        )
        .map((slot) => ({
          key: [loaded.row.siteName, loaded.row.name, slot.position],
          item: unitOf(loaded, slot),
        })),
    ),
});

function verdictsOf(loaded: Loaded): Keyed<VerdictItem>[] {
  const { finding, slots } = loaded.now;
  const key = (position: number): Keyed<VerdictItem>['key'] => [
    loaded.row.siteName,
    loaded.row.name,
    position,
  ];
  const whole: Keyed<VerdictItem>[] = finding
    ? [
        {
          key: key(0),
          item: {
            ...named(loaded),
            position: null,
            serial: null,
            state: null,
            verdict: null,
            finding: finding.kind,
            words: finding.words,
            since: finding.since,
          },
        },
      ]
    : [];
  const units = slots
    .filter((s) => s.verdict !== null && s.verdict !== 'ok')
    .map((s) => ({
      key: key(s.position),
      item: {
        ...named(loaded),
        position: s.position,
        serial: s.serial,
        state: s.state,
        verdict: s.verdict,
        finding: null,
        words: null,
        since: s.since,
      },
    }));
  return [...whole, ...units];
}

export const listVerdicts = reading({
  id: 'listVerdicts',
  path: '/verdicts',
  group: 'What is wrong',
  summary: 'Verdicts that are not ok, now',
  description: `Units and strings with something to say, by site, string and position. An empty list says that nothing was found, not that a site is safe. ${CLAIM_NOTE}`,
  scope: 'units:read',
  permission: 'string.read',
  query: z.strictObject({ ...paging, site: ofSite, string: ofString }),
  answer: listOf(verdictNow),
  example: { query: { limit: '5' } },
  run: ({ tx, query, at }) =>
    pageOfStrings(
      tx,
      { filter: { ...query, abnormal: true }, cursor: query.cursor, limit: query.limit, at },
      verdictsOf,
    ),
});

export const listCauses = reading({
  id: 'listCauses',
  path: '/causes',
  group: 'What is wrong',
  summary: 'What explains the units that are not ok, now',
  description:
    'The smallest set of shared parts that explains them, with evidence, confidence and what else it could be. `key` holds while a cause lasts.',
  scope: 'units:read',
  permission: 'cause.read',
  query: z.strictObject({ ...paging, site: ofSite }),
  answer: listOf(causeNow.meta({ id: 'Cause' })),
  example: { query: { limit: '5' } },
  run: async ({ tx, query, at }) => {
    const after = keyOfCursor(query.cursor, 2);
    const sites = query.site ? await sitesFrom(tx, { site: query.site }, null, 1) : undefined;
    const causes = await causesNow(
      tx,
      at,
      sites?.map((s) => s.number),
    );
    const sorted = causes
      .map((c) => ({ cause: c, key: [c.siteId, c.key] as const }))
      .sort((a, b) => (a.key.join(' ') < b.key.join(' ') ? -1 : 1))
      .filter((c) => after === null || c.key.join(' ') > after.join(' '));
    return pageOf(
      sorted,
      query.limit,
      (c) => c.key,
      (c) => c.cause,
    );
  },
});

import { z } from 'zod';
import { UNIT_KINDS } from '../../domain/equipment/unit-type';
import { listOf, ofSite, ofString, paging, uuid } from '../../schemas/api/v1/common';
import { logger, me, placement, site, string } from '../../schemas/api/v1/resources';
import type { Tx } from '../db/transaction';
import { found } from '../errors';
import { siteRefsOf } from '../queries/api-tokens';
import { sitesNow } from '../queries/sites-now';
import {
  loggersFrom,
  placementsFrom,
  sitesFrom,
  stringsFrom,
  type SiteRow,
  type StringRow,
} from '../queries/v1-plant';
import { keyOfCursor, pageOf } from './cursor';
import { reading } from './operation';

/** The plant as it stands: who one is, sites, strings, placements, loggers. */

export const readMe = reading({
  id: 'readMe',
  path: '/me',
  group: 'This token',
  summary: 'Whose token this is and what it may do',
  description:
    'The first thing to ask: it shows that a token works, and which organisation and sites it sees.',
  scope: null,
  permission: 'api_token.use',
  answer: me,
  example: {},
  run: async ({ tx, holder }) => ({
    person: { id: holder.personRef, name: holder.personName, role: holder.role },
    organisation: {
      id: holder.organisationRef,
      name: holder.organisationName,
      timeZone: holder.timeZone,
    },
    token: {
      name: holder.name,
      scopes: holder.scopes,
      sites: holder.sites && (await siteRefsOf(tx, holder.sites)),
      expiresAt: holder.expiresAt.toISOString(),
    },
  }),
});

async function sitesOf(tx: Tx, rows: readonly SiteRow[], at: Date): Promise<z.infer<typeof site>[]> {
  const now = await sitesNow(
    tx,
    at,
    rows.map((r) => r.number),
  );
  const byId = new Map(now.map((s) => [s.id, s]));
  return rows.map((row) => {
    const s = found(byId.get(row.id), 'site');
    return {
      id: row.id,
      name: row.name,
      place: row.place,
      latitude: row.latitude,
      longitude: row.longitude,
      timeZone: row.timeZone,
      stage: row.stage,
      ruleSet: row.ruleSet,
      switchedOnOn: row.switchedOnOn,
      strings: s.strings,
      counts: s.counts,
      power: s.power,
      acPowerMax: s.acPowerMax,
      reportedAt: s.reportedAt,
      inShutdownSince: s.inShutdownSince,
      commands: s.commands,
      performanceRatio30d: s.performanceRatio30d,
    };
  });
}

export const listSites = reading({
  id: 'listSites',
  path: '/sites',
  group: 'Sites and strings',
  summary: 'Sites, with what they make now',
  description: 'By name.',
  scope: 'sites:read',
  permission: 'site.read',
  query: z.strictObject({
    ...paging,
    stage: z.enum(['commissioning', 'operating'], 'Give commissioning or operating').optional(),
    search: z.string().max(80).optional().meta({ description: 'Part of the name or the place' }),
  }),
  answer: listOf(site),
  example: { query: { stage: 'operating', limit: '2' } },
  run: async ({ tx, query, at }) => {
    const after = keyOfCursor(query.cursor, 1);
    const rows = await sitesFrom(tx, query, after && String(after[0]), query.limit + 1);
    const { data, next } = pageOf(
      rows,
      query.limit,
      (r) => [r.name],
      (r) => r,
    );
    return { data: await sitesOf(tx, data, at), next };
  },
});

export const readSite = reading({
  id: 'readSite',
  path: '/sites/{site}',
  group: 'Sites and strings',
  summary: 'One site',
  description: 'As in the list.',
  scope: 'sites:read',
  permission: 'site.read',
  params: z.strictObject({ site: uuid }),
  answer: site,
  example: { path: { site: '$site' } },
  run: async ({ tx, params, at }) => {
    const rows = await sitesFrom(tx, { site: params.site }, null, 1);
    return found((await sitesOf(tx, rows, at))[0], 'site');
  },
});

const stringItem = (row: StringRow): z.infer<typeof string> => ({
  id: row.id,
  name: row.name,
  site: { id: row.siteId, name: row.siteName },
  kind: row.kind,
  slots: row.slots,
  unitType: row.unitType,
  plane: { name: row.plane, surfaceTilt: row.surfaceTilt, surfaceAzimuth: row.surfaceAzimuth },
  inverter: row.inverter,
  input: row.input,
  zone: row.zone,
  logger: row.logger,
  reportedAt: row.reportedAt?.toISOString() ?? null,
  voltage: row.voltage,
  power: row.power,
});

export const listStrings = reading({
  id: 'listStrings',
  path: '/strings',
  group: 'Sites and strings',
  summary: 'Strings, with what each hangs on',
  description: 'By the name of their site, then their own.',
  scope: 'sites:read',
  permission: 'string.read',
  query: z.strictObject({
    ...paging,
    site: ofSite,
    kind: z.enum(UNIT_KINDS, `Give one of ${UNIT_KINDS.join(', ')}`).optional(),
  }),
  answer: listOf(string),
  example: { query: { site: '$site', limit: '2' } },
  run: async ({ tx, query }) => {
    const after = keyOfCursor(query.cursor, 2);
    const from = after && { site: String(after[0]), name: String(after[1]), inclusive: false };
    return pageOf(
      await stringsFrom(tx, query, from, query.limit + 1),
      query.limit,
      (r) => [r.siteName, r.name],
      stringItem,
    );
  },
});

export const readString = reading({
  id: 'readString',
  path: '/strings/{string}',
  group: 'Sites and strings',
  summary: 'One string',
  description: 'As in the list.',
  scope: 'sites:read',
  permission: 'string.read',
  params: z.strictObject({ string: uuid }),
  answer: string,
  example: { path: { string: '$string' } },
  run: async ({ tx, params }) => {
    const [row] = await stringsFrom(tx, { string: params.string }, null, 1);
    return stringItem(found(row, 'string'));
  },
});

export const listPlacements = reading({
  id: 'listPlacements',
  path: '/placements',
  group: 'Units',
  summary: 'Which serial was in which slot, from when to when',
  description: 'The as-built with its history, the newest stay first.',
  scope: 'units:read',
  permission: 'as_built.read',
  query: z.strictObject({
    ...paging,
    site: ofSite,
    string: ofString,
    serial: z.string().max(40).optional(),
    when: z.enum(['now', 'ever'], 'Give now or ever').default('ever'),
  }),
  answer: listOf(placement),
  example: { query: { string: '$string', when: 'now', limit: '3' } },
  run: async ({ tx, query }) => {
    const after = keyOfCursor(query.cursor, 2);
    return pageOf(
      await placementsFrom(
        tx,
        { ...query, now: query.when === 'now' },
        after && [String(after[0]), String(after[1])],
        query.limit + 1,
      ),
      query.limit,
      (r) => [r.key, r.serial],
      (r) => ({
        serial: r.serial,
        unitType: r.unitType,
        site: { id: r.siteId, name: r.siteName },
        string: { id: r.stringId, name: r.stringName },
        position: r.position,
        placedFrom: r.placedFrom.toISOString(),
        placedTo: r.placedTo?.toISOString() ?? null,
      }),
    );
  },
});

export const listLoggers = reading({
  id: 'listLoggers',
  path: '/loggers',
  group: 'Loggers',
  summary: 'Loggers and when each last spoke',
  description: 'By serial.',
  scope: 'loggers:read',
  permission: 'logger.read',
  query: z.strictObject({ ...paging, site: ofSite }),
  answer: listOf(logger),
  example: { query: { site: '$site' } },
  run: async ({ tx, query }) => {
    const after = keyOfCursor(query.cursor, 1);
    return pageOf(
      await loggersFrom(tx, query.site, after && String(after[0]), query.limit + 1),
      query.limit,
      (r) => [r.serial],
      (r) => ({
        id: r.id,
        site: { id: r.siteId, name: r.siteName },
        serial: r.serial,
        firmware: r.firmware,
        connected: r.connected,
        lastSpokeAt: r.lastSpokeAt?.toISOString() ?? null,
        refused: r.refused,
      }),
    );
  },
});

import { z } from 'zod';
import { CASE_STATES } from '../../domain/cases/cases';
import { newAnnotation } from '../../schemas/api/annotations';
import { caseFile, caseWithHistory, pinnedNote } from '../../schemas/api/v1/cases';
import { instant, listOf, ofSite, ofString, paging, uuid } from '../../schemas/api/v1/common';
import { found } from '../errors';
import { caseWithFigures, entriesOf } from '../queries/cases';
import { casesFrom, type CaseRow } from '../queries/v1-cases';
import { pinAnnotation, readAnnotations } from '../services/annotations';
import { keyOfCursor, pageOf } from './cursor';
import { reading, writing } from './operation';

/** Cases and notes: what people know of what was found. */

const caseItem = (r: CaseRow): z.infer<typeof caseFile> => ({
  id: r.id,
  number: r.number,
  title: r.title,
  kind: r.kind,
  origin: r.origin,
  state: r.state,
  site: { id: r.siteId, name: r.siteName },
  strings: r.strings,
  assignee: r.assignee,
  dueOn: r.dueOn,
  openedAt: r.openedAt.toISOString(),
  changedAt: r.changedAt.toISOString(),
  closedAt: r.closedAt?.toISOString() ?? null,
  outcome: r.outcome,
});

export const listCases = reading({
  id: 'listCases',
  path: '/cases',
  group: 'Cases and notes',
  summary: 'Cases, open and closed',
  description: 'The newest first, by the number they have in the organisation.',
  scope: 'cases:read',
  permission: 'case.read',
  query: z.strictObject({
    ...paging,
    site: ofSite,
    string: ofString,
    state: z.enum(CASE_STATES, `Give ${CASE_STATES.join(', ')}`).optional(),
    open: z.enum(['true', 'false'], 'Give true or false').optional(),
  }),
  answer: listOf(caseFile),
  example: { query: { open: 'true', limit: '5' } },
  run: async ({ tx, query }) => {
    const after = keyOfCursor(query.cursor, 1);
    const { open, ...filter } = query;
    return pageOf(
      await casesFrom(
        tx,
        { ...filter, open: open === undefined ? undefined : open === 'true' },
        after && Number(after[0]),
        query.limit + 1,
      ),
      query.limit,
      (r) => [r.number],
      caseItem,
    );
  },
});

export const readCase = reading({
  id: 'readCase',
  path: '/cases/{case}',
  group: 'Cases and notes',
  summary: 'One case with its history',
  description: 'What was written and done, oldest first. Photos stay in the product.',
  scope: 'cases:read',
  permission: 'case.read',
  params: z.strictObject({ case: uuid }),
  answer: caseWithHistory,
  example: { path: { case: '$case' } },
  run: async ({ tx, params, at }) => {
    const kept = found(await caseWithFigures(tx, params.case, at), 'case');
    const { item } = kept;
    return {
      id: item.id,
      number: item.number,
      title: item.title,
      kind: item.kind,
      origin: item.origin,
      state: item.state,
      site: { id: item.siteId, name: item.siteName },
      strings: item.strings,
      assignee: item.assignee,
      dueOn: item.dueOn,
      openedAt: item.openedAt,
      changedAt: item.changedAt,
      closedAt: item.closedAt,
      outcome: item.outcome,
      what: kept.what,
      cause: kept.cause && { headline: kept.cause.headline, open: kept.cause.open },
      parts: kept.parts.map((p) => ({
        string: { id: p.stringId, name: p.stringName },
        position: p.position,
        serial: p.serial,
      })),
      entries: (await entriesOf(tx, kept.rowId)).map((e) => ({
        at: e.at,
        person: e.person,
        kind: e.kind,
        text: e.body,
        detail: e.detail,
      })),
    };
  },
});

export const listNotes = reading({
  id: 'listNotes',
  path: '/sites/{site}/notes',
  group: 'Cases and notes',
  summary: 'Notes on the time axis of a site',
  description: 'The newest time first, at most 500: those of a string with those of its whole site.',
  scope: 'events:read',
  permission: 'annotation.read',
  params: z.strictObject({ site: uuid }),
  query: z.strictObject({ string: ofString, from: instant.optional(), to: instant.optional() }),
  answer: z.object({ data: z.array(pinnedNote) }),
  example: { path: { site: '$site' }, query: { from: '$from' } },
  run: async ({ tx, params, query }) => ({
    data: await readAnnotations(tx, params.site, {
      string: query.string,
      from: query.from === undefined ? undefined : Date.parse(query.from) / 1000,
      to: query.to === undefined ? undefined : Date.parse(query.to) / 1000,
    }),
  }),
});

export const pinNote = writing({
  id: 'pinNote',
  path: '/sites/{site}/notes',
  group: 'Writing',
  summary: 'Pin a note on the time axis',
  description: '`ref` is yours: sent twice is written once.',
  scope: 'write',
  permission: 'annotation.write',
  params: z.strictObject({ site: uuid }),
  body: newAnnotation,
  answer: pinnedNote,
  statuses: { 201: 'Pinned' },
  example: {
    path: { site: '$site' },
    body: { ref: '$ref', string: '$string', from: '$from', to: '$to', text: 'The crane stood in the sun.' },
  },
  run: async ({ tx, actor, params, body, at, address }) => ({
    status: 201,
    body: await pinAnnotation(tx, actor, params.site, body, { at, address: address ?? '' }),
  }),
});

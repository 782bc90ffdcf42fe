import { z } from 'zod';
import { CASE_KINDS, CASE_ORIGINS, CASE_STATES, CHECK_OUTCOMES } from '../../../domain/cases/cases';
import { time, uuid } from './common';

/** Cases and notes on the time axis, as programs read them. */

const named = z.object({ id: uuid, name: z.string() });

export const caseFile = z
  .object({
    id: uuid,
    number: z.int().meta({ description: 'Counts within the organisation' }),
    title: z.string(),
    kind: z.enum(CASE_KINDS).meta({ description: 'What is wrong' }),
    origin: z.enum(CASE_ORIGINS),
    state: z.enum(CASE_STATES),
    site: named,
    strings: z.array(named),
    assignee: named.nullable(),
    dueOn: z.iso.date().nullable().meta({ description: 'A day of the site’s calendar' }),
    openedAt: time,
    changedAt: time,
    closedAt: time.nullable(),
    outcome: z.enum(CHECK_OUTCOMES).nullable().meta({
      description: 'What was found on looking again after closing; null: not looked again yet',
    }),
  })
  .meta({ id: 'Case' });

export const caseWithHistory = caseFile
  .extend({
    what: z.string(),
    cause: z.object({ headline: z.string(), open: z.boolean() }).nullable(),
    parts: z.array(
      z.object({
        string: named,
        position: z.int().nullable().meta({ description: 'null: somewhere in the string' }),
        serial: z.string().nullable(),
      }),
    ),
    entries: z.array(
      z.object({
        at: time,
        person: z.string().nullable().meta({ description: 'null: Wakeline itself' }),
        kind: z.string().meta({ description: 'opened, comment, change, checklist, photo, state, checked …' }),
        text: z.string(),
        detail: z.record(z.string(), z.unknown()),
      }),
    ),
  })
  .meta({ id: 'CaseWithHistory' });

export const pinnedNote = z
  .object({
    id: uuid,
    string: named.nullable().meta({ description: 'null: of the whole site' }),
    from: time,
    to: time.nullable().meta({ description: 'null: it is about one moment' }),
    text: z.string(),
    by: z.string(),
    at: time.meta({ description: 'When it was written' }),
  })
  .meta({ id: 'Note' });

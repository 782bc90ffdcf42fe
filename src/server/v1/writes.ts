import { z } from 'zod';
import { newCase } from '../../schemas/api/cases';
import { acknowledgeBody, acknowledgement } from '../../schemas/api/fleet';
import { readingInput, readingRecord } from '../../schemas/api/readings';
import { uuid } from '../../schemas/api/v1/common';
import { acknowledge } from '../services/acknowledge';
import { openCase } from '../services/open-case';
import { recordReading } from '../services/record-reading';
import { writing } from './operation';

/** What a program may write: through the same services as people, in their name, with the same traces. */

const atSite = z.strictObject({ site: uuid });

export const acknowledgeHazard = writing({
  id: 'acknowledgeHazard',
  path: '/sites/{site}/acknowledgements',
  group: 'Writing',
  summary: 'Put the token’s person to a cause that holds now',
  description:
    'Says who has it; it changes nothing at the site. `key` is that of a cause. Who has it already keeps it. 409: the cause has ended or changed.',
  scope: 'write',
  permission: 'hazard.acknowledge',
  params: atSite,
  body: acknowledgeBody,
  answer: acknowledgement.meta({ id: 'Acknowledgement' }),
  statuses: { 200: 'Who has it' },
  example: { path: { site: '$causeSite' }, body: { key: '$cause' } },
  run: async ({ tx, actor, holder, params, body, at, address }) => {
    const call = { site: params.site, key: body.key, person: holder.personName, address };
    const { acknowledgement: made } = await acknowledge(tx, actor, call, at);
    return { status: 200, body: made };
  },
});

export const recordMeterReading = writing({
  id: 'recordMeterReading',
  path: '/sites/{site}/readings',
  group: 'Writing',
  summary: 'Record a meter reading of a string',
  description:
    'As taken by a person with a rated meter. The answer has what it means: a finding, never a release. `ref` is yours: sent twice is stored once. 409 with `current`: another reading stands that you have not named in `supersedes`.',
  scope: 'write',
  permission: 'checks.write',
  params: atSite,
  body: readingInput,
  answer: readingRecord.meta({ id: 'MeterReading' }),
  statuses: { 200: 'Stored before, as it stands', 201: 'Stored now' },
  example: {
    path: { site: '$site' },
    body: {
      ref: '$ref',
      stringId: '$string',
      stage: 'before_energising',
      kind: 'positive_to_negative',
      light: 'bright',
      voltage: 8.4,
      at: '$now',
    },
  },
  run: async ({ tx, actor, params, body, at }) => {
    const { record, made } = await recordReading(tx, actor, params.site, body, at);
    return { status: made ? 201 : 200, body: record };
  },
});

export const openCaseFile = writing({
  id: 'openCase',
  path: '/cases',
  group: 'Writing',
  summary: 'Open a case with the figures of this minute',
  description:
    '`ref` is yours: sent twice is opened once. 409 with `current`: the cause’s case is open already.',
  scope: 'write',
  permission: 'case.write',
  body: newCase,
  answer: z.object({ id: uuid, number: z.int() }).meta({ id: 'OpenedCase' }),
  statuses: { 201: 'Opened' },
  example: {
    body: {
      ref: '$ref',
      site: '$site',
      origin: 'string',
      title: 'Hail seen on the roof camera',
      what: 'Have a look at the upper row before the next test.',
      kind: 'other',
      strings: ['$string'],
    },
  },
  run: async ({ tx, actor, body, at, address }) => ({
    status: 201,
    body: await openCase(tx, actor, { ...body, address }, at),
  }),
});

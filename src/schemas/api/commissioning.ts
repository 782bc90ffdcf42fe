import { z } from 'zod';
import { STEPS } from '../../domain/commissioning/steps';
import { id } from './now';
import { commissioningFields } from '../../words/fields';

/** Sites under way, step by step. Times ISO 8601 in UTC. */

const time = z.iso.datetime();

export const stepNow = z.object({
  key: z.enum(STEPS),
  state: z.enum(['done', 'under_way', 'not_started']),
  words: z.string(), // what stands, in few words
  gaps: z.array(z.object({ key: z.string(), words: z.string(), accepted: z.boolean() })),
  startedAt: time.nullable(), // first record of this step
});
export type StepNow = z.infer<typeof stepNow>;

/** A site on its way from as-built to handover. */
export const siteSteps = z.object({
  id,
  name: z.string(),
  place: z.string(),
  timeZone: z.string(),
  stage: z.enum(['commissioning', 'operating']),
  units: z.int(),
  strings: z.int(),
  rollCallRunning: z.boolean(),
  steps: z.array(stepNow),
  lastHand: z.object({ person: z.string(), at: time }).nullable(), // who recorded something last
});
export type SiteSteps = z.infer<typeof siteSteps>;

/** What the list of sites under way shows, as its address has it; what cannot be read is left at its default. */
export const underWayView = z.object({
  q: z.string().max(80).catch(''),
  step: z.enum(['all', ...STEPS]).catch('all'),
  sort: z.enum(['name', 'days', 'blocks']).catch('name'),
});
export type UnderWayView = z.infer<typeof underWayView>;

export const acceptGap = z.strictObject({
  gap: z.string().min(3).max(200),
  reason: z
    .string()
    .trim()
    .min(3, commissioningFields.sayWhyOpen)
    .max(2000, commissioningFields.reasonTooLong),
});
export type AcceptGap = z.infer<typeof acceptGap>;

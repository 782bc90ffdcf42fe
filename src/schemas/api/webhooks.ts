import { z } from 'zod';
import { KINDS, NOTICE_KINDS } from '../../domain/notices/kinds';
import { id } from './now';
import { webhookFields } from '../../words/fields';

/** Calls to other systems. Times ISO 8601 in UTC. */

const time = z.iso.datetime();

/** The kinds that a call can carry. */
export const CALL_KINDS = NOTICE_KINDS.filter((kind) => KINDS[kind].callable);
export const isCallKind = (kind: string): boolean => CALL_KINDS.some((k) => k === kind);

const name = z.string().trim().min(1, webhookFields.nameIt).max(80, webhookFields.nameTooLong);
const url = z.string().trim().min(1, webhookFields.enterAddress).max(2000);
const kinds = z
  .array(z.enum(NOTICE_KINDS))
  .min(1, webhookFields.chooseKind)
  .refine((list) => list.every(isCallKind), webhookFields.kindNotTold)
  .transform((list) => [...new Set(list)]);

export const webhookBody = z.strictObject({ name, url, kinds });
export const webhookChange = z.strictObject({
  name: name.optional(),
  url: url.optional(),
  kinds: kinds.optional(),
  /** Switched on again, it begins with what happens from then on. */
  active: z.boolean().optional(),
  /** Makes a new secret; the old one ends. */
  newSecret: z.literal(true).optional(),
});
export const webhookParams = z.strictObject({ webhook: id });
export const deliveryParams = z.strictObject({ delivery: id });

export const webhookItem = z.object({
  id,
  name: z.string(),
  url: z.string(),
  kinds: z.array(z.enum(NOTICE_KINDS)),
  active: z.boolean(),
  createdBy: z.string(),
  createdAt: time,
  failingSince: time.nullable(),
  disabledAt: time.nullable(), // by Wakeline, after days of failing
  waiting: z.int(), // calls that are to be made
  lastDeliveredAt: time.nullable(),
});
export type WebhookItem = z.infer<typeof webhookItem>;

export interface WebhooksPage {
  at: string;
  webhooks: WebhookItem[];
  /** Which addresses of ours may be called. */
  within: 'nothing' | 'loopback' | 'everything';
}

export const attemptItem = z.object({
  at: time,
  status: z.int().nullable(),
  latencyMs: z.int(),
  excerpt: z.string(),
  error: z.string().nullable(),
});
export const deliveryItem = z.object({
  id,
  number: z.int(),
  kind: z.enum([...NOTICE_KINDS, 'test']),
  site: z.string().nullable(),
  createdAt: time,
  state: z.enum(['waits', 'delivered', 'given_up']),
  nextAt: time.nullable(),
  body: z.string(),
  attempts: z.array(attemptItem), // newest first
});
export type DeliveryItem = z.infer<typeof deliveryItem>;

export const deliveriesView = z.object({
  show: z.enum(['all', 'failed', 'waiting']).catch('all'),
  before: z.coerce.number().int().positive().optional().catch(undefined),
});
export type DeliveriesView = z.infer<typeof deliveriesView>;

export interface WebhookPage {
  at: string;
  webhook: WebhookItem;
  deliveries: DeliveryItem[];
  next: number | null;
  within: WebhooksPage['within'];
}

/** Made once, when the webhook or its new secret is. */
export interface SecretShown {
  id: string;
  secret: string;
}

import { z } from 'zod';

/** Who did what. Times ISO 8601 in UTC. */

/** Areas of actions, as their names begin. */
export const AUDIT_AREAS = [
  'people',
  'account',
  'share',
  'as_built',
  'equipment',
  'checks',
  'commissioning',
  'roll_call',
  'shutdown_test',
  'handover',
  'hazard',
  'case',
  'webhook',
  'history',
  'settings',
  'tariff',
  'isolation',
  'jobs',
  'annotation',
  'planned_work',
] as const;

export const auditView = z.object({
  q: z.string().max(120).catch(''),
  area: z.enum(['all', ...AUDIT_AREAS]).catch('all'),
  /** The entry after which the list goes on. */
  before: z.coerce.number().int().positive().optional().catch(undefined),
});
export type AuditView = z.infer<typeof auditView>;

export const auditItem = z.object({
  id: z.int(),
  at: z.iso.datetime(),
  person: z.string().nullable(),
  address: z.string().nullable(),
  action: z.string(),
  subject: z.string(),
  site: z.object({ id: z.uuid(), name: z.string() }).nullable(),
  reason: z.string(),
  before: z.unknown(),
  after: z.unknown(),
});
export type AuditItem = z.infer<typeof auditItem>;

export interface AuditPage {
  at: string;
  items: AuditItem[];
  /** Where the next page begins; null: this is the last. */
  next: number | null;
}

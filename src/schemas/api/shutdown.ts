import { z } from 'zod';
import { acknowledgement, siteContact } from './fleet';
import { causeNow, siteNow } from './now';

export const SHUTDOWN_SHOWS = ['all', 'not_shutting_down', 'stuck', 'unconfirmed', 'silent'] as const;

export const shutdownView = z.object({
  q: z.string().trim().max(80).catch(''),
  show: z.enum(SHUTDOWN_SHOWS).catch('all'),
});
export type ShutdownView = z.infer<typeof shutdownView>;

export const shutdownCsvQuery = z.strictObject({
  q: z.string().trim().max(80).default(''),
  show: z.enum(SHUTDOWN_SHOWS).default('all'),
});

export const shutdownNow = z.object({
  at: z.iso.datetime(),
  causes: z.array(causeNow),
  /** Every site that has a cause or a command other than released. */
  sites: z.array(siteNow),
  contacts: z.array(siteContact),
  acknowledgements: z.array(acknowledgement),
});
export type ShutdownNow = z.infer<typeof shutdownNow>;

import { z } from 'zod';
import { causeNow, id } from './now';

/**
 * Causes as they go to a browser. A logger that is away takes a hundred units with it and an outage some hundred loggers:
 * units of one string that are so since one moment are sent together, less than a fifth of what they are one by one.
 */
const unitsSent = z.object({
  stringId: id,
  stringName: z.string(),
  since: z.iso.datetime(),
  positions: z.array(z.int().nullable()),
  serials: z.array(z.string().nullable()),
});
export const causeSent = causeNow.omit({ units: true }).extend({ strings: z.array(unitsSent) });
export type CauseSent = z.infer<typeof causeSent>;

/** The causes of one site, all of them: in place of what was known of it. */
export const causesAt = z.object({ site: id, causes: z.array(causeSent) });
export type CausesAt = z.infer<typeof causesAt>;

import { z } from 'zod';
import { LOW_SORTS, SIGNATURES, type LowOutputView } from './low-output-rows';

/** What the list of low strings shows, as its address says it. */
export const lowOutputView: z.ZodType<LowOutputView> = z.object({
  q: z.string().trim().max(100).catch(''),
  site: z.uuid().or(z.literal('all')).catch('all'),
  signature: z.enum([...SIGNATURES, 'all']).catch('all'),
  case: z.enum(['all', 'open', 'none']).catch('all'),
  sort: z.enum(LOW_SORTS).catch('loss'),
  order: z.enum(['up', 'down']).catch('down'),
});

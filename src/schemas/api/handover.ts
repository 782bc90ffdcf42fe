import { z } from 'zod';
import { siteSteps } from './commissioning';
import { id } from './now';
import { handoverFields } from '../../words/fields';

/** Handover packs of a site. Times ISO 8601 in UTC. */

export const packItem = z.object({
  ref: id,
  version: z.int(),
  madeBy: z.string(),
  madeAt: z.iso.datetime(),
  remark: z.string(),
  fingerprint: z.string(),
  pdfBytes: z.int(),
  csvBytes: z.int(),
  openPoints: z.int(), // gaps accepted by name
});
export type PackItem = z.infer<typeof packItem>;

export const handoverPage = z.object({
  at: z.iso.datetime(),
  site: siteSteps,
  packs: z.array(packItem), // newest first
  customers: z.array(z.string()), // who would get a letter
});
export type HandoverPage = z.infer<typeof handoverPage>;

export const makeHandover = z.strictObject({
  remark: z.string().trim().max(2000, handoverFields.remarkTooLong).default(''),
  tellCustomers: z.boolean().default(false),
});
export type MakeHandover = z.infer<typeof makeHandover>;

export const paperParams = z.strictObject({ paper: id });
export const paperQuery = z.strictObject({ form: z.enum(['pdf', 'csv']).default('pdf') });

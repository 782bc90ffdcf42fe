import { z } from 'zod';
import { DESIGN_CHECKS } from '../../domain/photovoltaics/limits/design-finding';
import { id } from './now';

const time = z.iso.datetime();

export const DESIGN_OUTCOMES = ['exceeded', 'cannot_tell', 'within', 'not_required'] as const;

const temperature = z.object({ value: z.number(), from: z.enum(['entered', 'estimated']) });

export const siteDesignFinding = z.object({
  key: z.string(),
  check: z.enum(DESIGN_CHECKS),
  strings: z.array(z.object({ id, name: z.string() })),
  outcome: z.enum(DESIGN_OUTCOMES),
  value: z.number().nullable(),
  limit: z.number().nullable(),
  unit: z.enum(['V', 'A', 'W', 's', '']),
  safety: z.boolean(),
  words: z.string(),
  clause: z.string(),
  remedy: z.string().nullable(),
  alternatives: z.array(z.string()),
});
export type SiteDesignItem = z.infer<typeof siteDesignFinding>;

/** The design checks of a site, and what they were made with. */
export const siteDesign = z.object({
  at: time,
  siteId: id,
  siteName: z.string(),
  timeZone: z.string(),
  stage: z.enum(['commissioning', 'operating']),
  ruleSet: z.enum(['rapid_shutdown_30s', 'rapid_shutdown_10s', 'hazard_control', 'none']),
  structure: z.enum(['one_or_two_family_dwelling', 'other_building', 'not_on_building']),
  temperatures: z.object({ coldest: temperature, hottest: temperature }),
  strings: z.int(),
  /** Strings that have no slot yet and can't be checked. */
  stringsWithoutSlots: z.array(z.string()),
  /** Exceeded first. */
  findings: z.array(siteDesignFinding),
});
export type SiteDesign = z.infer<typeof siteDesign>;

/** What the page shows, as it stands in the address. */
export const designView = z.object({
  q: z.string().trim().max(80).catch(''),
  show: z.enum(['open', ...DESIGN_OUTCOMES, 'all']).catch('open'),
  sort: z.enum(['gravity', 'check', 'strings']).catch('gravity'),
  order: z.enum(['down', 'up']).catch('down'),
});
export type DesignView = z.infer<typeof designView>;
export const designCsvQuery = z.strictObject({
  q: z.string().trim().max(80).default(''),
  show: z.enum(['open', ...DESIGN_OUTCOMES, 'all']).default('all'),
  sort: z.enum(['gravity', 'check', 'strings']).default('gravity'),
  order: z.enum(['down', 'up']).default('down'),
});

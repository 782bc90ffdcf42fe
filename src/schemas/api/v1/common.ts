import { z } from 'zod';

/** What all of /api/v1 has in common. SI units; times ISO 8601 in UTC; identifiers are UUIDs. */

export const time = z.iso.datetime().meta({ description: 'ISO 8601 in UTC' });
export const uuid = z.uuid();

export const PAGE_SIZE = 50;
export const PAGE_MAX = 200;

/** Query parameters of every list. */
export const paging = {
  limit: z.coerce
    .number('Give a number')
    .int('Give a whole number')
    .min(1, `Give 1 to ${PAGE_MAX}`)
    .max(PAGE_MAX, `Give 1 to ${PAGE_MAX}`)
    .default(PAGE_SIZE)
    .meta({ description: `How many at once, at most ${PAGE_MAX}`, example: 20 }),
  cursor: z
    .string()
    .max(1000)
    .optional()
    .meta({ description: 'Where the last page ended: its `next`. It holds for the same filters' }),
};

export const ofSite = z.uuid('Give the identifier of a site').optional();
export const ofString = z.uuid('Give the identifier of a string').optional();
/** An instant of a filter: with its offset, or in UTC. */
export const instant = z.iso
  .datetime({ offset: true, error: 'Give an instant with its offset, as 2026-11-03T10:15:00Z' })
  .meta({ example: '2026-11-03T00:00:00Z' });

export const listOf = <T extends z.ZodType>(item: T) =>
  z.object({
    data: z.array(item),
    next: z.string().nullable().meta({ description: 'The cursor of the next page; null: this is the last' }),
  });

/** An answer that is no success: RFC 9457. */
export const problemDocument = z
  .object({
    type: z
      .string()
      .meta({ description: 'A name for what went wrong, stable', example: 'urn:wakeline:problem:invalid' }),
    title: z.string(),
    status: z.int(),
    detail: z.string().meta({ description: 'What was wrong, where, and what to do' }),
    fields: z.array(z.object({ field: z.string(), message: z.string() })),
    current: z.unknown().optional().meta({ description: 'What stands instead, where somebody was first' }),
    requestId: z.string().meta({ description: 'Name it when you report a problem' }),
  })
  .meta({ id: 'Problem' });

import { z } from 'zod';
import { searchFields } from '../../words/fields';

export const searchQuery = z.strictObject({
  q: z.string().trim().min(2, searchFields.typeMore).max(80),
});

/** What the search box of the staff pages finds: best first, at most 12. */
export const searchReply = z.object({
  results: z.array(
    z.object({
      kind: z.enum(['site', 'string', 'unit']),
      label: z.string(), // "B3", "4E02-6B90-17"
      where: z.string(), // "Old Tannery Market Hall · position 5"
      href: z.string(),
    }),
  ),
});
export type SearchReply = z.infer<typeof searchReply>;

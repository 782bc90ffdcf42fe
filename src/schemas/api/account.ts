import { z } from 'zod';
import { accountFields } from '../../words/fields';

export const signInBody = z.strictObject({
  email: z.string().trim().min(3, accountFields.giveEmail).max(254),
  password: z.string().min(1, accountFields.givePassword).max(200),
  keep: z
    .union([z.boolean(), z.literal('on')])
    .optional()
    .transform((v) => v === true || v === 'on'),
  code: z.string().trim().max(30).optional(),
  next: z.string().max(500).optional(),
});
export const signInReply = z.object({ next: z.string() });

export const themeBody = z.strictObject({ theme: z.enum(['system', 'light', 'dark']) });

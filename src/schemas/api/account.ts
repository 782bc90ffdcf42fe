import { z } from 'zod';

export const signInBody = z.strictObject({
  email: z.string().trim().min(3, 'Give your e-mail address').max(254),
  password: z.string().min(1, 'Give your password').max(200),
  keep: z
    .union([z.boolean(), z.literal('on')])
    .optional()
    .transform((v) => v === true || v === 'on'),
  code: z.string().trim().max(30).optional(),
  next: z.string().max(500).optional(),
});
export const signInReply = z.object({ next: z.string() });

export const themeBody = z.strictObject({ theme: z.enum(['system', 'light', 'dark']) });

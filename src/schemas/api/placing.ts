import { z } from 'zod';
import { id } from './now';
import { placingFields } from '../../words/fields';

/** Serials put into slots by somebody who has read the labels on the roof. */

const written = (what: string, max = 500) =>
  z
    .string({ error: what })
    .trim()
    .min(3, { error: what })
    .max(max, { error: placingFields.textTooLong(max) });

export const placeKind = z.enum(['place', 'replace', 'swap', 'move']);
export type PlaceKind = z.infer<typeof placeKind>;

export const placeSlot = z.strictObject({
  string: id,
  position: z.int().min(1).max(63),
  /** null: the slot stays without a unit. */
  serial: z.string().trim().max(64).nullable(),
  /** What the editor saw in this slot: if it is another by now, nothing is written. */
  expected: z.string().max(64).nullable(),
});

export const placeBody = z.strictObject({
  kind: placeKind,
  slots: z.array(placeSlot).min(1).max(2),
  /** What was read on the module, or seen there. */
  seen: written(placingFields.sayWhatYouRead),
  checked: z.literal(true, { error: placingFields.confirmLabels }),
  reason: written(placingFields.sayWhy),
});
export type PlaceBody = z.infer<typeof placeBody>;

export const placeReply = z.object({
  placed: z.int(),
  removed: z.int(),
  moved: z.int(),
  replaced: z.int(),
  unchanged: z.int(),
});
export type PlaceReply = z.infer<typeof placeReply>;

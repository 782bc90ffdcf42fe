import { z } from 'zod';
import { outlineFault, OUTLINE_POINTS_MAX, ROOF_MAX_M } from '../../domain/commissioning/roof/outline';
import { id } from './now';
import { roofFields } from '../../words/fields';

/** The roof of a site: its outline, and where the strings lie. Metres, y to the north. */

const metres = z.number().min(-ROOF_MAX_M).max(ROOF_MAX_M);
export const outlinePoints = z.array(z.tuple([metres, metres])).max(OUTLINE_POINTS_MAX);

export const roofSlot = z.object({
  position: z.int().min(1).max(63),
  roofX: metres.nullable(),
  roofY: metres.nullable(),
  roofPlace: z.string().trim().max(200, roofFields.nameTooLong),
});
export type RoofSlot = z.infer<typeof roofSlot>;

export const roofString = z.object({
  id,
  name: z.string(),
  plane: z.string(),
  surfaceTilt: z.number(),
  surfaceAzimuth: z.number(),
  /** Of the module type that most of its slots have, m. */
  moduleLength: z.number(),
  moduleWidth: z.number(),
  /** Changes when anything of its slots' places does: give it back as `seen`. */
  version: z.string(),
  slots: z.array(roofSlot),
});
export type RoofString = z.infer<typeof roofString>;

export const roofPlan = z.object({
  site: z.object({ id, name: z.string(), stage: z.enum(['commissioning', 'operating']) }),
  outline: outlinePoints,
  outlineVersion: z.string(),
  strings: z.array(roofString),
});
export type RoofPlan = z.infer<typeof roofPlan>;

/** Only what has changed is sent; `seen` is the version that the change began from. */
export const roofSave = z.strictObject({
  outline: z
    .strictObject({
      points: outlinePoints.superRefine((points, context) => {
        const message = outlineFault(points);
        if (message) context.addIssue({ code: 'custom', message });
      }),
      seen: z.string().max(100),
    })
    .nullable()
    .default(null),
  strings: z
    .array(z.strictObject({ id, seen: z.string().max(100), slots: z.array(roofSlot).min(1).max(63) }))
    .max(2000)
    .default([]),
  reason: z.string().trim().max(500, roofFields.reasonTooLong).default(''),
});
export type RoofSave = z.input<typeof roofSave>;

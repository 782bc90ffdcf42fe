import { z } from 'zod';
import { id } from './now';
import { annotationFields } from '../../words/fields';

/** Notes on the time axis: an instant or a span, of a site or of one string of it. */

const time = z.iso.datetime({ offset: true, message: annotationFields.giveTime });

export const annotationParams = z.strictObject({ site: id, annotation: id });
export const annotationsQuery = z.strictObject({
  /** Those of a string and those of its whole site. */
  string: id.optional(),
  /** Epoch s; those that touch this time. */
  from: z.coerce.number().int().optional(),
  to: z.coerce.number().int().optional(),
});
export type AnnotationsQuery = z.infer<typeof annotationsQuery>;

export const newAnnotation = z
  .strictObject({
    /** Made by who writes it, so that the same note twice sent is one. */
    ref: id,
    string: id.nullable(),
    from: time,
    to: time.nullable(),
    text: z.string().trim().min(1, annotationFields.writeNote).max(2000, annotationFields.noteTooLong),
  })
  .refine((n) => n.to === null || Date.parse(n.to) > Date.parse(n.from), {
    path: ['to'],
    message: annotationFields.endBeforeBeginning,
  });
export type NewAnnotation = z.infer<typeof newAnnotation>;

export const annotation = z.object({
  id,
  /** null: of the whole site. */
  string: z.object({ id, name: z.string() }).nullable(),
  from: z.iso.datetime(),
  to: z.iso.datetime().nullable(),
  text: z.string(),
  by: z.string(),
  at: z.iso.datetime(),
});
export type Annotation = z.infer<typeof annotation>;

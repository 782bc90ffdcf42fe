import { z } from 'zod';
import { SAVED_LISTS } from '../../domain/saved-views/lists';
import { id } from './now';
import { savedViewFields } from '../../words/fields';

/** A list's address under a name. */
export const savedViewParams = z.strictObject({ view: id });
export const savedViewsQuery = z.strictObject({ list: z.enum(SAVED_LISTS) });

const name = z.string().trim().min(1, savedViewFields.nameView).max(80, savedViewFields.nameTooLong);
const query = z.string().max(2000, savedViewFields.addressTooLong);
export const newSavedView = z.strictObject({
  list: z.enum(SAVED_LISTS),
  name,
  query,
  shared: z.boolean().default(false),
});
export type NewSavedView = z.input<typeof newSavedView>;
export const changedSavedView = z.strictObject({
  name: name.optional(),
  query: query.optional(),
  shared: z.boolean().optional(),
});
export type ChangedSavedView = z.infer<typeof changedSavedView>;

export const savedView = z.object({
  id,
  name: z.string(),
  query: z.string(),
  shared: z.boolean(),
  /** Made by who asks. */
  own: z.boolean(),
  by: z.string(),
});
export type SavedView = z.infer<typeof savedView>;

/** Lists of which views are kept. Stored: none is renamed. */
export const SAVED_LISTS = ['low_output', 'causes', 'cases', 'fleet', 'figures'] as const;
export type SavedList = (typeof SAVED_LISTS)[number];

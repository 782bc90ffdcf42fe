/** Something that can't be, at the field that has to change. */
export interface Conflict {
  field: string;
  message: string;
}
/** Something unusual: the entry may be kept once a person has accepted it. */
export interface Doubt {
  /** Stable name: what was accepted. */
  key: string;
  fields: readonly string[];
  message: string;
}

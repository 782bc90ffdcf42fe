/**
 * Frames of strings as rows, wherever they are: single ones of the last days and those of packed days. Every reader
 * goes through here, so that it need not know which days are packed.
 */

/** Columns whose packed form is an array of scalars. */
const SCALARS = ['mask', 'voltage_sum', 'power_sum'] as const;
/** Columns whose packed form is packed_values; arrays in slot order. */
export const VALUE_COLUMNS = [
  'voltage',
  'voltage_in',
  'current',
  'power',
  'temperature',
  'signal',
  'via',
  'state',
] as const;
export type ValueColumn = (typeof VALUE_COLUMNS)[number];
export type FrameColumn = (typeof SCALARS)[number] | ValueColumn;

const isScalar = (column: FrameColumn): boolean => (SCALARS as readonly string[]).includes(column);

export interface FramesWanted {
  columns: readonly FrameColumn[];
  /** A condition on the name that it is given, which is the string's number. */
  strings: (stringId: string) => string;
  /** SQL of the first instant and of the one that is no longer in. */
  from: string;
  to: string;
}

/** The instant after this one, for spans whose end is in them. */
export const after = (instant: string): string => `(${instant}::timestamptz + interval '1 microsecond')`;

/** The span `:from` ≤ at < `:to`, as most readers name it. */
export const SPAN = { from: ':from::timestamptz', to: ':to::timestamptz' } as const;
export const oneString = (name: string) => (id: string) => `${id} = ${name}`;
export const anyString = (id: string): string => `${id} = any (:ids::int4[])`;

/** A subselect with `string_id`, `at` and the columns that are asked for, in no order. */
export const framesOf = (wanted: FramesWanted): string =>
  `(${singleFrames(wanted)} union all ${packedFrames(wanted)})`;

export const singleFrames = ({ columns, strings, from, to }: FramesWanted): string =>
  `select string_frame.string_id, ${['at', ...columns].map((c) => `string_frame.${c}`).join(', ')} from string_frame
   where ${strings('string_frame.string_id')} and string_frame.at >= ${from} and string_frame.at < ${to}`;

/** Of packed days alone. Only the columns asked for are unpacked. What an organisation hides is hidden within a day, too. */
export const packedFrames = ({ columns, strings, from, to }: FramesWanted): string => {
  const unpacked = columns.map((c) =>
    isScalar(c)
      ? `unnest(p.${c}[w.first:w.last])`
      : `unpack_values(p.${c}, p.slots, p.mask, w.first, w.last)`,
  );
  const day = (instant: string): string => `(${instant} at time zone 'UTC')::date`;
  return `select p.string_id, ${['at', ...columns].map((c) => `x.${c}`).join(', ')}
   from packed_frame p
     cross join lateral packed_span(p.day, p.steps, ${from}, ${to}) w
     cross join lateral rows from (${['unnest(w.at)', ...unpacked].join(', ')}) x(${['at', ...columns].join(', ')})
   where ${strings('p.string_id')} and p.day >= ${day(from)} and p.day <= ${day(to)}
     and x.at >= (select actor_raw_from())`;
};

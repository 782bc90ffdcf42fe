/** Lists and limits that a schema and an island share. Without zod: they go to the browser. */

export const CASE_SORTS = ['number', 'title', 'site', 'state', 'assignee', 'due', 'changed'] as const;

export const TITLE_MAX = 160;
export const WHAT_MAX = 8000;
export const COMMENT_MAX = 8000;

export const PHOTO_MAX_BYTES = 25 * 1024 * 1024;
/** What a file chooser offers. */
export const PHOTO_TYPES = 'image/jpeg,image/png,image/webp';

/** For how long a token may go on beside a newer one, hours; 0: it ends at once. */
export const OVERLAP_HOURS = [0, 1, 24, 72, 168] as const;

/** Bytes of a batch as it is sent, and unpacked. A JSON document may have no more than one message may. */
export const BATCH_MAX_BYTES = 4 * 1024 * 1024;
export const BATCH_UNPACKED_MAX_BYTES = 8 * 1024 * 1024;
export const BATCH_MESSAGES_MAX = 2000;

/** Names whose record a phone sends, by public identifier: refused where somebody else is signed in by now. */
export const PERSON_HEADER = 'x-wakeline-person';

export const IMPORT_STEPS = ['reading', 'comparing', 'strings', 'slots', 'units', 'kept'] as const;
export type ImportStep = (typeof IMPORT_STEPS)[number];

/** Bytes of a file as UTF-8 text, rows of it, and readings that come out of it. */
export const HISTORY_FILE_MAX_BYTES = 28 * 1024 * 1024;

export const CURRENCIES = [
  'AUD',
  'BRL',
  'CAD',
  'CHF',
  'CZK',
  'DKK',
  'EUR',
  'GBP',
  'INR',
  'JPY',
  'MXN',
  'NOK',
  'NZD',
  'PLN',
  'SEK',
  'USD',
  'ZAR',
] as const;

export const fleetFiguresSorts = [
  'site',
  'energy',
  'change',
  'specific_yield',
  'ratio',
  'ratio_stc',
  'availability',
  'completeness',
  'worth',
] as const;

/**
 * What a person has entered, as typed: kept whole in the address, so that it can be sent, gone back to, and corrected
 * when it was wrong. Every value is text.
 */
export interface ReadingForm extends Record<string, string> {
  kind: string;
  units: string;
  /** A typical datasheet, or `own`: then voc, beta, cells and groups are used. */
  module: string;
  voc: string;
  /** Temperature coefficient of voc, % a kelvin. */
  beta: string;
  cells: string;
  groups: string;
  commanded: string;
  /** Units that have answered the roll call. */
  heard: string;
  light: string;
  meter: string;
  /** Which of the three readings is being entered. */
  at: string;
  v: string;
  pe: string;
  ne: string;
  /** Measured conditions, W/m² and °C; empty: not measured. */
  poa: string;
  cell: string;
  /** Readings of other strings: `14:8.4;13:7.8`. */
  others: string;
}

export const COMMANDED = ['shutdown', 'released', 'unknown'] as const;
export const LIGHTS = ['bright', 'dull', 'snow', 'night'] as const;
export const METERS = ['high_impedance', 'low_impedance'] as const;
export const PLACES = ['between', 'positive', 'negative'] as const;
export type Place = (typeof PLACES)[number];
/** The field of the form that a place's reading is kept in. */
export const FIELD_AT = { between: 'v', positive: 'pe', negative: 'ne' } as const satisfies Record<
  Place,
  string
>;

export const DEFAULTS: ReadingForm = {
  kind: 'shutdown_only',
  units: '14',
  module: 'm108',
  voc: '',
  beta: '',
  cells: '',
  groups: '3',
  commanded: 'shutdown',
  heard: '0',
  light: 'bright',
  meter: 'high_impedance',
  at: 'between',
  v: '',
  pe: '',
  ne: '',
  poa: '',
  cell: '',
  others: '',
};

/** One choice of a list, by its word. */
export const chosen = <T extends string>(list: readonly T[], word: string, otherwise: T): T =>
  list.find((item) => item === word) ?? otherwise;

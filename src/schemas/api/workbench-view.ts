import type { HistoryQuantity, HistoryRange, UnitQuantity } from './string';

/** What the page of a string shows, as its address says it. Without zod: it goes to the browser. */

export const UNITS_CHOSEN_MOST = 8;

export type WorkbenchView = {
  range: HistoryRange;
  quantity: HistoryQuantity;
  /** The last day shown, at the site; empty: today. */
  on: string;
  /** The moment of the staircase, epoch s; empty: now. */
  at: string;
  siblings: 'middle' | 'each' | 'off';
  /** Another string to lay over this one, by identifier. */
  beside: string;
  /** Another day of this string to lay over. */
  day: string;
  difference: '' | 'yes';
  /** Positions with commas; empty: those in trouble; none: no unit. */
  units: string;
  unit: UnitQuantity;
  heat: UnitQuantity;
  /** The heat strip: against the string's middle, or the figures themselves. */
  scale: 'middle' | 'figures';
};

export const WORKBENCH_DEFAULTS: WorkbenchView = {
  range: 'day',
  quantity: 'voltage',
  on: '',
  at: '',
  siblings: 'middle',
  beside: '',
  day: '',
  difference: '',
  units: '',
  unit: 'voltage',
  heat: 'voltage',
  scale: 'middle',
};

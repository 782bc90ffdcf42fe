import type { CauseKind } from '../domain/causes/kinds';
import type { LossStep } from '../domain/output/day-figures';

/** Where energy went. */

/** Kinds of cause where energy is told apart by them. */
export const lossWords = {
  stuck: 'Units stuck in shutdown',
  not_shutting_down: 'Units that did not shut down',
  unconfirmed: 'Shutdown unconfirmed',
  silent: 'Silent units',
  low_output: 'Strings that make too little',
  bypassed_substring: 'Bypassed sub-strings',
  weak_unit: 'Weak modules',
  loop_resistance: 'Resistance in a string',
  wrong_string: 'Units in another string',
} satisfies Record<CauseKind | 'bypassed_substring', string>;
export const lossOf = (kind: string): string | undefined =>
  (lossWords as Readonly<Record<string, string | undefined>>)[kind];

export const lossStepLabels: Record<
  Exclude<LossStep['key'], 'named' | 'temperature'> | 'warm' | 'cold',
  string
> = {
  light: 'Light at rated power',
  warm: 'Warm modules',
  cold: 'Cold modules',
  grid: 'Grid gone',
  stopped: 'Inverter not running',
  rest: 'Dirt, shade, wiring, conversion',
  made: 'Went out as AC',
};

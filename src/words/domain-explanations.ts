import type { Explanation } from '../domain/output/explanations';

/** What explanations of a low string are called, why each fits or doesn't, and the figures that say so. */

const positions = (list: readonly number[]): string =>
  list.length === 1 ? `position ${list[0]}` : `positions ${list.join(', ')}`;

export const explanationTitles: Record<Explanation['key'], string> = {
  units_missing: 'Units in shutdown, or modules not mated',
  bypassed_substring: 'Bypassed cells in a module',
  shade: 'Shade',
  soiling: 'Dirt',
  current_low: 'Too little current, voltage right',
  loop_resistance: 'A connector or lead going bad',
  weak_unit: 'A weak module',
};

export const explanationSaid = {
  sayItThemselves: (held: readonly number[], units: number) =>
    `${held.length} of ${units} units say themselves that they are in shutdown: ${positions(held)}.`,
  voltageMissing: (modules: number, units: number) =>
    `The voltage of ${modules} of ${units} modules is missing and the current is right.`,
  voltageWouldBeMissing: 'The voltage of whole modules would be missing, with the current unchanged.',
  /** What was found of several units, each a clause that begins with a capital. */
  ofUnits: (found: readonly string[]) => `${found.join('. ')}.`,
  partWouldBeMissing: (groups: number) =>
    `One part in ${groups} of one module’s voltage would be missing, all day, with the current unchanged.`,
  shade: 'It is low day after day while the sun stands in the same part of the sky, and well elsewhere.',
  lowForPartOfTheDay: (at: readonly number[]) => `Low for part of the day: ${positions(at)}.`,
  shadeWouldBe: 'It would be low at the same positions of the sun, day after day, and well elsewhere.',
  soiling: 'It fell day by day and came back with the rain.',
  soilingTooFewDays:
    'It would fall day by day and come back with rain; ten judged days are needed to see it.',
  soilingWouldBe: 'It would fall day by day and come back with rain.',
  currentLow: 'Even dirt, modules of another kind, or a string of the input that carries nothing.',
  loopNotMeasured: 'The units’ outputs or the input’s voltage are not measured here.',
  tooLittleToCompare: 'Too little load, or too few units that tell their voltage, to compare them.',
  noneUnderItsNeighbours: 'No unit stays under its neighbours’ voltage.',
};

/** Figures: what they are called, how they read, and what they would be if it were so. */
export const explanationFigures = {
  voltageMissing: 'voltage missing, in modules',
  currentOverTheOthers: 'current over the others’',
  voltageOverTheOthers: 'voltage over the others’',
  positionOverNeighbours: (position: number) => `position ${position} over its neighbours`,
  lowWhileAzimuth: 'low while the sun’s azimuth is',
  changeADay: 'change of the ratio a day',
  /** @param than one of `loopComparedWith` */
  resistanceOver: (than: string) => `resistance over that of ${than}`,
  notKnown: 'not known',
  degrees: (from: number, to: number) => `${from}° to ${to}°`,
  ohm: (ohm: string, low: string, high: string) => `${ohm} Ω (${low} to ${high})`,
  wholeNumber: 'a whole number',
  oneStretch: 'one stretch',
  oneOf: (values: readonly string[]) => values.join(' or '),
  under: (value: string) => `under ${value}`,
  over: (value: string) => `over ${value}`,
};

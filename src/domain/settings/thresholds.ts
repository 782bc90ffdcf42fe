/** What an organisation may set of the judgements: each with its default, its range and what it changes. */

export interface ThresholdFacts {
  key: ThresholdKey;
  name: string;
  /** What a higher or lower figure does. */
  changes: string;
  unit: string;
  /** In the unit shown; shares are kept as 0 … 1 and shown in per cent. */
  percent: boolean;
  /** null: follows from something else, which `defaultWords` names. */
  initial: number | null;
  defaultWords: string;
  min: number;
  max: number;
  whole: boolean;
  source: string;
}

export const THRESHOLD_KEYS = [
  'stuckGraceS',
  'lowOutputLoss',
  'lowOutputDays',
  'weakUnitLoss',
  'loopExcessOhm',
  'incompleteBelow',
] as const;
export type ThresholdKey = (typeof THRESHOLD_KEYS)[number];

/** Figures of the judgements; null: not set by the organisation, and follows from the site's report interval. */
export interface Thresholds {
  stuckGraceS: number | null;
  lowOutputLoss: number;
  lowOutputDays: number;
  weakUnitLoss: number;
  loopExcessOhm: number;
  incompleteBelow: number;
}

export const THRESHOLDS: readonly ThresholdFacts[] = [
  {
    key: 'stuckGraceS',
    name: 'Grace before a unit is called stuck',
    changes:
      'Longer: slow wake-ups are no longer called stuck, and true ones are named later. Whether a unit does not shut down is never touched by this.',
    unit: 's',
    percent: false,
    initial: null,
    defaultWords: 'two report intervals, 30 s at least',
    min: 30,
    max: 3600,
    whole: true,
    source: 'from experience',
  },
  {
    key: 'lowOutputLoss',
    name: 'Loss from which a string is low',
    changes: 'Higher: fewer strings on the list, small losses stay unnamed. Lower: more of them are chance.',
    unit: '%',
    percent: true,
    initial: 0.05,
    defaultWords: '5 %',
    min: 0.03,
    max: 0.3,
    whole: false,
    source:
      'from experience; the limit of chance (modified z of 3.5, Iglewicz and Hoaglin 1993) always holds beside it',
  },
  {
    key: 'lowOutputDays',
    name: 'Low days out of five that make a string low',
    changes: 'More: later and surer. Fewer: sooner, and passing shade counts.',
    unit: 'days',
    percent: false,
    initial: 3,
    defaultWords: '3',
    min: 2,
    max: 5,
    whole: true,
    source: 'from experience',
  },
  {
    key: 'weakUnitLoss',
    name: 'Loss from which one module is weak',
    changes: 'Higher: only dead sub-strings and the like are named.',
    unit: '%',
    percent: true,
    initial: 0.06,
    defaultWords: '6 %',
    min: 0.04,
    max: 0.3,
    whole: false,
    source: 'from experience',
  },
  {
    key: 'loopExcessOhm',
    name: 'Resistance in a string that is worth a look',
    changes:
      'Higher: long cables raise no finding; a warm connector is found later. At 10 A, 0.1 Ω makes 10 W in one place.',
    unit: 'Ω',
    percent: false,
    initial: 0.1,
    defaultWords: '0.1 Ω',
    min: 0.05,
    max: 2,
    whole: false,
    source: 'P = I²R; from experience',
  },
  {
    key: 'incompleteBelow',
    name: 'Data below which a day is marked as incomplete',
    changes: 'Higher: more days are marked in the calendars. No figure changes.',
    unit: '%',
    percent: true,
    initial: 0.9,
    defaultWords: '90 %',
    min: 0.5,
    max: 0.99,
    whole: false,
    source: 'common practice',
  },
];

const DEFAULTS = Object.fromEntries(THRESHOLDS.map((t) => [t.key, t.initial])) as unknown as Thresholds;

/** What holds: the organisation's own figures over the defaults; what is kept and lies outside its range is none. */
export function thresholdsOf(kept: unknown): Thresholds {
  const own: Partial<Record<ThresholdKey, number>> = {};
  const given = typeof kept === 'object' && kept !== null ? (kept as Record<string, unknown>) : {};
  for (const { key, min, max, whole } of THRESHOLDS) {
    const value = given[key];
    if (typeof value === 'number' && value >= min && value <= max && (!whole || Number.isInteger(value)))
      own[key] = value;
  }
  return { ...DEFAULTS, ...own };
}

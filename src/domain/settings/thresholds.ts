import { thresholdTexts, thresholdUnits } from '../../words/domain-settings';

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
    ...thresholdTexts.stuckGraceS,
    unit: 's',
    percent: false,
    initial: null,
    min: 30,
    max: 3600,
    whole: true,
  },
  {
    key: 'lowOutputLoss',
    ...thresholdTexts.lowOutputLoss,
    unit: '%',
    percent: true,
    initial: 0.05,
    min: 0.03,
    max: 0.3,
    whole: false,
  },
  {
    key: 'lowOutputDays',
    ...thresholdTexts.lowOutputDays,
    unit: thresholdUnits.days,
    percent: false,
    initial: 3,
    min: 2,
    max: 5,
    whole: true,
  },
  {
    key: 'weakUnitLoss',
    ...thresholdTexts.weakUnitLoss,
    unit: '%',
    percent: true,
    initial: 0.06,
    min: 0.04,
    max: 0.3,
    whole: false,
  },
  {
    key: 'loopExcessOhm',
    ...thresholdTexts.loopExcessOhm,
    unit: 'Ω',
    percent: false,
    initial: 0.1,
    min: 0.05,
    max: 2,
    whole: false,
  },
  {
    key: 'incompleteBelow',
    ...thresholdTexts.incompleteBelow,
    unit: '%',
    percent: true,
    initial: 0.9,
    min: 0.5,
    max: 0.99,
    whole: false,
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

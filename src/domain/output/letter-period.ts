import { periodLabels } from '../../words/domain-periods';
import { dayAfter, periodOf } from './period';

/** What a weekly or monthly letter is about: the newest week (Monday to Sunday) or month that is over. */
export const EVERY = ['week', 'month'] as const;
export type Every = (typeof EVERY)[number];

export interface LetterPeriod {
  /** Names it: 2026-11-23 (the Monday) or 2026-11. */
  key: string;
  from: string;
  before: string;
  label: string;
}

/** 0: Monday */
const weekday = (day: string): number => (new Date(`${day}T12:00:00Z`).getUTCDay() + 6) % 7;
const dayAndMonth = (day: string): [day: number, month: number] => [
  Number(day.slice(8)),
  Number(day.slice(5, 7)),
];

/** @param today yyyy-mm-dd on the calendar at the site */
export function lastPeriod(every: Every, today: string): LetterPeriod {
  if (every === 'month') {
    const period = periodOf(periodOf(today.slice(0, 7))?.previous ?? '');
    if (!period) throw new RangeError(`${today} is no day`);
    return period;
  }
  const before = dayAfter(today, -weekday(today));
  const from = dayAfter(before, -7);
  return {
    key: from,
    from,
    before,
    label: periodLabels.week(...dayAndMonth(from), ...dayAndMonth(dayAfter(from, 6))),
  };
}

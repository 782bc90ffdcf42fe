import { z } from 'zod';
import type { Figures, LossStep } from '../../domain/output/day-figures';
import { periodOf, type Period } from '../../domain/output/period';
import { id } from './now';
import { typedNumber } from '../typed-number';
import { fleetFiguresSorts } from '../lists-and-limits';
import { figureFields } from '../../words/fields';

/** What figures are asked for, as it stands in the address: a month, a year, or (unreadable, absent) the present one. */
export const figuresView = z.object({
  period: z
    .string()
    .refine((key) => periodOf(key) !== null)
    .optional()
    .catch(undefined),
});
/** The same where a wrong one must be said: downloads. */
export const figuresQuery = z.strictObject({
  period: z
    .string()
    .refine((key) => periodOf(key) !== null, figureFields.monthOrYear)
    .optional(),
});
export const monthQuery = z.strictObject({
  month: z
    .string()
    .refine((key) => periodOf(key)?.kind === 'month', figureFields.month)
    .optional(),
});

export interface Money {
  /** In the organisation's currency. */
  money: number;
  /** Energy of days without a price, kWh. */
  unpricedKWh: number;
}

/** Energy of the whole days of a span and of the same days a year before; null where the plant was not there on all. */
export interface Compared {
  nowKWh: number;
  beforeKWh: number;
  /** Days that are left out of both, as no data came on them. */
  missing: number;
}

export interface DayFigures {
  day: string;
  figures: Figures;
}

export interface SiteFigures {
  at: string;
  site: {
    id: string;
    name: string;
    place: string;
    timeZone: string;
    organisation: string;
    nameplate: number | null;
    firstDay: string | null;
  };
  today: string;
  period: Period;
  /** The part that has been; null: the plant was not there yet, or the period lies ahead. */
  elapsed: { from: string; before: string; days: number; running: boolean } | null;
  now: Figures | null;
  compared: Compared | null;
  worth: Money | null;
  currency: string | null;
  /** Share of the data below which a day is marked. */
  incompleteBelow: number;
  days: DayFigures[];
  /** Days of the period of which nothing was measured here, from imported files. */
  imported: { day: string; energyKWh: number; side: 'ac' | 'dc' }[];
  steps: LossStep[] | null;
  losses: {
    cause: string;
    kind: string;
    headline: string;
    since: string;
    closedAt: string | null;
    kWh: number;
  }[];
  /** This calendar year and the one before it, month by month. */
  /** `days`: of which there is data. */
  months: { year: number; month: number; days: number; energyKWh: number; performanceRatio: number | null }[];
  tariffs: { id: string; from: string; priceKWh: number; by: string }[];
}

export interface FleetFiguresRow {
  site: { id: string; name: string; place: string };
  now: Figures;
  compared: Compared | null;
  worth: Money | null;
}
export interface FleetFigures {
  at: string;
  today: string;
  period: Period;
  currency: string | null;
  rows: FleetFiguresRow[];
  total: Figures | null;
  compared: Compared | null;
  worth: Money | null;
  months: { year: number; month: number; energyKWh: number }[];
  /** Sites without any day in the period. */
  without: string[];
}

export type FleetFiguresSort = (typeof fleetFiguresSorts)[number];
export const fleetFiguresView = figuresView.extend({
  sort: z.enum(fleetFiguresSorts).catch('site'),
  order: z.enum(['up', 'down']).catch('up'),
  q: z.string().trim().max(100).catch(''),
});
export type FleetFiguresView = z.infer<typeof fleetFiguresView>;

export const tariffParams = z.object({ site: id, tariff: id });
export const newTariff = z.strictObject({
  from: z.iso.date(figureFields.day),
  /** As typed, or a number. */
  priceKWh: z.union([z.number(), z.string().max(40)]).transform((value, context) => {
    const { value: price, fault } = typedNumber(String(value), figureFields.price, { min: 0, max: 1000 });
    if (price !== null) return Math.round(price * 1e6) / 1e6;
    context.addIssue(fault);
    return z.NEVER;
  }),
});
export type NewTariff = z.input<typeof newTariff>;

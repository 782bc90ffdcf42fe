import { z } from 'zod';
import { EVERY } from '../../domain/output/letter-period';
import { commandNow, id, madeLast } from './now';

/** What the page for the owner of a roof rests on. SI units; times ISO 8601 in UTC, days as 2026-11-03 at the site. */

const time = z.iso.datetime();
const day = z.iso.date();

/** What holds at this moment, as far as the sentences need it. */
export const customerNow = z.object({
  at: time,
  stage: z.enum(['commissioning', 'operating']),
  modules: z.int(),
  reporting: z.int(), // modules whose electronics report one by one
  passing: z.int(),
  shutdown: z.int(),
  unheard: z.int(),
  silent: z.int(),
  dark: z.int(),
  stuck: z.int(),
  notShuttingDown: z.int(),
  unconfirmed: z.int(),
  /** Strings found not to shut down where the position is unknown. */
  stringsNotShuttingDown: z.int(),
  power: z.number().nullable(), // W, AC; null: nothing is known of now
  madeLast,
  daylight: z.boolean(),
  loggers: z.int(),
  quietLoggers: z.int(), // not heard for longer than they should be silent
  lastSpokeAt: time.nullable(), // the newest word of any logger
  zones: z.int(),
  commands: z.array(commandNow), // in force other than released
  inShutdownSince: time.nullable(), // every zone
  inverters: z.object({
    total: z.int(),
    gridLost: z.int(),
    fault: z.int(),
    limited: z.int(),
  }),
});
export type CustomerNow = z.infer<typeof customerNow>;

export const dayPoint = z.object({ at: time, power: z.number() }); // W, mean of the 15 minutes from at

export const customerSite = z.object({
  site: z.object({
    id,
    name: z.string(),
    place: z.string(),
    timeZone: z.string(),
    switchedOnOn: day.nullable(),
    shutdownSwitchPlace: z.string(),
    strings: z.int(),
    ruleSet: z.enum(['rapid_shutdown_30s', 'rapid_shutdown_10s', 'hazard_control', 'none']),
  }),
  care: z.object({
    organisation: z.string(),
    phone: z.string(),
    logo: z.string().nullable(), // changes when the logo does
  }),
  now: customerNow,
  today: z.object({
    day,
    from: time, // midnight at the site
    to: time,
    made: z.array(dayPoint),
    energy: z.number().nullable(), // Wh so far; null: nothing is known of today
    clear: z.array(dayPoint), // a clear day of this date
    clearFrom: z.enum(['own_best', 'datasheet']), // what the model was scaled to
    clearEnergyUntilNow: z.number(), // Wh, over the same quarters as `made`
  }),
  month: z.object({
    first: day,
    energy: z.number(), // Wh
    expected: z.number().nullable(), // Wh, what the weather allowed on the days counted in `measured`
    measured: z.number(), // Wh on the days that have an expectation
    days: z.int(),
  }),
  /** This calendar year so far; null: not switched on yet. */
  year: z.object({ first: day, energy: z.number() }).nullable(), // Wh
  life: z
    .object({
      from: day,
      /** The first day that is counted, where readings begin after switch-on. */
      countedFrom: day.nullable(),
      energy: z.number(), // Wh
      workingTime: z.number().nullable(), // 0 … 1 of daylight minutes
      lostMinutes: z.number(),
      lostMinutesGrid: z.number(),
      completeness: z.number(), // 0 … 1 of the days' readings that came
    })
    .nullable(), // null: not switched on yet
  /** What the energy was worth at the price of its day; null: no currency or no price is set. */
  worth: z
    .object({
      currency: z.string(),
      month: z.number().nullable(),
      year: z.number().nullable(),
      life: z.number().nullable(),
      /** Some of it has no price. */
      partly: z.boolean(),
    })
    .nullable(),
  lastTest: z
    .object({
      at: time,
      result: z.enum(['passed', 'failed', 'consistent', 'not_witnessed']),
      strings: z.int(),
      madeBy: z.string(),
    })
    .nullable(),
  /** Handover packs, newest first. */
  papers: z.array(z.object({ ref: id, version: z.int(), madeAt: time, pdfBytes: z.int() })),
  /** Months that a report can be had of, newest first, as 2026-11. */
  months: z.array(z.string()),
});
export type CustomerSite = z.infer<typeof customerSite>;

export const customerSites = z.array(
  z.object({ id, name: z.string(), place: z.string(), timeZone: z.string(), now: customerNow }),
);
export type CustomerSites = z.infer<typeof customerSites>;

export const letterChoice = z.strictObject({ every: z.enum(EVERY).nullable() });
export type LetterChoice = z.infer<typeof letterChoice>;

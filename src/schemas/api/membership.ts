import { z } from 'zod';
import { id, stringNow } from './now';
import { isolationPage } from './isolation';

/** Which string's current each unit carries, by the reports of the last hours. Times ISO 8601 in UTC, amperes. */

const time = z.iso.datetime();

export const MEMBERSHIP_OUTCOMES = ['here', 'elsewhere', 'cant_tell', 'fits_none'] as const;

export const membershipUnit = z.object({
  stringId: id,
  string: z.string(),
  position: z.int(),
  serial: z.string(),
  outcome: z.enum(MEMBERSHIP_OUTCOMES),
  /** False: it does not carry its own string's current, whether or not it is known whose it carries. */
  fitsOwn: z.boolean(),
  otherString: z.string().nullable(),
  otherStringId: id.nullable(),
  /** ln of the odds of the string that fits best among the others, against its own. */
  logOdds: z.number(),
  /** Median of |its current / the string's − 1|, 0 … ; null: never enough current together. */
  apartOwn: z.number().nullable(),
  apartOther: z.number().nullable(),
  steps: z.int(), // reports with enough current
  undecidedWith: z.array(z.string()),
  words: z.string(),
});
export type MembershipUnit = z.infer<typeof membershipUnit>;

export const membershipSuspect = membershipUnit.extend({
  /** The one unit of the other string that looks to belong here. */
  counterpart: z
    .object({ stringId: id, string: z.string(), position: z.int(), serial: z.string() })
    .nullable(),
  series: z.object({
    at: z.array(z.number()), // epoch seconds
    unit: z.array(z.number().nullable()),
    own: z.array(z.number().nullable()),
    /** Whose current `other` is: the string that fits best, or the counterpart's. */
    otherName: z.string().nullable(),
    other: z.array(z.number().nullable()),
  }),
});
export type MembershipSuspect = z.infer<typeof membershipSuspect>;

export const membershipPage = z.object({
  at: time,
  site: z.object({
    id,
    name: z.string(),
    place: z.string(),
    timeZone: z.string(),
    stage: z.enum(['commissioning', 'operating']),
  }),
  window: z.object({
    from: time,
    to: time,
    hours: z.int(),
    stepS: z.int(),
    steps: z.int(),
    withCurrent: z.int(),
  }),
  /** `elsewhere` counts units that don't fit their own string, also where several others fit alike. */
  counts: z.object({
    here: z.int(),
    elsewhere: z.int(),
    cantTell: z.int(),
    fitsNone: z.int(),
    mute: z.int(),
  }),
  /** Why units can't be told, most units first. */
  reasons: z.array(z.object({ why: z.string(), units: z.int(), strings: z.array(z.string()) })),
  suspects: z.array(membershipSuspect),
  daylight: z.boolean(),
  strings: z.array(stringNow),
  isolation: isolationPage,
});
export type MembershipPage = z.infer<typeof membershipPage>;

export const membershipQuery = z.object({
  hours: z.coerce
    .number()
    .pipe(z.literal([2, 6, 24]))
    .catch(6),
});
export const membershipView = z.object({
  hours: z.enum(['2', '6', '24']).catch('6'),
  unit: z.string().max(60).catch(''),
});
export type MembershipView = z.infer<typeof membershipView>;

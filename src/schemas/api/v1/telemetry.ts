import { z } from 'zod';
import { CLAIMS } from '../../../domain/verdicts/codes';
import { instant, time, uuid } from './common';

/** Readings as streams of records, one a line. V, A, W, Wh, °C, dBm. */

const which = {
  site: z.uuid('Give the identifier of a site').optional(),
  string: z.uuid('Give the identifier of a string').optional(),
  format: z.enum(['ndjson', 'csv'], 'Give ndjson or csv').default('ndjson'),
};
const day = z.iso.date('Give a day as 2026-11-03').meta({ example: '2026-11-03' });

/** One of site and string, and a span that runs forward. */
const whole = <T extends z.ZodObject>(schema: T): T =>
  schema.superRefine((query, context) => {
    const { site, string, from, to } = query as { site?: string; string?: string; from: string; to: string };
    if (!site === !string)
      context.addIssue({ code: 'custom', path: ['site'], message: 'Give either site or string' });
    if (Date.parse(to) <= Date.parse(from))
      context.addIssue({ code: 'custom', path: ['to'], message: 'Give a time after from' });
  });

export const framesQuery = whole(
  z.strictObject({
    ...which,
    from: instant,
    to: instant.meta({ description: 'Up to, and not including' }),
    by: z.enum(['string', 'unit'], 'Give string or unit').default('string').meta({
      description: 'One record a string and report, or one a unit and report',
    }),
  }),
);
export type FramesQuery = z.infer<typeof framesQuery>;
export const quartersQuery = whole(
  z.strictObject({ ...which, from: instant, to: instant.meta({ description: 'Up to, and not including' }) }),
);
export type QuartersQuery = z.infer<typeof quartersQuery>;
export const daysQuery = whole(
  z.strictObject({
    ...which,
    from: day.meta({ description: 'The site’s local date' }),
    to: day.meta({ description: 'Up to, and not including' }),
  }),
);
export type DaysQuery = z.infer<typeof daysQuery>;

const head = { at: time, stringId: uuid, string: z.string() };
const values = z.array(z.number().nullable());

export const frameRecord = z
  .object({
    ...head,
    voltage: z.number(),
    power: z.number(),
    units: z
      .object({
        voltage: values,
        voltageIn: values.nullable(),
        current: values,
        power: values.nullable(),
        temperature: values,
        signal: values,
        claim: z.array(z.enum(CLAIMS).nullable()),
      })
      .meta({
        description:
          'By position, the first is 1; null: that unit did not report. Not in CSV: there ask by unit',
      }),
  })
  .meta({ id: 'Frame' });
export type FrameRecord = z.infer<typeof frameRecord>;

export const unitFrameRecord = z
  .object({
    ...head,
    position: z.int(),
    voltage: z.number().nullable(),
    voltageIn: z.number().nullable(),
    current: z.number().nullable(),
    power: z.number().nullable(),
    temperature: z.number().nullable(),
    signal: z.number().nullable(),
    claim: z.enum(CLAIMS).nullable(),
  })
  .meta({ id: 'UnitFrame' });
export type UnitFrameRecord = z.infer<typeof unitFrameRecord>;

export const quarterRecord = z
  .object({
    ...head,
    frames: z.int().meta({ description: 'Reports in these 15 minutes' }),
    voltage: z.number(),
    voltageMin: z.number(),
    voltageMax: z.number(),
    energy: z.number().meta({ description: 'Wh' }),
  })
  .meta({ id: 'Quarter' });
export type QuarterRecord = z.infer<typeof quarterRecord>;

export const dayRecord = z
  .object({
    day: z.iso.date().meta({ description: 'The site’s local date' }),
    stringId: uuid,
    string: z.string(),
    frames: z.int(),
    voltage: z.number().meta({ description: 'V, mean while it made power' }),
    voltageMax: z.number(),
    energy: z.number().meta({ description: 'Wh' }),
  })
  .meta({ id: 'Day' });
export type DayRecord = z.infer<typeof dayRecord>;

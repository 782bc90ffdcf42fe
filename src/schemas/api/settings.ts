import { z } from 'zod';
import { THRESHOLD_KEYS, THRESHOLDS, type ThresholdKey } from '../../domain/settings/thresholds';
import { typedNumber } from '../typed-number';
import { CURRENCIES } from '../lists-and-limits';
import { settingFields } from '../../words/fields';
import { thresholdUnits } from '../../words/domain-settings';

/** What an organisation sets for itself. */

export const UNITS = ['metric', 'imperial'] as const;
export type Units = (typeof UNITS)[number];

export interface OrganisationSettings {
  name: string;
  phone: string;
  timeZone: string;
  currency: string | null;
  units: Units;
  hideRawAfterDays: number | null;
  /** What differs from the defaults. */
  thresholds: Partial<Record<ThresholdKey, number>>;
  /** Changes when the logo does; null: none. */
  logo: string | null;
  timeZones: string[];
  sites: number;
}

const knownZone = (zone: string): boolean => {
  try {
    new Intl.DateTimeFormat('en', { timeZone: zone });
    return true;
  } catch {
    return false;
  }
};

export const organisationBody = z.strictObject({
  name: z.string().trim().min(1, settingFields.nameOrganisation).max(120, settingFields.nameTooLong),
  phone: z
    .string()
    .trim()
    .max(40, settingFields.phoneTooLong)
    .regex(/^[+\d\s()/.-]*$/, settingFields.phoneCharacters),
  timeZone: z.string().refine(knownZone, settingFields.chooseZone),
  currency: z.enum(CURRENCIES).nullable(),
  units: z.enum(UNITS),
  hideRawAfterDays: z
    .number()
    .int(settingFields.wholeDays)
    .min(1, settingFields.oneDay)
    .max(90, settingFields.daysTooMany)
    .nullable(),
});
export type OrganisationBody = z.infer<typeof organisationBody>;

/** As typed, in the unit shown; empty: the default. */
export const thresholdsBody = z
  .partialRecord(z.enum(THRESHOLD_KEYS), z.string().max(40))
  .transform((typed, context): Partial<Record<ThresholdKey, number>> => {
    const own: Partial<Record<ThresholdKey, number>> = {};
    for (const facts of THRESHOLDS) {
      const text = typed[facts.key]?.trim() ?? '';
      if (text === '') continue;
      const scale = facts.percent ? 100 : 1;
      const { value, fault } = typedNumber(text, facts.name, {
        min: Number((facts.min * scale).toFixed(6)),
        max: Number((facts.max * scale).toFixed(6)),
        whole: facts.whole,
        unit: facts.unit === thresholdUnits.days ? '' : facts.unit,
      });
      if (value === null) context.addIssue({ code: 'custom', message: fault, path: [facts.key] });
      else if (facts.initial === null || Math.abs(value / scale - facts.initial) > 1e-9)
        own[facts.key] = Number((value / scale).toFixed(6));
    }
    return own;
  });
export type ThresholdsBody = z.input<typeof thresholdsBody>;

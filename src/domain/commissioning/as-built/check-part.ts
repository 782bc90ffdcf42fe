import { partFaultSaid } from '../../../words/domain-as-built-faults';
import { readSerial } from '../import/serial';
import type { Value } from './merge';
import { PART_FIELDS, type PartField, type PartKind } from './parts';

export interface PartFault {
  key: string;
  message: string;
}
export type CheckedPart =
  { values: Record<string, Value>; faults: null } | { values: null; faults: PartFault[] };

const UUID = /^[0-9a-f]{8}-[0-9a-f]{4}-[0-9a-f]{4}-[0-9a-f]{4}-[0-9a-f]{12}$/i;
const written = (n: number): string => String(n).replace('-', '−');

/** Whether this is a time zone of the IANA database. */
export function isTimeZone(zone: string): boolean {
  try {
    new Intl.DateTimeFormat('en', { timeZone: zone });
    return zone !== '';
  } catch {
    return false; // a RangeError is how Intl says no
  }
}

function checkField(field: PartField, given: unknown): { value: Value } | { message: string } {
  const no = (message: string) => ({ message });
  const said = partFaultSaid;
  switch (field.kind) {
    case 'text': {
      const value = typeof given === 'string' ? given.trim() : '';
      if (value === '' && !field.optional) return no(said.typeOne(field.label));
      if (value.length > field.longest) return no(said.tooLong(field.label, value.length, field.longest));
      return { value };
    }
    case 'serial': {
      const read = readSerial(typeof given === 'string' ? given : '');
      if (read.kind === 'serial') return { value: read.serial };
      return no(
        read.kind === 'empty'
          ? said.typeAsOnLabel(field.label)
          : said.serialFault(field.label, read.message, read.remedy),
      );
    }
    case 'number': {
      const { label, min, max, unit, whole, optional } = field;
      const span = said.span(written(min), written(max), unit);
      if (given === null || given === undefined || given === '')
        return optional ? { value: null } : no(said.typeNumber(label, span));
      if (typeof given !== 'number' || !Number.isFinite(given)) return no(said.typeNumber(label, span));
      if (whole && !Number.isInteger(given)) return no(said.notWhole(label, written(given), span));
      if (given < min || given > max) return no(said.outside(label, written(given), span));
      return { value: given };
    }
    case 'choice':
      return field.options.some((o) => o.value === given)
        ? { value: given as string }
        : no(said.chooseOne(field.label));
    case 'time_zone':
      return typeof given === 'string' && isTimeZone(given)
        ? { value: given }
        : no(said.chooseZone(field.label));
    case 'yes':
      return typeof given === 'boolean' ? { value: given } : no(said.sayYesOrNo(field.label));
    case 'part':
      if (given === null || given === undefined || given === '')
        return field.optional ? { value: null } : no(said.choosePart(field.label));
      return typeof given === 'string' && UUID.test(given)
        ? { value: given }
        : no(said.chooseOne(field.label));
    case 'parts':
      if (given === null || given === undefined) return { value: [] };
      return Array.isArray(given) && given.every((v): v is string => typeof v === 'string' && UUID.test(v))
        ? { value: [...new Set(given)].sort() }
        : no(said.chooseFromList(field.label));
  }
}

/**
 * A part's values as they may be kept, or what is wrong at which field with the remedy. With `only` just the keys that
 * `given` has (an edit), else all of the kind (a new part). Unknown keys are a fault.
 */
export function checkPart(
  kind: PartKind,
  given: Readonly<Record<string, unknown>>,
  only: 'given' | 'all' = 'all',
): CheckedPart {
  const faults: PartFault[] = [];
  const values: Record<string, Value> = {};
  const fields = PART_FIELDS[kind];
  for (const key of Object.keys(given))
    if (!fields.some((f) => f.key === key)) faults.push({ key, message: partFaultSaid.notKnown(key) });
  for (const field of fields) {
    if (only === 'given' && !(field.key in given)) continue;
    const checked = checkField(field, given[field.key]);
    if ('message' in checked) faults.push({ key: field.key, message: checked.message });
    else values[field.key] = checked.value;
  }
  faults.push(...together(kind, values));
  return faults.length > 0 ? { values: null, faults } : { values, faults: null };
}

/** What must hold between the fields of one part. */
export function together(kind: PartKind, values: Readonly<Record<string, Value>>): PartFault[] {
  if (kind === 'site') {
    const { temperatureMin: min, temperatureMax: max } = values;
    if (typeof min === 'number' && typeof max === 'number' && min >= max)
      return [
        {
          key: 'temperatureMax',
          message: partFaultSaid.hottestNotAbove(written(max), written(min)),
        },
      ];
  }
  if (kind === 'sensor' && values.kind === 'poa_global' && values.plane === null)
    return [{ key: 'plane', message: partFaultSaid.sensorNeedsPlane }];
  return [];
}

/** Hours between the sun's time at a longitude and the clock of a time zone, at an instant; positive: the clock is ahead. */
export function zoneAheadOfSun(longitude: number, timeZone: string, atMs: number): number {
  const parts = new Intl.DateTimeFormat('en-GB', {
    timeZone,
    hourCycle: 'h23',
    year: 'numeric',
    month: 'numeric',
    day: 'numeric',
    hour: 'numeric',
    minute: 'numeric',
  }).formatToParts(new Date(atMs));
  const of = (type: string) => Number(parts.find((p) => p.type === type)?.value);
  const local = Date.UTC(of('year'), of('month') - 1, of('day'), of('hour'), of('minute'));
  const offsetH = Math.round((local - atMs) / 60_000) / 60;
  return ((((offsetH - longitude / 15 + 12) % 24) + 24) % 24) - 12;
}

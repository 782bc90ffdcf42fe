import { describe, expect, it } from 'vitest';
import { checkPart, isTimeZone, zoneAheadOfSun } from './check-part';
import { PART_DEFAULTS, PART_FIELDS, PART_KINDS } from './parts';

const REF = '7f6f0b6e-8f0f-4d8e-9a53-6a8f7c1d2e3f';

describe('the tables of fields', () => {
  it.each(PART_KINDS)('%s has a default for each field and none besides', (kind) => {
    expect(Object.keys(PART_DEFAULTS[kind]).sort()).toEqual(PART_FIELDS[kind].map((f) => f.key).sort());
  });
});

describe('a part as it was sent', () => {
  it('is kept trimmed, with lists in order and once', () => {
    const other = REF.replace('7', '1');
    const checked = checkPart('transmitter', { name: '  T1 ', zone: REF, strings: [REF, other, REF] });
    expect(checked.values).toEqual({ name: 'T1', zone: REF, strings: [other, REF] });
  });

  it.each([
    ['plane', { name: '', surfaceTilt: 10, surfaceAzimuth: 180, albedo: 0.2 }, 'name', 'type one'],
    [
      'plane',
      { name: 'S', surfaceTilt: 91, surfaceAzimuth: 180, albedo: 0.2 },
      'surfaceTilt',
      'from 0 to 90 °',
    ],
    ['plane', { name: 'S', surfaceTilt: null, surfaceAzimuth: 1, albedo: 0 }, 'surfaceTilt', 'type a number'],
    ['plane', { name: 'S', surfaceTilt: NaN, surfaceAzimuth: 1, albedo: 0 }, 'surfaceTilt', 'type a number'],
    ['initiator', { name: 'x'.repeat(81), place: '' }, 'name', '81 characters'],
    ['inverter', { name: 'W', inverterType: null, acPowerMax: 5000, inputs: 2.5 }, 'inputs', 'whole'],
    ['logger', { serial: 'no serial!' }, 'serial', 'Serial'],
    ['zone', { name: 'Z', initiator: null }, 'initiator', 'Choose the initiator'],
    ['zone', { name: 'Z', initiator: 'mine' }, 'initiator', 'choose one'],
    ['sensor', { kind: 'poa_global', logger: REF, number: 1, plane: null }, 'plane', 'needs the plane'],
    ['sensor', { kind: 'rain', logger: REF, number: 1, plane: null }, 'kind', 'choose one'],
    ['initiator', { name: 'I', place: '', colour: 'red' }, 'colour', 'not known'],
  ] as const)('%s %j is wrong at %s', (kind, given, key, words) => {
    const { faults } = checkPart(kind, given);
    expect(faults?.map((f) => f.key)).toEqual([key]);
    expect(faults?.[0]?.message).toContain(words);
  });

  it('an edit is checked by the fields that it has', () => {
    expect(checkPart('plane', { surfaceTilt: 30 }, 'given').values).toEqual({ surfaceTilt: 30 });
  });

  it('the hottest air lies above the coldest', () => {
    const given = {
      ...PART_DEFAULTS.site,
      name: 'X',
      latitude: 1,
      longitude: 2,
      temperatureMin: 20,
      temperatureMax: 10,
    };
    expect(checkPart('site', given).faults?.map((f) => f.key)).toEqual(['temperatureMax']);
    expect(checkPart('site', { ...given, temperatureMax: 21 }).faults).toBeNull();
  });
});

describe('time zones', () => {
  it('are those of the IANA database', () => {
    expect(isTimeZone('Europe/London')).toBe(true);
    expect(isTimeZone('UTC')).toBe(true);
    expect(isTimeZone('Europe/Lowfield')).toBe(false);
    expect(isTimeZone('')).toBe(false);
  });

  it.each([
    [0, 'UTC', 0],
    [-2.2, 'Europe/London', 0.15],
    [-105, 'America/Denver', 0],
    [151, 'Australia/Sydney', 0.93], // summer time in December
    [151, 'America/Denver', 6.93],
    [-179, 'Pacific/Auckland', 0.93],
  ])('at longitude %d the clock of %s is %d h ahead of the sun', (longitude, zone, hours) => {
    expect(zoneAheadOfSun(longitude, zone, Date.UTC(2026, 11, 1, 12))).toBeCloseTo(hours, 1);
  });
});

import { describe, expect, it } from 'vitest';
import {
  amperes,
  counted,
  countAtStart,
  energy,
  listed,
  number,
  percent,
  power,
  quantity,
  volts,
} from './numbers';
import { ago, clock, clockOrDate, duration, fullTime, localDay, zoneName } from './times';

const plain = (text: string) => text.replaceAll('\u00a0', ' ');

describe('numbers', () => {
  it.each([
    [power(0), '0 W'],
    [power(412), '412 W'],
    [power(31_240), '31.2 kW'],
    [power(999.7), '1.0 kW'],
    [power(381_000), '381 kW'],
    [power(1_240_000), '1.2 MW'],
    [power(-25), '−25 W'],
    [power(null), '–'],
    [energy(3100), '3.1 kWh'],
    [energy(38_400_000), '38.4 MWh'],
    [volts(8.4), '8.4 V'],
    [volts(458.2), '458 V'],
    [volts(-0.45), '−0.5 V'],
    [amperes(0.12), '0.12 A'],
    [percent(0.829, 1), '82.9 %'],
    [quantity(NaN, 'V'), '–'],
    [counted(1, 'unit'), '1 unit'],
    [counted(1240, 'unit'), '1,240 units'],
  ])('%s', (found, expected) => expect(plain(found)).toBe(expected));

  it('keeps a number and its unit on one line and never writes minus zero', () => {
    expect(volts(458)).toContain('\u00a0');
    expect(number(-0.01)).toBe('0');
  });

  it('begins a sentence with a word up to twelve', () => {
    expect([0, 2, 12, 13].map(countAtStart)).toEqual(['No', 'Two', 'Twelve', '13']);
    expect([listed([5]), listed([5, 9]), listed([3, 5, 9])]).toEqual(['5', '5 and 9', '3, 5 and 9']);
  });
});

describe('times', () => {
  const at = '2026-11-03T23:02:31Z';
  it('stand in the zone of the site', () => {
    expect(clock(at, 'Asia/Manila')).toBe('07:02');
    expect(localDay(at, 'Asia/Manila')).toBe('2026-11-04');
    expect(fullTime(at, 'Europe/Berlin')).toBe('4 Nov 2026, 00:02:31 CET');
    expect(zoneName(at, 'Asia/Kolkata')).toBe('GMT+5:30');
    expect(clock('2026-11-03T00:00:00Z', 'UTC')).toBe('00:00');
  });

  it('name the day only when it is another there', () => {
    expect(clockOrDate(at, '2026-11-04T02:00:00Z', 'Asia/Manila')).toBe('07:02');
    expect(clockOrDate(at, '2026-11-04T02:00:00Z', 'UTC')).toBe('3 Nov, 23:02');
    expect(clockOrDate(at, '2027-01-04T02:00:00Z', 'UTC')).toBe('3 November 2026');
  });

  it.each([
    [18, '18 s'],
    [41 * 60, '41 min'],
    [5 * 3600, '5 h'],
    [4 * 86_400, '4 days'],
  ])('%i seconds are %s', (seconds, words) => expect(duration(seconds)).toBe(words));

  it('are just now for five seconds', () => {
    expect(ago(at, '2026-11-03T23:02:34Z')).toBe('just now');
    expect(ago(at, '2026-11-03T23:43:31Z')).toBe('41 min ago');
  });
});

import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { instantsOf, offsetAt } from '../time/wall-clock';
import { looksLikeTime, readTime, saysDayFirst } from './times';

const iso = (
  text: string,
  zone = 'Europe/Berlin',
  dayFirst: boolean | null = null,
  clock: string | null = null,
) => {
  const read = readTime(text, clock, zone, dayFirst);
  if (read.kind === 'instant') return new Date(read.at * 1000).toISOString().slice(0, 19);
  return read.kind === 'twice'
    ? read.at.map((t) => new Date(t * 1000).toISOString().slice(0, 19))
    : read.kind;
};

describe('times in files', () => {
  it.each([
    ['2026-01-15 14:15', '2026-01-15T13:15:00'],
    ['2026-01-15T14:15:30.250', '2026-01-15T13:15:30'],
    ['2026-07-15 14:15', '2026-07-15T12:15:00'],
    ['2026/7/5 4:05', '2026-07-05T02:05:00'],
    ['2026-01-15T14:15Z', '2026-01-15T14:15:00'],
    ['2026-01-15 14:15 UTC', '2026-01-15T14:15:00'],
    ['2026-01-15 14:15+0530', '2026-01-15T08:45:00'],
    ['15.01.2026 14:15', '2026-01-15T13:15:00'],
    ['15.1.26 14:15:09', '2026-01-15T13:15:09'],
    ['1/15/2026 2:15 PM', '2026-01-15T13:15:00'],
    ['15/1/2026 12:15 am', '2026-01-14T23:15:00'],
    ['2026-01-15', '2026-01-14T23:00:00'],
    ['2026-01-15 24:00', '2026-01-15T23:00:00'],
    ['1768482900', '2026-01-15T13:15:00'],
    ['1768482900000', '2026-01-15T13:15:00'],
  ])('%s', (text, expected) => {
    expect(iso(text)).toBe(expected);
  });

  it('3/4/2026 is asked, and read as was said', () => {
    expect(readTime('3/4/2026 10:00', null, 'UTC', null)).toMatchObject({
      kind: 'fault',
      message: '"3/4/2026 10:00" can be meant two ways: day or month first',
    });
    expect(iso('3/4/2026 10:00', 'UTC', true)).toBe('2026-04-03T10:00:00');
    expect(iso('3/4/2026 10:00', 'UTC', false)).toBe('2026-03-04T10:00:00');
    expect([saysDayFirst('3/4/2026'), saysDayFirst('13/4/2026'), saysDayFirst('3/14/2026')]).toEqual([
      null,
      true,
      false,
    ]);
  });

  it('a date and a time of day may stand in two columns', () => {
    expect(iso('15.01.2026', 'Europe/Berlin', null, '14:15')).toBe('2026-01-15T13:15:00');
    expect(iso('15.01.2026', 'Europe/Berlin', null, 'noon')).toBe('fault');
  });

  // the clock of Central Europe: forward on 29 March 2026 at 01:00 UTC, back on 25 October 2026 at 01:00 UTC
  it('an hour that the clock skips never was; one that it repeats has two instants', () => {
    expect(readTime('2026-03-29 02:15', null, 'Europe/Berlin', null)).toMatchObject({
      kind: 'fault',
      message: expect.stringContaining('never was') as string,
    });
    expect(iso('2026-03-29 03:00')).toBe('2026-03-29T01:00:00');
    expect(iso('2026-10-25 02:15')).toEqual(['2026-10-25T00:15:00', '2026-10-25T01:15:00']);
    expect(iso('2026-10-25 03:00')).toBe('2026-10-25T02:00:00');
  });

  it.each([
    '',
    'yesterday',
    '31.02.2026 10:00',
    '2026-01-15 25:00',
    '2026-01-15 10:61',
    '13/13/2026',
    '45231.25',
  ])('"%s" is no time', (text) => {
    expect(['fault', 'empty']).toContain(iso(text, 'UTC', true));
  });

  it('tells a time from other cells', () => {
    expect(['2026-01-15 14:15', '1/2/2026', '1768482900'].every(looksLikeTime)).toBe(true);
    expect(['A1', '410,5', '17', 'string'].some(looksLikeTime)).toBe(false);
  });
});

describe('the wall clock', () => {
  const zones = [
    'Europe/Berlin',
    'America/Sao_Paulo',
    'Asia/Karachi',
    'Australia/Lord_Howe',
    'UTC',
    'America/Chicago',
  ];
  it('every instant is found again from what the clock shows', () => {
    fc.assert(
      fc.property(
        fc.integer({ min: 946_684_800, max: 2_000_000_000 }),
        fc.constantFrom(...zones),
        (atS, zone) => {
          const at = atS * 1000;
          expect(instantsOf(at + offsetAt(at, zone), zone)).toContain(at);
        },
      ),
    );
  });
});

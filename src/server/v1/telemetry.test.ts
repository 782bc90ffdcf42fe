import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { frameOf, unitFramesOf, windowMs, windows } from './telemetry';

const HOUR = 3_600_000;
const DAY = 24 * HOUR;

describe('windows of a stream', () => {
  it('cover the span once, without a gap, none longer than asked for', () => {
    fc.assert(
      fc.property(
        fc.date({ min: new Date('2020-01-01'), max: new Date('2030-01-01'), noInvalidDate: true }),
        fc.integer({ min: 1, max: 9 * DAY }),
        fc.integer({ min: HOUR, max: 31 * DAY }),
        (from, span, length) => {
          const to = new Date(from.getTime() + span);
          const all = [...windows(from, to, length)];
          expect(all[0]?.from).toEqual(from);
          expect(all.at(-1)?.to).toEqual(to);
          expect(all.every((w) => w.to > w.from && w.to.getTime() - w.from.getTime() <= length)).toBe(true);
          expect(all.slice(1).map((w) => w.from)).toEqual(all.slice(0, -1).map((w) => w.to));
        },
      ),
    );
  });
  it('hold some fifty thousand rows, an hour at least', () => {
    expect(windowMs(60, DAY)).toBe(DAY);
    expect(windowMs(400 * 60, DAY)).toBe(2 * HOUR);
    expect(windowMs(10_000 * 60, DAY)).toBe(HOUR);
    expect(windowMs(0, DAY)).toBe(DAY);
  });
});

describe('a report', () => {
  const names = new Map([[7, { number: 7, id: 'the-id', name: 'A1' }]]);
  const row = {
    number: 7,
    at: new Date('2026-11-03T10:15:00Z'),
    voltageSum: 7801,
    powerSum: 6240,
    voltage: [3900, null, 3901],
    voltageIn: null,
    current: [8000, null, 7990],
    power: null,
    temperature: [405, null, 400],
    signal: [-60, null, -61],
    state: [1, null, 2],
  };
  it('goes out in volts, amperes, watts and degrees, with claims in words', () => {
    expect(frameOf(names, row)).toEqual({
      at: '2026-11-03T10:15:00.000Z',
      stringId: 'the-id',
      string: 'A1',
      voltage: 78.01,
      power: 624,
      units: {
        voltage: [39, null, 39.01],
        voltageIn: null,
        current: [8, null, 7.99],
        power: null,
        temperature: [40.5, null, 40],
        signal: [-60, null, -61],
        claim: ['passing', null, 'shutdown'],
      },
    });
  });
  it('by unit leaves out who did not report', () => {
    expect(unitFramesOf(names, row).map((u) => [u.position, u.voltage, u.claim])).toEqual([
      [1, 39, 'passing'],
      [3, 39.01, 'shutdown'],
    ]);
  });
});

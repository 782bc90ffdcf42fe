import { describe, expect, it } from 'vitest';
import type { Item } from './batch';
import { eventTime, Reports, RETURN_WITHIN_S } from './progress';

const NOW = 1_750_000_000;
const served = (spokeS: number, newestS: number, waiting = false) =>
  ({ served: true, spokeS, newestS, waiting }) as const;

describe('how far the reports of a logger have come', () => {
  it('to now, while it reports in time', () => {
    expect(eventTime(served(NOW - 2, NOW - 70), 60, NOW)).toBe(NOW);
  });
  it('to its newest report, while it brings what it kept', () => {
    expect(eventTime(served(NOW - 1, NOW - 7200), 60, NOW)).toBe(NOW - 7200);
  });
  it('to its newest report, once that is so old that its units would be silent by now', () => {
    expect(eventTime(served(NOW - 1, NOW - 179), 60, NOW)).toBe(NOW);
    expect(eventTime(served(NOW - 1, NOW - 180), 60, NOW)).toBe(NOW - 180);
  });
  it('to the newest that was judged, while more of it waits, however long the database takes', () => {
    expect(eventTime(served(NOW - 1, NOW - 100, true), 60, NOW)).toBe(NOW - 100);
    expect(eventTime(served(NOW - 600, NOW - 700, true), 60, NOW)).toBe(NOW - 700);
    expect(eventTime(served(NOW - 600, 0, true), 60, NOW)).toBeNull();
  });
  it('to now, when it is connected and has nothing to say', () => {
    expect(eventTime(served(NOW - 91, NOW - 7200), 60, NOW)).toBe(NOW);
  });
  it("can't be said just after it connected, or before it had the time to come back", () => {
    expect(eventTime(served(NOW - 1, 0), 60, NOW)).toBeNull();
    expect(eventTime({ served: false, sinceS: NOW - RETURN_WITHIN_S + 1 }, 60, NOW)).toBeNull();
  });
  it('to now, when it stays away', () => {
    expect(eventTime({ served: false, sinceS: NOW - RETURN_WITHIN_S }, 60, NOW)).toBe(NOW);
  });
});

describe('what became of the reports', () => {
  const report = (loggerId: number, ...at: number[]): Pick<Item, 'loggerId' | 'work'> => ({
    loggerId,
    work: {
      kind: 'inputs',
      rows: at.map((s) => ({ at: s, siteId: 1, inputId: 1, voltage: null, current: null })),
    },
  });
  it('a logger waits until the last of its reports was judged, and has come as far as its newest', () => {
    const reports = new Reports();
    expect(reports.of(1)).toEqual({ newestS: 0, waiting: false });
    const [a, b] = [report(1, NOW, NOW - 60), report(1, NOW - 30)];
    reports.joined(a);
    reports.joined(b);
    expect(reports.of(1)).toEqual({ newestS: 0, waiting: true });
    reports.left(a);
    expect(reports.of(1)).toEqual({ newestS: NOW, waiting: true });
    expect(reports.of(2)).toEqual({ newestS: 0, waiting: false });
    reports.left(b);
    expect(reports.of(1)).toEqual({ newestS: NOW, waiting: false });
  });
});

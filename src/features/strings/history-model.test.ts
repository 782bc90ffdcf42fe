import { describe, expect, it } from 'vitest';
import { strokeOf } from '../../components/charts/model';
import type { StringHistory } from '../../schemas/api/string';
import { differenceChart, historyChart, laidOver, refined, unitsChart } from './history-model';

const DAY = 86_400;
const MIDNIGHT = Date.UTC(2026, 5, 3) / 1000;
const history = (from: number, more: Partial<StringHistory> = {}): StringHistory => ({
  range: 'day',
  quantity: 'voltage',
  unit: 'V',
  resolution: 'minute',
  from,
  to: from + DAY,
  timeZone: 'UTC',
  at: [from + 36_000, from + 36_060, from + 36_120],
  values: [540, null, 542],
  low: [540, null, 542],
  high: [540, null, 542],
  energy: [],
  expected: { at: [], low: [], high: [], from: '' },
  middle: { at: [from + 36_000], values: [550], strings: 3 },
  siblings: [{ id: 'a', name: 'B2', at: [from + 36_000], values: [551] }],
  imported: { at: [], values: [] },
  nights: [],
  marks: [],
  notes: [],
  ...more,
});
const names = (h: StringHistory, siblings: 'middle' | 'each' | 'off') =>
  historyChart(h, 'x', { siblings, overlay: null, notes: [] }).lines.map((l) => l.name);

describe('the history as a chart', () => {
  it('stands against the middle of its siblings, each of them, or none', () => {
    const h = history(MIDNIGHT);
    expect(names(h, 'middle')).toEqual(['Voltage', 'Siblings, middle']);
    expect(names(h, 'each')).toEqual(['Voltage', 'B2']);
    expect(names(h, 'off')).toEqual(['Voltage']);
  });

  it('marks what was imported as a line of its own', () => {
    const h = history(MIDNIGHT, { imported: { at: [MIDNIGHT], values: [500] } });
    expect(historyChart(h, 'x').lines[1]).toMatchObject({ name: 'Imported', dashed: true, tone: 'slate' });
  });

  it('lays another day over the same hours of the clock, also where clocks were changed between', () => {
    const later = history(MIDNIGHT + 7 * DAY);
    expect(laidOver(later, history(MIDNIGHT))).toEqual(later.at);
    // 25 October 2026 is the day on which clocks go back in Lisbon; ten in the morning stays ten in the morning
    const timeZone = 'Europe/Lisbon';
    const before = history(Date.UTC(2026, 9, 23, 23) / 1000, { timeZone });
    const after = history(Date.UTC(2026, 9, 26) / 1000, { timeZone });
    expect(laidOver(after, before)).toEqual(after.at);
  });

  it('takes a difference only where both tell', () => {
    const other = history(MIDNIGHT, { values: [500, 501, null] });
    const chart = differenceChart(history(MIDNIGHT), { name: 'B2', history: other }, 'x');
    expect(chart.lines[0]?.values).toEqual([40, null, null]);
  });

  it('takes the finer part into the whole, siblings and middle with it', () => {
    const part = history(MIDNIGHT, {
      resolution: 'minute',
      from: MIDNIGHT + 36_000,
      to: MIDNIGHT + 36_200,
    });
    const whole = history(MIDNIGHT, {
      resolution: 'quarter',
      at: [MIDNIGHT + 35_000, MIDNIGHT + 36_100, MIDNIGHT + 37_000],
      values: [1, 2, 3],
      middle: { at: [MIDNIGHT + 36_100, MIDNIGHT + 37_000], values: [2, 3], strings: 3 },
    });
    const r = refined(whole, part);
    expect(r.values).toEqual([1, 540, null, 542, 3]);
    expect(r.middle.values).toEqual([550, 3]);
    expect(r.at).toEqual([...r.at].sort((a, b) => a - b));
  });
});

describe('chosen units as a chart', () => {
  it.each([
    ['all stuck', 'rust'],
    ['all well', undefined],
  ] as const)('tells eight apart, %s', (_, tone) => {
    const positions = [1, 2, 3, 4, 5, 6, 7, 8];
    const chart = unitsChart(
      {
        quantity: 'voltage',
        unit: 'V',
        side: 'output',
        range: 'day',
        resolution: 'minute',
        imported: false,
        from: MIDNIGHT,
        to: MIDNIGHT + DAY,
        timeZone: 'UTC',
        at: [MIDNIGHT + 36_000],
        lines: positions.map((position) => ({ position, values: [0.6] })),
        moves: [],
        nights: [],
      },
      'x',
      new Map(tone ? positions.map((p) => [p, tone]) : []),
    );
    const looks = chart.lines.map((l) => JSON.stringify([l.tone, strokeOf(l)]));
    expect(new Set(looks).size).toBe(8);
    if (tone) expect(chart.lines.every((l) => l.tone === tone)).toBe(true);
  });
});

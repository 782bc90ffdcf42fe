import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { TOKENS, type Colours } from './colours';
import { fromWall, toWall } from './local-time';
import { valueAt, type ChartModel } from './model';
import { chartOptions, labelsOf, readout } from './options';

const colours = Object.fromEntries(TOKENS.map((t) => [t, `rgb(${t})`])) as Colours;
const FROM = Date.UTC(2026, 5, 3) / 1000;
const model = (more: Partial<ChartModel> = {}): ChartModel => ({
  title: 'String voltage',
  unit: 'V',
  digits: 0,
  timeZone: 'UTC',
  from: FROM,
  to: FROM + 86_400,
  lines: [
    {
      name: 'Voltage',
      at: [FROM, FROM + 60, FROM + 120, FROM + 600],
      values: [540, 541, null, 545],
      tone: 'ink',
    },
  ],
  nights: [],
  marks: [],
  ...more,
});
const seriesOf = (m: ChartModel, width = 900) =>
  (chartOptions(m, colours, { width, height: 330 }) as { series: Record<string, unknown>[] }).series;

describe('the wall clock of a site', () => {
  it.each(['Europe/London', 'America/St_Johns', 'Asia/Kathmandu', 'Pacific/Chatham', 'UTC'])(
    'goes there and back in %s',
    (timeZone) => {
      fc.assert(
        fc.property(fc.integer({ min: 1_700_000_000, max: 1_900_000_000 }), (at) => {
          const back = fromWall(toWall(at, timeZone), timeZone);
          // the hour that a clock repeats in autumn can't be told apart
          expect([0, 3600]).toContain(Math.abs(back - at));
          return true;
        }),
        { numRuns: 200 },
      );
    },
  );

  it('reads as the local hour in UTC', () => {
    const noonUtc = Date.UTC(2026, 6, 1, 12) / 1000;
    expect(new Date(toWall(noonUtc, 'Europe/Berlin')).getUTCHours()).toBe(14);
    expect(new Date(toWall(noonUtc, 'Asia/Kolkata')).toISOString()).toBe('2026-07-01T17:30:00.000Z');
  });
});

describe('a chart', () => {
  it('draws a gap as a gap', () => {
    const line = seriesOf(model()).find((s) => s.id === 'line Voltage');
    expect(line?.connectNulls).toBe(false);
    expect((line?.data as [number, number | null][])[2]?.[1]).toBeNull();
  });

  it('reads out the value, the band and what happened', () => {
    const m = model({
      band: { name: 'Expected', at: [FROM], low: [530], high: [560] },
      marks: [{ from: FROM, to: FROM + 300, words: 'Shutdown by the initiator', tone: 'plum' }],
    });
    const r = readout(m, FROM + 60);
    expect(r.title).toBe('00:01');
    expect(r.rows.map(([name, value]) => `${name} ${value.replaceAll('\u00a0', ' ')}`)).toEqual([
      'Voltage 541 V',
      'Expected 530 to 560 V',
    ]);
    expect(r.marks).toEqual(['Shutdown by the initiator']);
    expect(readout(m, FROM + 130).rows[0]?.[1]).toBe('nothing reported');
  });

  it('lays the words of marks so that none covers another, the grave ones first', () => {
    fc.assert(
      fc.property(
        fc.array(
          fc.record({
            from: fc.integer({ min: 0, max: 86_000 }),
            tone: fc.constantFrom('rust' as const, 'slate' as const, 'crimson' as const),
            words: fc.string({ minLength: 3, maxLength: 60 }),
          }),
          { maxLength: 30 },
        ),
        (marks) => {
          const m = model({ marks: marks.map((k) => ({ ...k, from: FROM + k.from, to: null })) });
          const labels = labelsOf(m, 830, 238);
          const px = (at: number) => ((at - FROM) / 86_400) * 830;
          const boxes = labels.map((l) => {
            const long = l.words.length * 6.6;
            const at = px(l.mark.from);
            return l.side === 'left'
              ? { y: l.y, from: at - long, to: at }
              : { y: l.y, from: at, to: at + long };
          });
          boxes.forEach((a, i) => {
            expect(a.from).toBeGreaterThanOrEqual(0);
            expect(a.to).toBeLessThanOrEqual(830);
            for (const b of boxes.slice(i + 1))
              expect(a.y !== b.y || a.to <= b.from || b.to <= a.from).toBe(true);
          });
          const gravest = marks.filter((k) => k.tone === 'crimson');
          if (gravest.length > 0) expect(labels[0]?.mark.tone).toBe('crimson');
        },
      ),
    );
  });

  it('leaves the words of marks out on a phone', () => {
    const m = model({ marks: [{ from: FROM + 30_000, to: null, words: 'stuck', tone: 'rust' }] });
    const points = (width: number) => (seriesOf(m, width)[0]?.markPoint as { data: unknown[] }).data;
    expect(points(900)).toHaveLength(1);
    expect(points(358)).toHaveLength(0);
  });

  it('finds the newest value at or before an instant', () => {
    const line = { at: [10, 20, 30], values: [1, 2, 3] };
    expect([5, 10, 29, 30, 99].map((t) => valueAt(line, t))).toEqual([null, 1, 2, 3, 3]);
    expect(valueAt(line, 99, 60)).toBeNull();
    expect(valueAt({ at: [], values: [] }, 5)).toBeNull();
  });
});

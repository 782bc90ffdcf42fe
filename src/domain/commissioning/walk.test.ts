import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { ordered, stopsOf, walkLength, type WalkSlot, type WalkString } from './walk';

const slot = (position: number, more: Partial<WalkSlot> = {}): WalkSlot => ({
  position,
  serial: `U-${position}`,
  roofPlace: `first row, ${position}`,
  roofX: position,
  roofY: 0,
  state: 'passing',
  verdict: 'ok',
  ...more,
});
const string = (slots: WalkSlot[], more: Partial<WalkString> = {}): WalkString => ({
  id: 'b3',
  name: 'B3',
  slots,
  finding: null,
  ...more,
});
const after = { rollCalled: true, answered: new Set<string>() };

describe('stops', () => {
  it('are the exceptions and nothing else', () => {
    const stops = stopsOf(
      [
        string([
          slot(1),
          slot(2, { state: 'shutdown', verdict: 'stuck' }),
          slot(3, { verdict: 'not_shutting_down' }),
          slot(4, { state: 'silent' }),
          slot(5, { state: 'unheard' }),
          slot(6, { serial: null, state: null }),
          slot(7, { state: 'dark' }),
          slot(8, { state: 'shutdown' }),
          slot(9, { verdict: 'unconfirmed' }),
        ]),
      ],
      after,
    );
    expect(stops.map((s) => [s.key, s.kind])).toEqual([
      ['B3-2', 'stuck'],
      ['B3-3', 'not_shutting_down'],
      ['B3-4', 'silent'],
      ['B3-5', 'unheard'],
      ['B3-6', 'unplaced'],
    ]);
  });
  it('unheard units are none before the roll call, and none once they have answered', () => {
    const strings = [string([slot(1, { state: 'unheard' }), slot(2, { state: 'unheard' })])];
    expect(stopsOf(strings, { ...after, rollCalled: false })).toEqual([]);
    expect(stopsOf(strings, { ...after, answered: new Set(['U-1']) }).map((s) => s.key)).toEqual(['B3-2']);
  });
  it('a string that is live with its positions unknown is one stop', () => {
    const silent = [slot(1, { state: null, verdict: null }), slot(2, { state: null, verdict: null })];
    expect(stopsOf([string(silent, { finding: 'not_shutting_down' })], after)).toMatchObject([
      { key: 'B3', position: null, kind: 'not_shutting_down', at: { x: 1, y: 0 } },
    ]);
    expect(stopsOf([string(silent, { finding: 'stuck_positions_unknown' })], after)).toMatchObject([
      { key: 'B3', kind: 'stuck' },
    ]);
  });
});

describe('the order of stops', () => {
  const point = fc.record({ x: fc.integer({ min: 0, max: 60 }), y: fc.integer({ min: 0, max: 40 }) });
  const named = (points: ({ x: number; y: number } | null)[]) =>
    points.map((at, i) => ({ key: `S${i}`, at }));
  const permutations = <T>(list: T[]): T[][] =>
    list.length < 2
      ? [list]
      : list.flatMap((x, i) =>
          permutations([...list.slice(0, i), ...list.slice(i + 1)]).map((p) => [x, ...p]),
        );

  it('property: visits every stop once, is never longer than the order given, and keeps those without a place last', () => {
    fc.assert(
      fc.property(fc.array(fc.option(point), { maxLength: 30 }), (points) => {
        const stops = named(points);
        const path = ordered(stops);
        expect(path.map((s) => s.key).sort()).toEqual(stops.map((s) => s.key).sort());
        expect(walkLength(path)).toBeLessThanOrEqual(walkLength(stops) + 1e-6);
        const first = path.findIndex((s) => s.at === null);
        if (first >= 0) expect(path.slice(first).every((s) => s.at === null)).toBe(true);
      }),
    );
  });

  it('property: of up to six stops the path is within a tenth of the shortest of all', () => {
    fc.assert(
      fc.property(fc.array(point, { minLength: 2, maxLength: 6 }), (points) => {
        const stops = named(points);
        const shortest = Math.min(...permutations(stops).map(walkLength));
        expect(walkLength(ordered(stops))).toBeLessThanOrEqual(shortest * 1.1 + 1e-6);
      }),
      { numRuns: 40 },
    );
  });

  it('along a row and back along the next', () => {
    const stops = named([
      { x: 0, y: 0 },
      { x: 20, y: 2 },
      { x: 10, y: 0 },
      { x: 0, y: 2 },
      { x: 20, y: 0 },
      { x: 10, y: 2 },
    ]);
    expect(walkLength(ordered(stops))).toBeCloseTo(26, 6);
  });
});

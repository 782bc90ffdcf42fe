import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import {
  judge,
  nextGap,
  nextString,
  placeOf,
  progressWords,
  readKept,
  requestOf,
  withEntries,
  type Entry,
  type WalkString,
} from './model';

const string = (name: string, ...serials: (string | null)[]): WalkString => ({
  id: `id-${name}`,
  name,
  unitType: 'Watcher 15',
  slots: serials.map((serial, i) => ({ position: i + 1, serial, roofPlace: '' })),
});
const A = string('A1', 'UN-0001', null, 'UN-0003', null);
const B = string('B1', 'UN-0011', 'UN-0012');
const C = string('C1', null);
const ALL = [A, B, C];
const entry = (some: Partial<Entry>): Entry => ({
  key: 'k',
  string: A.id,
  position: 2,
  serial: 'UN-0002',
  expected: null,
  move: false,
  reason: '',
  at: '2026-12-01T12:00:00.000Z',
  clash: null,
  ...some,
});

describe('a walk', () => {
  it('goes from gap to gap, and round to those left out', () => {
    expect(nextGap(A, 0)).toBe(2);
    expect(nextGap(A, 2)).toBe(4);
    expect(nextGap(A, 4)).toBe(2);
    expect(nextGap(B, 0)).toBeNull();
    expect(nextString(ALL, A.id)).toBe(C);
    expect(nextString(ALL, C.id)).toBe(A);
    expect(nextString([B], B.id)).toBeNull();
  });
  it('says how far a string is', () => {
    expect(progressWords(A)).toBe('2 of 4 read, two to go');
    expect(progressWords(B)).toBe('All 2 serials of B1 are read');
    expect(progressWords(C)).toBe('The one serial of C1 is still to be read');
  });
});

describe('a serial read', () => {
  it('is judged before anybody is asked', () => {
    expect(judge(ALL, A, 2, ' un-0099 ')).toEqual({ kind: 'keep', serial: 'UN-0099' });
    expect(judge(ALL, A, 1, 'UN-0001')).toEqual({ kind: 'same' });
    expect(judge(ALL, A, 2, 'UN-0012')).toEqual({
      kind: 'elsewhere',
      serial: 'UN-0012',
      place: 'B1, position 2',
    });
    expect(judge(ALL, A, 1, 'UN-0099')).toEqual({ kind: 'occupied', serial: 'UN-0099', now: 'UN-0001' });
    expect(judge(ALL, A, 2, '').kind).toBe('fault');
    expect(judge(ALL, A, 2, 'UN 99')).toMatchObject({ kind: 'fault', suggestion: 'UN99' });
  });
});

describe('what waits on the phone', () => {
  it('stands in its slot already, and a moved unit no longer where it was', () => {
    const shown = withEntries(ALL, [
      entry({}),
      entry({ key: 'm', position: 4, serial: 'UN-0012', move: true }),
    ]);
    expect(shown[0]?.slots.map((s) => s.serial)).toEqual(['UN-0001', 'UN-0002', 'UN-0003', 'UN-0012']);
    expect(shown[1]?.slots.map((s) => s.serial)).toEqual(['UN-0011', null]);
    expect(placeOf(shown, 'UN-0012')).toMatchObject({ position: 4 });
  });
  it('does not stand there where the server refused it', () => {
    const clash = { kind: 'slot' as const, message: 'somebody else' };
    expect(withEntries(ALL, [entry({ clash })])[0]?.slots[1]?.serial).toBeNull();
  });
  it('is sent with what was seen, when and where; taken back, a unit returns to where it was', () => {
    expect(requestOf(entry({ reason: 'Misread' }))).toEqual({
      changes: [{ slot: { string: A.id, position: 2 }, serial: 'UN-0002', expected: null }],
      move: false,
      reason: 'Misread',
      source: 'on_site',
      at: '2026-12-01T12:00:00.000Z',
    });
    const { expected: _seen, ...whatever } = entry({
      serial: null,
      also: { string: B.id, position: 2, serial: 'UN-0012' },
    });
    expect(requestOf(whatever).changes).toEqual([
      { slot: { string: A.id, position: 2 }, serial: null },
      { slot: { string: B.id, position: 2 }, serial: 'UN-0012' },
    ]);
  });
  it('comes back after a reload as it was, and nothing else does', () => {
    const kept = [entry({}), entry({ key: 'other', position: 4 })];
    expect(readKept(JSON.stringify(kept))).toEqual(kept);
    fc.assert(
      fc.property(fc.oneof(fc.string(), fc.json()), (text) => {
        for (const e of readKept(text)) expect(e).toHaveProperty('serial');
      }),
    );
    expect(readKept(null)).toEqual([]);
  });
});

import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import {
  planPlacements,
  slotKey,
  type KnownUnit,
  type PlaceChange,
  type StandingSlot,
} from './plan-placements';

const SERIALS = ['UNIT-1', 'UNIT-2', 'UNIT-3', 'UNIT-4', 'UNIT-5', 'UNIT-6'];

/** A string of four slots; `serials[i]` sits at position i + 1. */
function scene(serials: readonly (string | null)[]) {
  const slots = new Map<string, StandingSlot>();
  const units = new Map<string, KnownUnit>();
  serials.forEach((serial, i) => {
    const unit = serial === null ? null : { placementId: 100 + i, unitId: 200 + i, serial };
    slots.set(slotKey('s', i + 1), {
      slotId: i + 1,
      stringId: 1,
      stringName: 'S',
      position: i + 1,
      unitTypeId: 7,
      unitTypeName: 'Seven',
      unit,
      sinceMs: 1000,
    });
    if (serial !== null && unit)
      units.set(serial, {
        unitId: unit.unitId,
        serial,
        unitTypeId: 7,
        unitTypeName: 'Seven',
        sits: {
          placementId: unit.placementId,
          slotId: i + 1,
          siteId: 1,
          siteName: 'Site',
          stringId: 1,
          stringName: 'S',
          position: i + 1,
        },
        sinceMs: 1000,
      });
  });
  return { slots, units };
}
const plan = (serials: readonly (string | null)[], changes: readonly PlaceChange[], more: object = {}) =>
  planPlacements({ siteId: 1, changes, ...scene(serials), atMs: 5000, move: false, retype: false, ...more });
const change = (position: number, serial: string | null): PlaceChange => ({
  slot: { string: 's', position },
  serial,
});

describe('a batch of placements', () => {
  it('a swap closes both and opens both', () => {
    const { faults, closes, opens, moves, gone } = plan(
      ['UNIT-1', 'UNIT-2'],
      [change(1, 'UNIT-2'), change(2, 'UNIT-1')],
    );
    expect(faults).toEqual([]);
    expect(closes.sort()).toEqual([100, 101]);
    expect(opens.map((o) => [o.slotId, o.serial])).toEqual([
      [1, 'UNIT-2'],
      [2, 'UNIT-1'],
    ]);
    expect(moves.map((m) => [m.kind, m.from])).toEqual([
      ['moved', 'S-2'],
      ['moved', 'S-1'],
    ]);
    expect(gone).toEqual([]);
  });

  it('words for none empty the slot', () => {
    expect(plan(['UNIT-1'], [change(1, ' n/a ')]).moves.map((m) => m.kind)).toEqual(['removed']);
  });

  it('falls just after the newest change where both happen at once, and refuses what is older', () => {
    expect(plan(['UNIT-1'], [change(1, null)], { atMs: 1000 }).atMs).toBe(1001);
    expect(plan(['UNIT-1'], [change(1, null)], { atMs: -5000 }).faults.map((f) => f.kind)).toEqual(['stale']);
  });

  it('whatever is asked for: without faults every unit sits in one slot, and each slot is as it was asked to be', () => {
    const serial = fc.option(fc.constantFrom(...SERIALS), { nil: null });
    const standing = fc.uniqueArray(serial, {
      minLength: 4,
      maxLength: 4,
      comparator: (a, b) => a !== null && a === b,
    });
    const asked = fc.array(fc.record({ position: fc.integer({ min: 1, max: 5 }), serial }), { maxLength: 6 });
    fc.assert(
      fc.property(standing, asked, fc.boolean(), (before, changes, move) => {
        const p = plan(
          before,
          changes.map((c) => change(c.position, c.serial)),
          { move },
        );
        if (p.faults.length > 0) return true;
        const closed = new Set(p.closes);
        if (closed.size !== p.closes.length) return false;
        const after = before.map((s, i) => (closed.has(100 + i) ? null : s));
        for (const open of p.opens) {
          if (after[open.slotId - 1] !== null) return false;
          after[open.slotId - 1] = open.serial;
        }
        const units = after.filter((s) => s !== null);
        return (
          new Set(units).size === units.length &&
          changes.every((c) => after[c.position - 1] === c.serial) &&
          // what nobody named stays, unless its unit was taken away on purpose
          after.every(
            (s, i) => changes.some((c) => c.position === i + 1) || s === before[i] || (move && s === null),
          )
        );
      }),
    );
  });
});

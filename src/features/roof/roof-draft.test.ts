import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { outlineArea } from '../../domain/commissioning/roof/outline';
import type { RoofPlan, RoofString } from '../../schemas/api/roof';
import {
  begin,
  change,
  changedStrings,
  draftOf,
  insertPoint,
  rectangle,
  redo,
  remarks,
  saveOf,
  undo,
  type Draft,
} from './draft';
import { formFor, readLaying } from './laying-form';

const string = (name: string, slots = 4): RoofString => ({
  id: `00000000-0000-4000-8000-0000000000${name.charCodeAt(0)}`,
  name,
  plane: 'South roof',
  surfaceTilt: 20,
  surfaceAzimuth: 180,
  moduleLength: 1.72,
  moduleWidth: 1.13,
  version: `v-${name}`,
  slots: Array.from({ length: slots }, (_, i) => ({
    position: i + 1,
    roofX: null,
    roofY: null,
    roofPlace: '',
  })),
});
const PLAN: RoofPlan = {
  site: { id: '00000000-0000-4000-8000-000000000001', name: 'Trial', stage: 'commissioning' },
  outline: [
    [0, 0],
    [20, 0],
    [20, 10],
    [0, 10],
  ],
  outlineVersion: 'v0',
  strings: [string('A'), string('B'), string('C')],
};
const [A, B] = PLAN.strings as [RoofString, RoofString, RoofString];

describe('the form', () => {
  it('begins along the eaves and lays one string or several after each other', () => {
    const form = { ...formFor(A, { x: 2, y: 8 }), perRow: '2', strings: '2' };
    expect(form.direction).toBe('90');
    const read = readLaying(form, PLAN.strings);
    if (read.faults) throw new Error('faults');
    expect(read.laid.map((l) => l.string.name)).toEqual(['A', 'B']);
    expect(read.laid[0]?.slots.map((s) => s.roofPlace)).toEqual([
      'upper row, first from the west end',
      'upper row, second from the west end',
      'lower row, second from the west end',
      'lower row, first from the west end',
    ]);
    // two rows of the first, then the second string
    expect(read.laid[1]?.slots[0]?.roofY).toBeCloseTo(8 - 2 * 1.74 * Math.cos((20 * Math.PI) / 180), 3);
    expect(read.next.y).toBeCloseTo(8 - 4 * 1.74 * Math.cos((20 * Math.PI) / 180), 2);
  });
  it('names each field that is wrong', () => {
    const read = readLaying({ ...formFor(A, null), direction: '400', perRow: '1,5' }, PLAN.strings);
    expect(Object.keys(read.faults ?? {})).toEqual(['startX', 'startY', 'direction', 'perRow']);
  });
});

describe('a drawing', () => {
  it('sends what has changed, with what it began from', () => {
    const laid = readLaying({ ...formFor(A, { x: 2, y: 8 }) }, [A]);
    if (laid.faults) throw new Error('faults');
    const draft: Draft = { ...draftOf(PLAN), slots: { [A.id]: laid.laid[0]!.slots, [B.id]: B.slots } };
    expect(changedStrings(PLAN, draft).map((s) => s.name)).toEqual(['A']);
    expect(saveOf(PLAN, draft, 'why')).toEqual({
      outline: null,
      strings: [{ id: A.id, seen: 'v-A', slots: laid.laid[0]?.slots }],
      reason: 'why',
    });
    expect(saveOf(PLAN, { ...draft, outline: [] }, '').outline).toEqual({ points: [], seen: 'v0' });
  });
  it('goes back and forth', () => {
    fc.assert(
      fc.property(fc.array(fc.integer({ min: 0, max: 9 }), { maxLength: 20 }), (steps) => {
        let drawing = begin(draftOf(PLAN));
        for (const n of steps) drawing = change(drawing, { outline: [[n, n]] });
        const last = drawing.now;
        for (const _ of steps) drawing = undo(drawing);
        expect(drawing.now).toEqual(draftOf(PLAN));
        for (const _ of steps) drawing = redo(drawing);
        expect(drawing.now).toEqual(last);
      }),
    );
  });
  it('takes a drag back as one step', () => {
    let drawing = change(begin(draftOf(PLAN)), { outline: [[1, 1]] });
    drawing = change(drawing, { outline: [[2, 2]] }, true);
    expect(undo(drawing).now).toEqual(draftOf(PLAN));
  });
  it('remarks on modules beyond the edge and upon each other', () => {
    const at = (s: RoofString, y: number) =>
      s.slots.map((slot, i) => ({ ...slot, roofX: 16 + 1.2 * i, roofY: y }));
    expect(remarks(PLAN, draftOf(PLAN))).toEqual([]);
    expect(remarks(PLAN, { ...draftOf(PLAN), slots: { [A.id]: at(A, 5), [B.id]: at(B, 5.1) } })).toEqual([
      'A and B lie upon each other.',
    ]);
    expect(remarks(PLAN, { ...draftOf(PLAN), slots: { [A.id]: at(A, 11) } })).toEqual([
      '4 modules of A lie outside the outline.',
    ]);
  });
});

describe('an outline', () => {
  it('gets a point where its nearest side is', () => {
    expect(insertPoint(PLAN.outline, [10, -1])[1]).toEqual([10, -1]);
    expect(insertPoint(PLAN.outline, [-1, 5])[4]).toEqual([-1, 5]);
    expect(insertPoint([[0, 0]], [3, 3])).toEqual([
      [0, 0],
      [3, 3],
    ]);
  });
  it('is a rectangle of its size, however turned', () => {
    fc.assert(
      fc.property(fc.integer({ min: 0, max: 359 }), (turned) => {
        expect(outlineArea(rectangle(30, 12, turned))).toBeCloseTo(360, 0);
      }),
    );
    expect(rectangle(30, 12, 0)).toEqual([
      [0, 0],
      [30, 0],
      [30, 12],
      [0, 12],
    ]);
  });
});

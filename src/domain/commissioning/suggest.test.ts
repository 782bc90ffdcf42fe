import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { misreading, serialDistance, suggestPlaces, type SuggestString } from './suggest';

const string = (
  name: string,
  serials: (string | null)[],
  more: { unheard?: number[]; gateway?: string; signal?: number } = {},
): SuggestString => ({
  id: name,
  name,
  slots: serials.map((serial, i) => {
    const heard = serial !== null && !more.unheard?.includes(i + 1);
    return {
      position: i + 1,
      serial,
      heard,
      gateway: heard ? (more.gateway ?? 'gateway 1') : null,
      signal: heard ? (more.signal ?? -65) + (i % 3) : null,
    };
  }),
});
const stranger = (serial: string, gateway = 'gateway 1', signal = -64) => ({ serial, gateway, signal });

describe('a serial that was heard and is on no drawing', () => {
  it('one character from an unheard one: that position, and why', () => {
    const [first] = suggestPlaces(stranger('4E02-77A1-8C'), [
      string('A1', ['4E02-1111-01', '4E02-77A1-BC', '4E02-2222-03'], { unheard: [2] }),
      string('B1', ['4E02-3333-01', null, '4E02-3333-09']),
    ]);
    expect(first).toMatchObject({ stringName: 'A1', position: 2 });
    expect(first?.reasons[0]).toMatchObject({ kind: 'misread' });
    expect(first?.reasons[0]?.words).toContain('B for 8, which look alike');
  });

  it('between its neighbours’ serials: that position', () => {
    const [first] = suggestPlaces(stranger('4E02-77A1-09'), [
      string('A1', ['4E02-77A1-07', '4E02-77A1-08', null, '4E02-77A1-0A', null]),
    ]);
    expect(first).toMatchObject({ stringName: 'A1', position: 3 });
    expect(first?.reasons[0]?.kind).toBe('serial_run');
  });

  it('near to placed serials: the string, never a position', () => {
    const [first] = suggestPlaces(stranger('4E02-77A1-0F'), [
      string('A1', ['4E02-77A1-07', '4E02-77A1-08', null, null, '4E02-77A1-0A']),
    ]);
    expect(first).toMatchObject({ stringName: 'A1', position: null });
    expect(first?.reasons.map((r) => r.kind)).toEqual(['serial_near', 'gateway', 'signal', 'lacks']);
  });

  it('by its gateway: strings of that gateway which lack units, the string only', () => {
    const found = suggestPlaces(stranger('ZZZZ-9999', 'gateway 2'), [
      string('A1', ['AAAA-01', 'AAAA-02', 'AAAA-03'], { unheard: [2] }),
      string('B1', ['BBBB-01', 'BBBB-02', 'BBBB-03'], { unheard: [1], gateway: 'gateway 2' }),
      string('C1', ['CCCC-01', 'CCCC-02', 'CCCC-03'], { gateway: 'gateway 2' }),
    ]);
    expect(found.map((f) => [f.stringName, f.position])).toEqual([['B1', null]]);
    expect(found[0]?.reasons.map((r) => r.words)).toContain('one unit not heard');
  });

  it('nothing speaks for any string: no suggestion', () => {
    expect(
      suggestPlaces(stranger('ZZZZ-9999', 'gateway 9'), [
        string('A1', ['AAAA-01', 'AAAA-02', 'AAAA-03'], { unheard: [2] }),
      ]),
    ).toEqual([]);
  });

  it('a strong signal is no reason for a string whose units are weak', () => {
    const [first] = suggestPlaces(stranger('ZZZZ-9999', 'gateway 1', -40), [
      string('A1', ['AAAA-01', 'AAAA-02', 'AAAA-03', 'AAAA-04', null], { signal: -80 }),
    ]);
    expect(first?.reasons.map((r) => r.kind)).toEqual(['gateway', 'lacks']);
  });

  it('property: every suggestion has a reason of its own, names a string that lacks a unit, and an open slot if any', () => {
    const serial = fc.stringMatching(/^[A-F0-9]{4}-[A-F0-9]{4}$/);
    fc.assert(
      fc.property(
        serial,
        fc.array(
          fc.record({
            serials: fc.array(fc.option(serial), { minLength: 1, maxLength: 8 }),
            unheard: fc.array(fc.integer({ min: 1, max: 8 })),
          }),
          {
            maxLength: 5,
          },
        ),
        (mine, drawn) => {
          const strings = drawn.map((d, i) => string(`S${i}`, d.serials, { unheard: d.unheard }));
          for (const s of suggestPlaces(stranger(mine), strings)) {
            expect(s.reasons.some((r) => r.kind !== 'lacks')).toBe(true);
            const at = strings.find((x) => x.id === s.stringId)!;
            const open = at.slots.filter((x) => x.serial === null || !x.heard).map((x) => x.position);
            expect(open.length).toBeGreaterThan(0);
            if (s.position !== null) {
              expect(open).toContain(s.position);
              expect(s.reasons.some((r) => r.kind === 'misread' || r.kind === 'serial_run')).toBe(true);
            }
          }
        },
      ),
    );
  });
});

describe('serials', () => {
  it('lie apart within one sequence only', () => {
    expect(serialDistance('4E02-77A1-09', '4E02-77A1-0B')).toBe(2);
    expect(serialDistance('4E02-77A1-09', '5E02-77A1-0B')).toBeNull();
    expect(serialDistance('4E02-77A1-09', '4E02-77A1-9')).toBeNull();
  });
  it('are misread by one character or two exchanged neighbours, no more', () => {
    expect(misreading('AB12', 'AB72')).toEqual({ kind: 'one', from: '1', to: '7' });
    expect(misreading('AB12', 'BA12')).toEqual({ kind: 'exchanged', from: 'AB', to: 'BA' });
    expect(misreading('AB12', 'AB34')).toBeNull();
    expect(misreading('AB12', 'AB12')).toBeNull();
    expect(misreading('AB12', 'AB123')).toBeNull();
  });
});

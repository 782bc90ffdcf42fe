import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { mergeEdit, type Value } from './merge';

describe('an edit that began from an older state', () => {
  it('is written where nobody else touched the same', () => {
    expect(
      mergeEdit({ name: 'South', tilt: 10 }, { name: 'South', tilt: 12 }, { name: 'South roof', tilt: 10 }),
    ).toEqual({ changes: { tilt: 12 }, clashes: [] });
  });

  it('clashes where somebody else set the same to something different', () => {
    expect(mergeEdit({ tilt: 10 }, { tilt: 12 }, { tilt: 15 })).toEqual({
      changes: {},
      clashes: [{ key: 'tilt', before: 10, theirs: 15, mine: 12 }],
    });
  });

  it('is done already where somebody else set the same to the same', () => {
    expect(mergeEdit({ tilt: 10 }, { tilt: 12 }, { tilt: 12 })).toEqual({ changes: {}, clashes: [] });
  });

  it('takes lists as sets', () => {
    expect(mergeEdit({ strings: ['a', 'b'] }, { strings: ['b', 'a'] }, { strings: ['c'] }).clashes).toEqual(
      [],
    );
    expect(mergeEdit({ strings: ['a'] }, { strings: ['a', 'b'] }, { strings: ['a'] }).changes).toEqual({
      strings: ['a', 'b'],
    });
  });

  it('never writes over what somebody else changed, and never loses a change without saying so', () => {
    const values = fc.dictionary(fc.constantFrom('a', 'b', 'c'), fc.constantFrom<Value>(1, 2, 3), {
      noNullPrototype: true,
    });
    fc.assert(
      fc.property(values, values, values, (before, after, now) => {
        const { changes, clashes } = mergeEdit(before, after, now);
        const result = { ...now, ...changes };
        for (const key of ['a', 'b', 'c']) {
          const [b, n] = [before[key] ?? null, now[key] ?? null];
          if (b !== n && result[key] !== now[key]) return false;
          const wanted = after[key];
          if (wanted !== undefined && wanted !== b && (result[key] ?? null) !== wanted)
            if (!clashes.some((c) => c.key === key)) return false;
        }
        return true;
      }),
    );
  });
});

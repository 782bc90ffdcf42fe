import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { AppError } from '../errors';
import { cursorOf, keyOfCursor, pageOf } from './cursor';

describe('a cursor', () => {
  it('comes back as what it was made of', () => {
    fc.assert(
      fc.property(
        fc.array(
          fc.oneof(
            fc.string().filter((s) => !s.includes('\0')),
            fc.integer(),
          ),
          { minLength: 1, maxLength: 4 },
        ),
        (key) => {
          expect(keyOfCursor(cursorOf(key), key.length)).toEqual(key);
        },
      ),
    );
  });
  it.each([
    'x',
    '',
    'bnVsbA',
    cursorOf(['only one']),
    cursorOf([1.5, 2]),
    Buffer.from('[[1],{}]').toString('base64url'),
    cursorOf(['a\0b', 1]),
  ])('that is none is refused by its name: %s', (text) => {
    expect(() => keyOfCursor(text, 2)).toThrow(AppError);
  });
  it('leads through a list without leaving out or doubling anything', () => {
    fc.assert(
      fc.property(
        fc.uniqueArray(fc.integer(), { maxLength: 40 }),
        fc.integer({ min: 1, max: 7 }),
        (all, limit) => {
          const sorted = [...all].sort((a, b) => a - b);
          const seen: number[] = [];
          let cursor: string | undefined;
          for (;;) {
            const after = keyOfCursor(cursor, 1)?.[0] ?? -Infinity;
            const rows = sorted.filter((n) => n > Number(after)).slice(0, limit + 1);
            const page = pageOf(
              rows,
              limit,
              (n) => [n],
              (n) => n,
            );
            seen.push(...page.data);
            if (page.next === null) break;
            cursor = page.next;
          }
          expect(seen).toEqual(sorted);
        },
      ),
    );
  });
});

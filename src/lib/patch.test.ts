import { describe, expect, it } from 'vitest';
import { replaced } from './patch';

const byId = (e: { id: string }) => e.id;

describe('a list with what has come in', () => {
  it('replaces in place, adds what is new, keeps the rest', () => {
    const list = [
      { id: 'a', n: 1 },
      { id: 'b', n: 1 },
    ];
    expect(
      replaced(
        list,
        [
          { id: 'c', n: 2 },
          { id: 'a', n: 2 },
        ],
        byId,
      ),
    ).toEqual([
      { id: 'a', n: 2 },
      { id: 'b', n: 1 },
      { id: 'c', n: 2 },
    ]);
  });

  it('is the same list when nothing came', () => {
    const list = [{ id: 'a' }];
    expect(replaced(list, undefined, byId)).toBe(list);
    expect(replaced(list, [], byId)).toBe(list);
  });
});

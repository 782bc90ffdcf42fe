import { expect, test } from 'vitest';
import { groupedBy } from './grouped-by';

test('Groups come in the order of their first member, members in theirs; a key that is null is a key', () => {
  const groups = groupedBy([5, 2, 8, 1, 4], (n) => (n > 7 ? null : n % 2));
  expect([...groups]).toEqual([
    [1, [5, 1]],
    [0, [2, 4]],
    [null, [8]],
  ]);
});

import { expect, it } from 'vitest';
import { countUp } from './count-up';

it.each([
  ['B1', 3, ['B1', 'B2', 'B3']],
  ['Row 09', 2, ['Row 09', 'Row 10']],
  ['A2-4', 2, ['A2-4', 'A2-5']],
  ['3 west', 2, ['3 west', '4 west']],
  ['South', 3, ['South', 'South 2', 'South 3']],
  ['C9', 1, ['C9']],
] as const)('%s, %i times', (name, count, names) => {
  expect(countUp(name, count)).toEqual(names);
});

import { expect, it } from 'vitest';
import { EVEN_MS, evenly } from './even-time';

it.each([
  ['done', () => Promise.resolve('done')],
  ['failed', () => Promise.reject(new Error('failed'))],
])('an answer comes no sooner than the wait: %s', async (outcome, work) => {
  const waits: number[] = [];
  let over = () => undefined as void;
  const wait = (ms: number) => {
    waits.push(ms);
    return new Promise<void>((resolve) => (over = resolve));
  };
  let answer: unknown;
  const answered = evenly<string>(work, wait).then(
    (done) => (answer = done),
    (error: unknown) => (answer = error instanceof Error ? error.message : error),
  );
  await new Promise((later) => setImmediate(later));
  expect(answer).toBeUndefined();
  over();
  await answered;
  expect(answer).toBe(outcome);
  expect(waits).toEqual([EVEN_MS]);
});

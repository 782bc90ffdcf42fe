import { afterEach, beforeEach, expect, it, vi } from 'vitest';
import { Gather } from './gather';

beforeEach(() => vi.useFakeTimers());
afterEach(() => vi.useRealTimers());

function gathering() {
  const handed: number[][] = [];
  const gather = new Gather<number>((things) => void handed.push([...things]), 200);
  return { handed, gather };
}

it('hands the first on at once', () => {
  const { handed, gather } = gathering();
  gather.push(1);
  expect(handed).toEqual([[1]]);
});

it('hands on together what comes within the span, in order, and nothing twice', () => {
  const { handed, gather } = gathering();
  for (let k = 0; k < 50; k++) {
    gather.push(k);
    vi.advanceTimersByTime(20);
  }
  vi.advanceTimersByTime(1000);
  expect(handed.flat()).toEqual(Array.from({ length: 50 }, (_, k) => k));
  expect(handed.length).toBeLessThanOrEqual(7);
  gather.push(50);
  expect(handed.at(-1)).toEqual([50]);
});

it('drops what waits when it is stopped, and can go on', () => {
  const { handed, gather } = gathering();
  gather.push(1);
  gather.push(2);
  gather.stop();
  vi.advanceTimersByTime(1000);
  gather.push(3);
  expect(handed).toEqual([[1], [3]]);
});

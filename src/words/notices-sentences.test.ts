import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { NoticeItem } from '../schemas/api/notices';
import { clockOfMinute, inOrder, minuteOfClock, noticesFinding } from './notices-sentences';

describe('a time of day', () => {
  it('is read as it is written', () => {
    fc.assert(
      fc.property(fc.integer({ min: 0, max: 1439 }), (m) => {
        expect(minuteOfClock(clockOfMinute(m))).toBe(m);
      }),
    );
  });
  it.each(['', '24:00', '7', '07:60', 'noon', '-1:00'])('%j is none', (typed) => {
    expect(minuteOfClock(typed)).toBeNull();
  });
});

it('puts hazards that nobody has read first, what is over or read where it came', () => {
  const item = (id: string, more: Partial<NoticeItem> = {}) =>
    ({ id, hazard: true, readAt: null, overAt: null, ...more }) as NoticeItem;
  const list = [
    item('a', { hazard: false }),
    item('b', { readAt: 'x' }),
    item('c'),
    item('d', { overAt: 'x' }),
    item('e'),
  ];
  expect(
    inOrder(list)
      .map((i) => i.id)
      .join(''),
  ).toBe('ceabd');
});

it.each([
  [{ unread: 3, hazards: 1, items: [] }, '1 unread notice says that a string is not shutting down'],
  [{ unread: 3, hazards: 0, items: [] }, '3 notices you have not read'],
  [{ unread: 100, hazards: 0, items: [] }, 'More than 99 notices you have not read'],
  [{ unread: 0, hazards: 0, items: [{} as NoticeItem] }, 'You have read every notice'],
  [{ unread: 0, hazards: 0, items: [] }, 'Nothing to tell you'],
])('the heading of %j', (page, words) => {
  expect(noticesFinding(page).finding.replaceAll('\u00a0', ' ')).toBe(words);
});

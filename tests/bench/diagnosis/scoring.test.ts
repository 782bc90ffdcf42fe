import { expect, test } from 'vitest';
import { aim, figure, middle, Share, Tally } from './scoring';

test('precision, recall and false alarms come from the four counts', () => {
  const t = new Tally();
  t.hit(2);
  t.hit(4);
  t.hit(3);
  t.missed = 1;
  t.falseAlarms = 2;
  t.lookedAt = 500;
  expect(t.precision).toBe(3 / 5);
  expect(t.recall).toBe(3 / 4);
  expect(t.falsePerThousand).toBe(4);
  expect(middle(t.delays)).toBe(3);
});

test('tallies of two runs add up', () => {
  const a = new Tally();
  a.hit(1);
  a.lookedAt = 10;
  const b = new Tally();
  b.hit(5);
  b.missed = 2;
  b.falseAlarms = 1;
  b.lookedAt = 30;
  a.add(b);
  expect(a).toMatchObject({ found: 2, missed: 2, falseAlarms: 1, lookedAt: 40, delays: [1, 5] });
});

test('the middle of an even number lies between two, and nothing has no middle', () => {
  expect(middle([4, 1, 3, 2])).toBe(2.5);
  expect(middle([7])).toBe(7);
  expect(middle([])).toBeNaN();
});

test('a share counts yes among all', () => {
  const s = new Share();
  s.count(true);
  s.count(false);
  s.count(true);
  s.count(true);
  expect(s.value).toBe(0.75);
});

test('a figure without cases is a remark, never a number', () => {
  expect(figure('stuck.recall', 0.5, 'share')).toBe('diagnosis.stuck.recall 0.5000 share');
  expect(figure('stuck.recall', new Tally().recall, 'share')).toMatch(/^# diagnosis\.stuck\.recall/);
  expect(new Share().value).toBeNaN();
});

test('an aim that is missed is remarked with its reason', () => {
  expect(aim('cause.right', 0.96, 0.95, 'why')).toEqual([]);
  expect(aim('cause.right', 0.9, 0.95, 'Strings alone.')).toEqual([
    '# diagnosis.cause.right: aim is 0.95. Strings alone.',
  ]);
});

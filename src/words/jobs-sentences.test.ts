import { expect, it } from 'vitest';
import type { JobKindLine } from '../schemas/api/jobs';
import { isLate } from './jobs-sentences';

const kind = (due: string | null): JobKindLine => ({
  task: 'pack_days',
  title: 'Pack',
  last: null,
  next: '2026-12-02T00:23:00.000Z',
  due,
  runs24h: 1,
  failed24h: 0,
  usualMs: null,
  waiting: 0,
  running: 0,
  failing: 0,
});

it('a job is late by its own clock: one of every night is not late by day, one of every minute is after ten', () => {
  expect(isLate(kind('2026-12-02T00:23:00.000Z'), '2026-12-01T18:00:00.000Z')).toBe(false);
  expect(isLate(kind('2026-12-01T17:56:00.000Z'), '2026-12-01T18:00:00.000Z')).toBe(false);
  expect(isLate(kind('2026-12-01T17:49:00.000Z'), '2026-12-01T18:00:00.000Z')).toBe(true);
  expect(isLate(kind(null), '2026-12-01T18:00:00.000Z')).toBe(false);
});

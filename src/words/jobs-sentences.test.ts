import { expect, it } from 'vitest';
import type { JobKindLine, JobsPage } from '../schemas/api/jobs';
import { isLate, jobsFinding } from './jobs-sentences';

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

it('what was given up is not said to be tried again', () => {
  const page = (nextAt: string | null): JobsPage => ({
    at: '2026-12-01T18:00:00.000Z',
    kinds: [],
    failures: [],
    noQueue: false,
    failing: [
      {
        id: '1',
        task: 'output_night',
        title: 'Judge a day',
        siteName: 'Mill',
        error: 'It met something.',
        attempts: 25,
        attemptsMax: 25,
        nextAt,
      },
    ],
  });
  expect(jobsFinding(page(null)).finding).toBe('One job was given up');
  expect(jobsFinding(page('2026-12-01T19:00:00.000Z')).finding).toContain('is tried again');
});

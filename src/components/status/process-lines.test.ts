import { describe, expect, it } from 'vitest';
import { processFigures, type ProcessSample } from '../../schemas/api/processes';
import { isQuiet, lineOf, marksOf, newest, PICTURES } from './process-lines';

const HOUR_S = 3600;
const sample = (at: number, figures: Partial<ProcessSample['figures']>, spanS = 60): ProcessSample => ({
  at,
  spanS,
  figures: processFigures.parse(figures),
});
const minutes = (n: number, of: (k: number) => Partial<ProcessSample['figures']>): ProcessSample[] =>
  Array.from({ length: n }, (_, k) => sample(60 * k + 30, of(k)));

describe('the lines of a process', () => {
  it('have a point a minute, and a gap where samples are missing', () => {
    const samples = minutes(10, (k) => ({ commitP95Ms: k })).filter((_, k) => k < 3 || k > 6);
    const line = lineOf(samples, { figure: 'commitP95Ms', gather: 'worst' }, 0, 6 * HOUR_S);
    expect(line.values).toEqual([0, 1, 2, null, 7, 8, 9]);
    expect(line.at[0]).toBe(30);
  });

  it('show of many minutes in one point the worst of a duration, the mean of a rate', () => {
    const samples = minutes(24, (k) => ({ ackP95Ms: k % 12 === 5 ? 900 : 10, readingsPerS: k }));
    const day = 72 * HOUR_S; // a point is 12 minutes
    expect(lineOf(samples, { figure: 'ackP95Ms', gather: 'worst' }, 0, day).values).toEqual([900, 900]);
    expect(lineOf(samples, { figure: 'readingsPerS', gather: 'mean' }, 0, day).values).toEqual([5.5, 17.5]);
  });

  it('leave open what was not measured, and mark what went wrong', () => {
    const samples = minutes(4, (k) => ({ jobsRun: k === 2 ? null : 3, jobsFailed: k === 1 ? 2 : 0 }));
    const picture = PICTURES.find((p) => p.title === 'Jobs run')!;
    expect(lineOf(samples, picture.lines[0]!, 0, 6 * HOUR_S).values).toEqual([3, 3, null, 3]);
    expect(marksOf(samples, picture.marked, 0, 6 * HOUR_S)).toEqual([90]);
    expect(newest(samples, picture.lines[0]!, picture)).toBe('3\u00a0a minute');
    expect(newest([], picture.lines[0]!, picture)).toBe('none yet');
  });

  it('belong to a process that is quiet after two and a half minutes', () => {
    const history = {
      process: 'p',
      host: 'h',
      pid: 1,
      roles: ['web'],
      startedAt: '',
      samples: minutes(2, () => ({})),
    };
    expect(isQuiet(history, 90 + 149)).toBe(false);
    expect(isQuiet(history, 90 + 151)).toBe(true);
  });
});

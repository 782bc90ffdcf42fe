import { describe, expect, it } from 'vitest';
import type { SiteTraces, StringTrace } from '../../schemas/api/trace';
import { bestTraces, factsOf, traceWords } from './model';

const trace = (
  stringName: string,
  voltage: (number | null)[],
  more: Partial<StringTrace> = {},
): StringTrace => ({
  stringId: stringName,
  stringName,
  measuringPoint: 'unit_sum',
  accuracy: 5,
  voltage,
  ...more,
});
const read = (traces: StringTrace[], inForce: 'initiator' | 'released' = 'initiator'): SiteTraces => ({
  at: '2026-12-01T10:01:00.000Z',
  command: { inForce, where: 'Whole roof', since: '2026-12-01T10:00:00.000Z', by: 'Main initiator' },
  startedAt: '2026-12-01T10:00:00.000Z',
  traces,
  limit: { voltage: 30, afterS: 30, source: 'NEC 690.12(B), 2017 and later editions: 30 s' },
});
const said = (r: SiteTraces) => traceWords(r).replace(/\u00a0/g, ' ');

describe('the figures of a trace', () => {
  it('finds from when it stayed under the limit', () => {
    expect(factsOf(trace('A1', [560, 400, 20, 8.4, 8.4]), 30)).toMatchObject({
      first: 560,
      last: 8.4,
      underFromS: 2,
    });
  });
  it('begins anew when it rises again', () => {
    expect(factsOf(trace('A1', [560, 20, 50, 9, 8]), 30).underFromS).toBe(3);
    expect(factsOf(trace('A1', [560, 20, 50]), 30).underFromS).toBeNull();
  });
  it('leaves out what is not known', () => {
    expect(factsOf(trace('A1', [null, 560, null, 8, null]), 30)).toMatchObject({
      first: 560,
      last: 8,
      underFromS: 3,
      seconds: 5,
    });
    expect(factsOf(trace('A1', [null, null]), 30)).toMatchObject({
      first: null,
      last: null,
      underFromS: null,
    });
  });
});

describe('one trace a string', () => {
  const input = trace('A1', [560, 550, 540], { measuringPoint: 'input' });
  const sum = trace('A1', [560, 8, 8]);
  const homeRun = trace('A1', [560, 9, 9], { measuringPoint: 'home_run' });
  it('prefers the home run, then the units, in any order', () => {
    expect(bestTraces([input, sum])).toEqual([sum]);
    expect(bestTraces([sum, input])).toEqual([sum]);
    expect(bestTraces([homeRun, sum, input])).toEqual([homeRun]);
    expect(bestTraces([sum, homeRun])).toEqual([homeRun]);
  });
  it('takes the input where the units tell nothing', () => {
    const mute = trace('A1', [null, null, null]);
    expect(bestTraces([mute, input])).toEqual([input]);
    expect(bestTraces([input, mute])).toEqual([input]);
  });
});

describe('the words of traces', () => {
  it('after a shutdown', () => {
    expect(said(read([trace('A1', [560, 20, 8]), trace('A2', [560, 300, 8])]))).toBe(
      'All 2 strings fell to 30 V or less within 1 to 2 s, by telemetry.',
    );
    expect(said(read([trace('A1', [560, 20, 8])]))).toBe(
      'The string fell to 30 V or less within 1 s, by telemetry.',
    );
    expect(said(read([trace('A1', [560, 20, 8]), trace('A2', [560, 300, 80])]))).toBe(
      '1 of 2 strings fell to 30 V or less; A2 is still above it.',
    );
    expect(said(read([trace('A1', [560, 20, 8]), trace('A2', [null])]))).toContain('1 string tells nothing.');
  });
  it('after a release', () => {
    expect(said(read([trace('A1', [8, 300, 560]), trace('A2', [8, 8])], 'released'))).toBe(
      '1 of 2 strings is above 30 V again.',
    );
  });
  it('without any', () => {
    expect(said({ ...read([]), startedAt: null })).toBe(
      'No voltages have been recorded second by second yet.',
    );
    expect(said(read([trace('A1', [null])]))).toContain('No string has told its voltage');
  });
});

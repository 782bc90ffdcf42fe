import { describe, expect, it } from 'vitest';
import { careWords, dayWords, lifeCard, monthCard, switchWords, testWords, workingTimeCard } from './cards';

const plain = (text: string): string => text.replace(/\u00a0/g, ' ');

describe('the month', () => {
  const month = {
    first: '2026-11-01',
    energy: 1_900_000,
    expected: 1_939_000,
    measured: 1_900_000,
    days: 30,
  };
  it.each([
    [{}, 'about what its weather allowed'],
    [{ measured: 1_700_000 }, '12 % under what its weather allowed'],
    [{ measured: 2_100_000 }, '8 % over what its weather allowed'],
    [{ expected: null }, '30 days, without a comparison'],
    [{ expected: 0 }, '30 days, without a comparison'],
    [{ days: 0 }, 'no day of this month is complete yet'],
  ])('%j', (more, note) => {
    expect(plain(monthCard({ ...month, ...more }).note)).toBe(note);
  });
  it('is named by its own name', () => {
    expect(monthCard(month)).toMatchObject({ label: 'November' });
    expect(plain(monthCard(month).figure)).toBe('1.9 MWh');
  });
});

describe('the life of a roof', () => {
  const life = {
    from: '2026-03-12',
    energy: 38_400_000,
    workingTime: 0.9961,
    lostMinutes: 1560,
    lostMinutesGrid: 1380,
    completeness: 1,
    countedFrom: null,
  };
  it('sums since switch-on', () => {
    expect(lifeCard(life).note).toBe('12 March 2026');
    expect(lifeCard({ ...life, countedFrom: '2026-05-01' }).note).toBe(
      '12 March 2026; counted from 1 May 2026',
    );
    expect(lifeCard(null).note).toBe('not switched on yet');
  });
  it('gives the hours lost beside the share', () => {
    expect(plain(workingTimeCard(life).figure)).toBe('99.6 %');
    expect(workingTimeCard(life).note).toBe('26 h lost, 23 h of it grid outage');
    expect(workingTimeCard({ ...life, lostMinutesGrid: 0 }).note).toBe('26 h lost');
    expect(workingTimeCard({ ...life, lostMinutesGrid: 1560 }).note).toBe('26 h lost, all of it grid outage');
    expect(workingTimeCard({ ...life, lostMinutes: 0, lostMinutesGrid: 0, workingTime: 1 }).note).toBe(
      'no hour of daylight lost',
    );
  });
  it('does not round a loss away', () => {
    expect(
      plain(workingTimeCard({ ...life, workingTime: 0.99999, lostMinutes: 2, lostMinutesGrid: 0 }).figure),
    ).toBe('99.9 %');
  });
  it('says what is missing', () => {
    expect(plain(workingTimeCard({ ...life, completeness: 0.96 }).note)).toContain(
      'readings of 4.0 % of the time are missing',
    );
    expect(workingTimeCard({ ...life, workingTime: null }).figure).toBe('–');
    expect(workingTimeCard(null).figure).toBe('–');
  });
});

describe('the last shutdown test', () => {
  const test = { at: '2026-11-03T12:00:00.000Z', strings: 8, madeBy: 'Per Aalto' };
  const words = (result: 'passed' | 'failed' | 'consistent' | 'not_witnessed', strings = 8) =>
    plain(testWords({ ...test, strings, result }, 'rapid_shutdown_30s', 'UTC'));
  it('promises no more than was shown', () => {
    expect(words('passed')).toBe(
      'Last tested 3 November 2026 by Per Aalto: all 8 groups of modules measured below 30 V within 30 seconds, by meter.',
    );
    expect(words('passed', 1)).toContain(': 1 group of modules measured');
    expect(words('failed')).toContain('Treat the roof as live');
    expect(words('consistent')).toContain('That is no test.');
    expect(words('not_witnessed')).toContain('That is no test.');
    expect(testWords(null, 'none', 'UTC')).toBe('No shutdown test is on record for this roof.');
  });
  it('names the limit of the rule in force, and none where there is none', () => {
    const passed = { ...test, result: 'passed' as const };
    expect(testWords(passed, 'rapid_shutdown_10s', 'UTC')).toContain('within 10 seconds');
    expect(testWords(passed, 'none', 'UTC')).toContain('measured as required');
    expect(testWords(passed, 'hazard_control', 'UTC')).not.toContain('30 V');
  });
});

describe('the switch and who looks after it', () => {
  const site = {
    id: '00000000-0000-4000-8000-000000000001',
    name: 'Weirside Clinic',
    place: '',
    timeZone: 'UTC',
    switchedOnOn: null,
    shutdownSwitchPlace: 'beside the meter cabinet',
    strings: 8,
    ruleSet: 'rapid_shutdown_30s' as const,
  };
  it('always says not to rely on the page', () => {
    expect(switchWords(site)).toContain('Where the switch is: beside the meter cabinet.');
    for (const place of ['beside the meter cabinet', ''])
      expect(switchWords({ ...site, shutdownSwitchPlace: place })).toMatch(
        /never rely on this page.*stay live in light/,
      );
  });
  it('says who looks after the roof, and when no number is recorded', () => {
    expect(careWords({ organisation: 'Lowfield Solar Works', phone: '1', logo: null })).toBe(
      'Lowfield Solar Works looks after this roof.',
    );
    expect(careWords({ organisation: 'Lowfield Solar Works', phone: '', logo: null })).toContain(
      'no telephone number',
    );
  });
  it('writes plain days without a zone', () => {
    expect(dayWords('2026-03-12')).toBe('12 March 2026');
  });
});

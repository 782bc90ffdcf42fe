import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { SharedNow } from '../../schemas/api/share';
import { yearCard } from './cards';
import { customerWords } from '../../words/customer-sentences';

const AT = '2026-12-01T14:30:00.000Z';
const CARE = { organisation: 'Lowfield Solar Works' };
const TODAY = { energy: 118_000, clearEnergyUntilNow: 128_000 };
const count = fc.integer({ min: 0, max: 96 });
const now: fc.Arbitrary<SharedNow> = fc.record({
  at: fc.constant(AT),
  stage: fc.constantFrom('commissioning', 'operating'),
  modules: fc.constant(96),
  reporting: fc.constantFrom(0, 48, 96),
  passing: count,
  shutdown: count,
  unheard: fc.integer({ min: 0, max: 20 }),
  silent: fc.integer({ min: 0, max: 20 }),
  dark: count,
  stuck: fc.constantFrom(0, 0, 1, 5),
  notShuttingDown: fc.constantFrom(0, 0, 1, 7),
  unconfirmed: fc.constantFrom(0, 1, 3),
  stringsNotShuttingDown: fc.constantFrom(0, 0, 1),
  power: fc.constantFrom(null, 0, 31_000),
  madeLast: fc.constantFrom(null, { power: 26_300, at: AT }),
  daylight: fc.boolean(),
  loggers: fc.constantFrom(0, 2),
  quietLoggers: fc.constantFrom(0, 1, 2),
  lastSpokeAt: fc.constantFrom(null, AT),
  zones: fc.constant(1),
  commands: fc.constantFrom(
    [],
    [{ inForce: 'initiator' as const, since: AT }],
    [{ inForce: 'power_lost' as const, since: AT }],
  ),
  inShutdownSince: fc.constantFrom(null, AT),
  inverters: fc.record({
    total: fc.constantFrom(0, 3),
    gridLost: fc.constantFrom(0, 1, 3),
    fault: fc.constantFrom(0, 1),
    limited: fc.constantFrom(0, 1),
  }),
});

describe('the sentences of a shared page', () => {
  it('speak to nobody as the owner, and bid nobody call or act', () => {
    fc.assert(
      fc.property(now, (state) => {
        const words = customerWords(state, TODAY, 'UTC', CARE, 'anybody');
        const all = [words.heading, ...words.sentences].join(' ');
        expect(all).not.toMatch(/\byou(r|rs)?\b/i);
        expect(all).not.toMatch(/\bcall\b/i);
      }),
    );
  });
  it('caution as on the owner’s page, in every state', () => {
    fc.assert(
      fc.property(now, (state) => {
        const shared = customerWords(state, TODAY, 'UTC', CARE, 'anybody');
        const owner = customerWords(state, TODAY, 'UTC', CARE);
        expect(shared.caution).toEqual(owner.caution);
        expect(shared.heading.toLowerCase()).toBe(
          owner.heading
            .toLowerCase()
            .replace('your modules', 'the modules')
            .replaceAll('your roof', 'this roof'),
        );
      }),
    );
  });
});

describe('the year', () => {
  const life = {
    from: '2025-08-04',
    countedFrom: null as string | null,
    energy: 1,
    workingTime: 1,
    lostMinutes: 0,
    lostMinutesGrid: 0,
    completeness: 1,
  };
  const year = { first: '2026-01-01', energy: 56_200_000 };
  it('runs from its first day', () => {
    expect(yearCard(year, life)).toMatchObject({ label: '2026', note: 'since the first of January' });
  });
  it('runs from switch-on or from the first readings where these came within it', () => {
    expect(yearCard(year, { ...life, from: '2026-03-12' }).note).toBe('since 12 March 2026');
    expect(yearCard(year, { ...life, countedFrom: '2026-03-06' }).note).toBe('since 6 March 2026');
  });
  it('has no figure before switch-on', () => {
    expect(yearCard(null, null)).toMatchObject({ figure: '–', note: 'not switched on yet' });
  });
});

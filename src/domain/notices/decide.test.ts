import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { ROLES } from '../access/permissions';
import { decide, DEFAULT_CHOICE, type Matter, type Recipient } from './decide';
import { HOWS, KINDS, kindsOf, NOTICE_KINDS, type NoticeKind } from './kinds';
import { isQuiet, minuteOfDay } from './person-clock';

const minute = fc.integer({ min: 0, max: 1439 });
const sites = fc.uniqueArray(fc.integer({ min: 1, max: 4 }), { maxLength: 4 });
const recipient: fc.Arbitrary<Recipient> = fc.record({
  personId: fc.integer({ min: 1, max: 3 }),
  role: fc.constantFrom(...ROLES),
  active: fc.boolean(),
  timeZone: fc.constantFrom('UTC', 'Europe/Oslo', 'America/Los_Angeles', 'Australia/Lord_Howe'),
  sees: fc.oneof(fc.constant('all' as const), sites),
  choice: fc.record({
    rules: fc.dictionary(fc.constantFrom<NoticeKind>(...NOTICE_KINDS), fc.constantFrom(...HOWS)),
    sites: fc.oneof(fc.constant(null), sites),
    digestAt: minute,
    quiet: fc.oneof(
      fc.constant(null),
      fc.record({ from: minute, to: minute }).filter((q) => q.from !== q.to),
    ),
  }),
});
const matter: fc.Arbitrary<Matter> = fc.record({
  kind: fc.constantFrom(...NOTICE_KINDS),
  siteId: fc.oneof(fc.constant(null), fc.integer({ min: 1, max: 4 })),
  byPerson: fc.oneof(fc.constant(null), fc.integer({ min: 1, max: 3 })),
  inProductOnly: fc.boolean(),
});
const at = fc
  .integer({ min: Date.UTC(2026, 0, 1) / 60_000, max: Date.UTC(2027, 0, 1) / 60_000 })
  .map((m) => new Date(m * 60_000));
const ever = (p: Recipient, m: Matter): boolean =>
  p.active &&
  m.byPerson !== p.personId &&
  KINDS[m.kind].defaults[p.role] !== undefined &&
  (m.siteId === null || p.sees === 'all' || p.sees.includes(m.siteId));

const ADA: Recipient = {
  personId: 1,
  role: 'technician',
  active: true,
  timeZone: 'Europe/Oslo',
  sees: 'all',
  choice: { ...DEFAULT_CHOICE, quiet: { from: 22 * 60, to: 6 * 60 } },
};
const about = (kind: NoticeKind, more: Partial<Matter> = {}): Matter => ({
  kind,
  siteId: 1,
  byPerson: null,
  inProductOnly: false,
  ...more,
});
const NIGHT = new Date('2026-12-01T01:00:00Z'); // 02:00 in Oslo
const DAY = new Date('2026-12-01T12:00:00Z');

describe('who is told how', () => {
  it('nobody is told of what their role or their sites do not show them, or of what they did', () => {
    fc.assert(
      fc.property(matter, recipient, at, (m, p, now) => {
        if (!ever(p, m)) expect(decide(m, p, now)).toEqual({ how: 'nothing' });
      }),
    );
  });

  it('a hazard is a letter at once, whatever was chosen and whatever the hour', () => {
    fc.assert(
      fc.property(matter, recipient, at, (m, p, now) => {
        const hazard: Matter = { ...m, kind: 'hazard', inProductOnly: false };
        if (ever(p, hazard)) expect(decide(hazard, p, now)).toEqual({ how: 'now' });
      }),
    );
  });

  it('no other letter leaves in quiet hours, or is held for more than 25 hours', () => {
    fc.assert(
      fc.property(matter, recipient, at, (m, p, now) => {
        if (m.kind === 'hazard') return;
        const decision = decide(m, p, now);
        if (decision.how === 'now') expect(isQuiet(now, p.choice.quiet, p.timeZone)).toBe(false);
        if (decision.how !== 'gathered') return;
        const waits = decision.at.getTime() - now.getTime();
        expect(waits).toBeGreaterThan(0);
        expect(waits).toBeLessThanOrEqual(25 * 3_600_000);
      }),
    );
  });

  it('what was chosen holds: nothing is nothing, in the product is no letter', () => {
    fc.assert(
      fc.property(matter, recipient, at, (m, p, now) => {
        const chosen = p.choice.rules[m.kind];
        if (m.kind === 'hazard' || !chosen) return;
        const { how } = decide(m, p, now);
        if (chosen === 'nothing') expect(how).toBe('nothing');
        if (chosen === 'in_product') expect(['in_product', 'nothing']).toContain(how);
      }),
    );
  });

  it('by day at once, in quiet hours when they end, otherwise with the day’s letter', () => {
    expect(decide(about('silence'), ADA, DAY)).toEqual({ how: 'now' });
    expect(decide(about('silence'), ADA, NIGHT)).toEqual({
      how: 'gathered',
      at: new Date('2026-12-01T05:00:00Z'),
    });
    const digest = decide(about('cause'), ADA, DAY);
    expect(digest).toEqual({ how: 'gathered', at: new Date('2026-12-02T06:00:00Z') });
    expect(digest.how === 'gathered' && minuteOfDay(digest.at, 'Europe/Oslo')).toBe(420);
  });

  it('chosen sites leave others out, hazards excepted', () => {
    const picky = { ...ADA, choice: { ...ADA.choice, sites: [2] } };
    expect(decide(about('silence'), picky, DAY)).toEqual({ how: 'nothing' });
    expect(decide(about('silence', { siteId: 2 }), picky, DAY)).toEqual({ how: 'now' });
    expect(decide(about('hazard'), picky, NIGHT)).toEqual({ how: 'now' });
  });
});

describe('the kinds', () => {
  it('only what is fixed can’t be chosen away, and that is the hazard', () => {
    expect(NOTICE_KINDS.filter((k) => KINDS[k].fixed)).toEqual(['hazard']);
    for (const role of ['manager', 'technician', 'analyst'] as const)
      expect(KINDS.hazard.defaults[role]).toBe('at_once');
  });
  it('customers have few', () => {
    expect(kindsOf('customer')).toEqual(['own_report', 'handover']);
  });
});

import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { CommandNow } from '../schemas/api/now';
import type { CustomerNow } from '../schemas/api/customer';
import { roofPage } from './customer';
import { customerWords, heardAt } from './customer-sentences';

const AT = '2026-12-01T14:30:00.000Z';
const CARE = { organisation: 'Lowfield Solar Works' };
const command = (inForce: CommandNow['inForce'], where = 'roof'): CommandNow => ({
  where,
  whereKind: 'zone',
  inForce,
  since: '2026-12-01T14:02:00.000Z',
  by: '',
});
/** A roof of 96 modules at work. */
const roof = (more: Partial<CustomerNow> = {}): CustomerNow => ({
  at: AT,
  stage: 'operating',
  modules: 96,
  reporting: 96,
  passing: 96,
  shutdown: 0,
  unheard: 0,
  silent: 0,
  dark: 0,
  stuck: 0,
  notShuttingDown: 0,
  unconfirmed: 0,
  stringsNotShuttingDown: 0,
  power: 31_000,
  madeLast: null,
  daylight: true,
  loggers: 1,
  quietLoggers: 0,
  lastSpokeAt: AT,
  zones: 1,
  commands: [],
  inShutdownSince: null,
  ...more,
  inverters: { total: 3, gridLost: 0, fault: 0, limited: 0, ...more.inverters },
});
const plain = (text: string): string => text.replace(/\u00a0/g, ' ');
const said = (
  now: CustomerNow,
  today = { energy: 118_000 as number | null, clearEnergyUntilNow: 128_000 },
) => {
  const words = customerWords(now, today, 'UTC', CARE);
  return {
    ...words,
    heading: plain(words.heading),
    all: plain(words.sentences.join(' ')),
    caution: words.caution ? plain(`${words.caution.strong} ${words.caution.rest}`) : null,
  };
};
const ON_SCREENS =
  'Lowfield Solar Works has this on its screens; there is nothing for you to do on the roof.';
const TODAY = 'Today so far 118 kWh, 92 % of what a clear day would have given by now.';

describe('a roof at work', () => {
  it('says that all is well', () => {
    const words = said(roof());
    expect(words.heading).toBe('Your roof is making 31.0 kW. All 96 modules are passing power.');
    expect(words.all).toBe(`${TODAY} Nothing needs your attention.`);
    expect(words.caution).toBeNull();
    expect(words.calm).toBe(true);
  });
  it('does not speak of modules one by one where they do not report so', () => {
    expect(said(roof({ reporting: 0, passing: 0 })).heading).toBe('Your roof is making 31.0 kW.');
    expect(said(roof({ reporting: 60, passing: 60 })).heading).toBe(
      'Your roof is making 31.0 kW. All 60 modules that report are passing power.',
    );
  });
  it('says what it made when last measured as something past', () => {
    const madeLast = { power: 26_300, at: '2026-12-01T14:26:05.000Z' };
    const words = said(roof({ power: null, madeLast, passing: 0, silent: 96 }));
    expect(words.heading).toBe(
      'Your roof made 26.3 kW at 14:26; no reading of its power has come since. Its modules do not report just now.',
    );
    expect(words.calm).toBe(false);
    expect(said(roof({ power: null, madeLast: { ...madeLast, power: 3 } })).heading).toContain(
      'Your roof made no power at 14:26; no reading of its power has come since.',
    );
  });
  it('is as of the newest word from the roof, not of when the page was read', () => {
    expect(heardAt(roof({ lastSpokeAt: '2026-12-01T14:26:05.000Z' }))).toBe('2026-12-01T14:26:05.000Z');
    expect(heardAt(roof({ lastSpokeAt: null }))).toBe(AT);
    expect(plain(roofPage.asOf('2026-12-01T14:26:05.000Z', AT, 'UTC', null, false))).toBe('As of 14:26.');
    expect(plain(roofPage.asOf('2026-11-30T14:26:05.000Z', AT, 'UTC', null, false))).toContain('30 Nov');
  });
  it('tells some stuck ones', () => {
    const words = said(roof({ passing: 94, shutdown: 2, stuck: 2 }));
    expect(words.heading).toBe('Your roof is making 31.0 kW. 94 of 96 modules are passing power.');
    expect(words.all).toBe(
      `${TODAY} 2 modules hold back their power though nothing asks for it. ${ON_SCREENS}`,
    );
    expect(said(roof({ passing: 95, shutdown: 1, stuck: 1 })).all).toContain('1 module holds back its power');
    expect(words.calm).toBe(false);
  });
  it('tells silent, never heard, shaded and starting ones apart', () => {
    expect(said(roof({ passing: 95, silent: 1 })).all).toContain(
      '1 module has not reported for a while; it may still be working.',
    );
    expect(said(roof({ passing: 93, unheard: 3 })).all).toContain('3 modules have never reported.');
    expect(said(roof({ passing: 92, dark: 4 })).all).toContain(
      '4 modules get too little light to work: snow, leaves or deep shade.',
    );
    expect(said(roof({ passing: 90, shutdown: 6 })).all).toContain('6 modules are not passing power yet.');
  });
  it('claims nothing of modules that are silent', () => {
    expect(said(roof({ passing: 93, silent: 3 })).heading).toBe(
      'Your roof is making 31.0 kW. All 93 modules heard from are passing power.',
    );
    expect(said(roof({ passing: 90, silent: 3, stuck: 3, shutdown: 3 })).heading).toBe(
      'Your roof is making 31.0 kW. 90 of 93 modules heard from are passing power.',
    );
    expect(said(roof({ passing: 0, silent: 96 })).heading).toBe(
      'Your roof is making 31.0 kW. Its modules do not report just now.',
    );
    expect(said(roof({ modules: 1, reporting: 1, passing: 1 })).heading).toContain(
      'The one module is passing power.',
    );
  });
  it('tells inverters with a fault, without grid, or held back', () => {
    expect(said(roof({ inverters: { total: 3, gridLost: 0, fault: 1, limited: 0 } })).all).toContain(
      '1 of 3 inverters reports a fault.',
    );
    expect(said(roof({ inverters: { total: 3, gridLost: 1, fault: 0, limited: 0 } })).all).toContain(
      '1 of 3 inverters is without the grid.',
    );
    const limited = said(roof({ inverters: { total: 3, gridLost: 0, fault: 0, limited: 2 } }));
    expect(limited.all).toContain('2 of 3 inverters are held below what the sun would allow');
    expect(limited.calm).toBe(true); // a limit is no trouble of the roof
  });
  it('says nothing of power that it does not know, and calls next to nothing nothing', () => {
    expect(said(roof({ power: null })).heading).toContain('What your roof is making is not known just now.');
    expect(said(roof({ power: null })).calm).toBe(false);
    expect(said(roof({ power: 3 })).heading).toContain('Your roof is making no power just now.');
  });
  it('says that part of the roof does not report', () => {
    expect(said(roof({ loggers: 2, quietLoggers: 1 })).all).toContain('Part of your roof has not reported');
  });
  it('does not compare where there is nothing to compare with', () => {
    expect(said(roof(), { energy: null, clearEnergyUntilNow: 0 }).all).toBe('Nothing needs your attention.');
    expect(said(roof(), { energy: 40, clearEnergyUntilNow: 90 }).all).toContain('Today so far 40 Wh.');
  });
});

describe('a roof at rest', () => {
  const night = { daylight: false, passing: 0, dark: 96, power: 0 };
  it('at night', () => {
    const words = said(roof(night));
    expect(words.heading).toBe('It is night at your roof: it rests until the sun is up.');
    expect(words.all).toBe(
      'Today it made 118 kWh, 92 % of what a clear day gives. Nothing needs your attention.',
    );
    expect(words.calm).toBe(true);
  });
  it('at night with modules that were stuck by day', () => {
    expect(said(roof({ ...night, dark: 94, shutdown: 2, stuck: 2 })).all).toContain('2 modules hold back');
  });
  it('under snow or a very dull sky by day', () => {
    const words = said(roof({ passing: 0, dark: 96, power: 0 }));
    expect(words.heading).toBe('Too little light reaches your modules: your roof is waiting.');
    expect(words.all).toContain('Snow or a very dull sky does that; it is no fault.');
    expect(words.calm).toBe(true);
  });
  it('with the grid gone', () => {
    const words = said(roof({ power: 0, inverters: { total: 3, gridLost: 3, fault: 0, limited: 0 } }));
    expect(words.heading).toBe('The grid is gone at your roof, so it makes no power.');
    expect(words.all).toContain('start again some minutes after it is back');
    expect(words.calm).toBe(false);
  });
});

describe('a roof in shutdown', () => {
  const down = { passing: 0, shutdown: 96, power: 0, inShutdownSince: '2026-12-01T14:02:00.000Z' };
  it.each([
    ['initiator', 'A shutdown switch was operated.'],
    ['keep_alive_lost', 'The signal that lets it work was lost.'],
    ['power_lost', 'The power that it needs to be released was lost.'],
  ] as const)('as a whole, by %s', (inForce, cause) => {
    const words = said(roof({ ...down, commands: [command(inForce)] }));
    expect(words.heading).toBe('Your roof has been shut down since 14:02.');
    expect(words.all).toContain(cause);
    expect(words.caution).toContain('Shut down does not mean without voltage.');
    expect(words.all).not.toContain('not passing power yet');
    expect(words.calm).toBe(false);
  });
  it('also at night and with the grid gone', () => {
    const words = said(
      roof({
        ...down,
        daylight: false,
        commands: [command('initiator')],
        inverters: { total: 3, gridLost: 3, fault: 0, limited: 0 },
      }),
    );
    expect(words.heading).toBe('Your roof has been shut down since 14:02.');
    expect(words.all).toContain('Inverters stop by themselves');
  });
  it('names those of which nothing shows that they followed', () => {
    const words = said(
      roof({ ...down, shutdown: 91, silent: 5, unconfirmed: 5, commands: [command('initiator')] }),
    );
    expect(words.all).toContain('Of 5 modules nothing shows yet that they followed: treat them as live.');
  });
  it('in part', () => {
    const words = said(
      roof({ passing: 60, shutdown: 36, power: 12_000, zones: 2, commands: [command('initiator', 'north')] }),
    );
    expect(words.heading).toBe('Your roof is making 12.0 kW. Part of it has been shut down since 14:02.');
    expect(words.caution).toContain('Shut down does not mean without voltage.');
    expect(words.all).not.toContain('not passing power yet');
  });
});

describe('a roof that does not shut down', () => {
  it('comes before everything else', () => {
    for (const more of [
      {},
      { daylight: false },
      { stage: 'commissioning' as const },
      { quietLoggers: 1 },
      { inShutdownSince: '2026-12-01T14:02:00.000Z', commands: [command('initiator')] },
      { inverters: { total: 3, gridLost: 3, fault: 0, limited: 0 } },
    ]) {
      const words = said(roof({ passing: 2, shutdown: 94, notShuttingDown: 2, ...more }));
      expect(words.heading).toBe('Treat your roof as live: 2 of 96 modules have not shut down.');
      expect(words.sentences[0]).toBe('Call Lowfield Solar Works now if they have not called you.');
      expect(words.caution).toContain('Do not rely on the shutdown.');
      expect(words.all).not.toContain('nothing for you to do');
    }
  });
  it('also where only the string is known', () => {
    expect(said(roof({ stringsNotShuttingDown: 1 })).heading).toBe(
      'Treat your roof as live: part of it has not shut down.',
    );
  });
});

describe('a roof that is not heard', () => {
  it('says since when, and claims nothing about the roof', () => {
    const words = said(
      roof({ quietLoggers: 1, lastSpokeAt: '2026-11-30T09:10:00.000Z', stuck: 2, silent: 94 }),
    );
    expect(words.heading).toBe('We have heard nothing from your roof since 30 Nov, 09:10.');
    expect(words.all).toContain('it may well be working');
    expect(words.all).not.toMatch(/kWh|passing|hold back/);
  });
  it('that has never spoken', () => {
    expect(said(roof({ loggers: 0, lastSpokeAt: null })).heading).toBe(
      'No readings have come from your roof yet.',
    );
  });
  it('remembers a shutdown that was in force when last heard', () => {
    const words = said(roof({ quietLoggers: 1, commands: [command('initiator')], inShutdownSince: AT }));
    expect(words.all).toContain('When last heard, it was shut down, wholly or in part.');
    expect(words.caution).toContain('Shut down does not mean without voltage.');
  });
});

describe('a roof being put into service', () => {
  it('counts the answers and warns', () => {
    const words = said(roof({ stage: 'commissioning', passing: 50, unheard: 46, power: null }));
    expect(words.heading).toBe('Your roof is being put into service: 50 of 96 modules have answered so far.');
    expect(words.caution).toContain('treat everything on the roof as live');
    expect(words.calm).toBe(false);
  });
  it('without modules that report', () => {
    expect(said(roof({ stage: 'commissioning', reporting: 0, passing: 0 })).heading).toBe(
      'Your roof is being put into service.',
    );
  });
});

describe('every combination', () => {
  const few = fc.integer({ min: 0, max: 3 });
  const anyRoof = fc
    .record({
      stage: fc.constantFrom('operating' as const, 'commissioning' as const),
      reporting: fc.constantFrom(0, 1, 96),
      stuck: few,
      silent: few,
      dark: fc.constantFrom(0, 2, 96),
      unheard: few,
      notShuttingDown: fc.constantFrom(0, 0, 1),
      unconfirmed: few,
      power: fc.constantFrom(null, 0, 31_000),
      daylight: fc.boolean(),
      quietLoggers: fc.constantFrom(0, 1),
      lastSpokeAt: fc.constantFrom(null, AT),
      inShutdownSince: fc.constantFrom(null, '2026-12-01T14:02:00.000Z'),
      commands: fc.constantFrom<CommandNow[]>([], [command('initiator')], [command('keep_alive_lost')]),
    })
    .map((more) => roof({ ...more, passing: Math.max(0, more.reporting - more.stuck - more.silent) }));

  it('never says that something is safe, never calls trouble nothing, uses no jargon', () => {
    fc.assert(
      fc.property(anyRoof, (now) => {
        const words = said(now);
        const text = [words.heading, words.all, words.caution ?? ''].filter(Boolean).join(' ');
        expect(text).not.toMatch(/\bsafe\b|undefined|NaN|null| {2}/);
        expect(text).not.toMatch(/\b(unit|string|initiator|gateway|logger|verdict|keep-alive|MPPT)s?\b/i);
        const troubled =
          now.notShuttingDown +
            now.stuck +
            now.silent +
            now.unheard +
            now.quietLoggers +
            now.commands.length >
            0 || now.inShutdownSince !== null;
        if (troubled) expect(text).not.toContain('Nothing needs your attention');
        if (now.commands.length > 0 || now.notShuttingDown > 0) expect(words.caution).not.toBeNull();
        expect(words.heading.length).toBeGreaterThan(10);
      }),
      { numRuns: 3000 },
    );
  });
});

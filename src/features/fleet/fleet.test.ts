import { describe, expect, it } from 'vitest';
import { cause, counts, site, unitOf } from '../../../tests/support/now';
import type { FleetView } from '../../schemas/api/fleet';
import { fleetFinding } from './finding';
import { fleetLines } from './list';
import { asksForSomebody, needOf, openAt } from './need';

const NOW = new Date('2026-06-01T14:00:00Z');
const ALL: FleetView = { q: '', stage: 'any', show: 'all', sort: 'need', order: 'down' };

const kestrel = site('Kestrel Row School', {
  counts: counts({ units: 312, passing: 312, notShuttingDown: 2 }),
  power: 93_000,
});
const kestrelCause = cause('not_shutting_down', 'Kestrel Row School', [unitOf('C2', 3), unitOf('C2', 11)]);
const tannery = site('Old Tannery Market Hall', {
  stage: 'commissioning',
  counts: counts({ units: 184, passing: 159, unheard: 23, shutdown: 2, stuck: 2 }),
  performanceRatio30d: null,
});
const tanneryCause = cause('stuck', 'Old Tannery Market Hall', [unitOf('B3', 5), unitOf('B3', 9)]);
const quayside = site('Quayside Cold Store', {
  counts: counts({ units: 1240, passing: 1220, shutdown: 20, stuck: 20 }),
});
const quaysideCause = cause(
  'stuck',
  'Quayside Cold Store',
  ['D1', 'D2'].flatMap((s) => Array.from({ length: 10 }, (_, i) => unitOf(s, i + 1))),
  { sharedPart: { kind: 'transmitter', name: 'T4' } },
);
const millrace = site('Millrace Housing', {
  counts: counts({ units: 640, passing: 592, silent: 48 }),
  silentGateways: 1,
});
const millraceCause = cause(
  'silent',
  'Millrace Housing',
  Array.from({ length: 48 }, (_, i) => unitOf('A1', i + 1)),
  { sharedPart: { kind: 'gateway', name: 'Gateway 3' } },
);
const lantern = site('Lantern Works', {
  counts: counts({ units: 420, shutdown: 420 }),
  inShutdownSince: '2026-06-01T13:21:00.000Z',
  power: 0,
});
const clinic = site('Weirside Clinic', { counts: counts({ units: 96, passing: 96 }), power: 31_000 });
const SITES = [clinic, lantern, millrace, quayside, tannery, kestrel];
const CAUSES = [millraceCause, quaysideCause, tanneryCause, kestrelCause];

describe("the fleet's finding", () => {
  it('says the gravest first, what to do, and how the rest stands', () => {
    const { heading, sentence } = fleetFinding(SITES, CAUSES);
    expect(heading).toBe('Two units at Kestrel Row School did not shut down');
    expect(sentence).toBe(
      'Treat every string there as live and call the site. Elsewhere 2,067 of 2,580 units pass, 22 are stuck in ' +
        'shutdown at two sites, 48 are silent, 23 unheard, and Lantern Works is in shutdown on purpose.',
    );
  });

  it('says that nothing needs attention when nothing does', () => {
    expect(fleetFinding([clinic], [])).toEqual({
      heading: 'Nothing needs attention',
      sentence: 'All 96 units pass.',
    });
    const night = site('Netloft Terrace', { counts: counts({ units: 60, dark: 60 }), daylight: false });
    expect(fleetFinding([clinic, night], []).sentence).toBe('96 of 156 units pass and 60 in the dark.');
  });

  it('never says so while a site does not report', () => {
    const away = site('Furrowfield Depot', { loggerConnected: false });
    expect(fleetFinding([clinic, away], []).heading).toBe('Furrowfield Depot does not report');
    expect(needOf(away, [])).toBe('no_report');
  });

  it('names a string where positions are unknown', () => {
    const whole = cause('not_shutting_down', 'Coopers Wharf Gallery', [unitOf('A1', null)]);
    const gallery = site('Coopers Wharf Gallery', { counts: counts({ units: 60 }) });
    expect(fleetFinding([gallery], [whole]).heading).toBe(
      'One string at Coopers Wharf Gallery did not shut down',
    );
    expect(needOf(gallery, [whole])).toBe('not_shutting_down');
    expect(openAt(gallery, [whole], NOW, 'UTC')).toBe('1 string did not shut down');
    expect(fleetFinding([gallery], []).sentence).toContain('60 tell nothing themselves');
  });

  it('counts over sites when a verdict holds at several', () => {
    expect(fleetFinding([tannery, quayside], [tanneryCause, quaysideCause]).heading).toBe(
      '22 units at two sites are stuck in shutdown',
    );
    const one = cause('stuck', 'Weirside Clinic', [unitOf('A1', 1)]);
    expect(fleetFinding([clinic], [one]).heading).toBe('One unit at Weirside Clinic is stuck in shutdown');
    const unsure = cause('unconfirmed', 'Weirside Clinic', [unitOf('A1', 1), unitOf('A1', 2)]);
    expect(fleetFinding([clinic], [unsure]).heading).toBe(
      "The shutdown of two units at Weirside Clinic can't be confirmed",
    );
  });

  it('says what to do when there is no site', () => {
    expect(fleetFinding([], []).heading).toBe('No site is set up yet');
  });
});

describe('the lines of the fleet', () => {
  const names = (view: Partial<FleetView>) =>
    fleetLines(SITES, CAUSES, { ...ALL, ...view }).map((l) => l.site.name.split(' ')[0]);

  it('go by need: hazard, stuck, silent, on purpose, nothing', () => {
    expect(names({})).toEqual(['Kestrel', 'Old', 'Quayside', 'Millrace', 'Lantern', 'Weirside']);
    expect(names({ order: 'up' })[0]).toBe('Weirside');
  });

  it('keep shutdown on purpose apart from what asks for somebody', () => {
    expect(names({ show: 'attention' })).toEqual(['Kestrel', 'Old', 'Quayside', 'Millrace']);
    expect(names({ show: 'shutdown' })).toEqual(['Lantern']);
    expect(asksForSomebody(needOf(lantern, []))).toBe(false);
  });

  it('filter by stage and by words, and sort by figures with the unknown last', () => {
    expect(names({ stage: 'commissioning' })).toEqual(['Old']);
    expect(names({ q: 'WEIR' })).toEqual(['Weirside']);
    expect(names({ q: 'nowhere' })).toEqual([]);
    expect(names({ sort: 'power' })[0]).toBe('Kestrel');
    expect(names({ sort: 'ratio' }).at(-1)).toBe('Old');
    expect(names({ sort: 'ratio', order: 'up' }).at(-1)).toBe('Old');
    expect(names({ sort: 'name' })[0]).toBe('Kestrel');
  });

  it('say what is open, with the shared part behind it', () => {
    expect(openAt(kestrel, [kestrelCause], NOW, 'UTC')).toBe('2 did not shut down');
    expect(openAt(tannery, [tanneryCause], NOW, 'UTC')).toBe('2 stuck, one cause · 23 unheard');
    expect(openAt(quayside, [quaysideCause], NOW, 'UTC')).toBe('20 stuck, one transmitter');
    expect(openAt(millrace, [millraceCause], NOW, 'UTC')).toBe('48 silent, one gateway');
    expect(openAt(lantern, [], NOW, 'UTC')).toBe('in shutdown since 13:21');
    expect(openAt(clinic, [], NOW, 'UTC')).toBe('nothing');
    const far = site('Salt Pan Ferry Hall', {
      timeZone: 'Pacific/Auckland',
      inShutdownSince: '2026-06-01T13:21:00.000Z',
    });
    expect(openAt(far, [], NOW, 'UTC')).toBe('in shutdown since 01:21 GMT+12');
  });
});

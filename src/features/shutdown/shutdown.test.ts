import { describe, expect, it } from 'vitest';
import { cause, counts, site, unitOf } from '../../../tests/support/now';
import type { CommandNow } from '../../schemas/api/now';
import type { ShutdownNow } from '../../schemas/api/shutdown';
import { SHUTDOWN_COLUMNS } from './columns';
import { shutdownFinding } from './finding';
import { firstPage } from './first-page';
import { CAUSES_AT_ONCE, heldSites, shownOf, shutdownGroups, shutdownRows } from './groups';
import { changedShutdown } from './query';

const command = (inForce: CommandNow['inForce'], since: string, where = 'Gym'): CommandNow => ({
  where,
  whereKind: 'zone',
  inForce,
  since,
  by: 'Main switch',
});
const hazard = cause('not_shutting_down', 'Kestrel Row School', [unitOf('C2', 3), unitOf('C2', 11)]);
const newer = cause('stuck', 'Old Tannery Market Hall', [unitOf('B3', 5), unitOf('B3', 9)], {
  since: '2026-06-01T13:50:00.000Z',
});
const older = cause('stuck', 'Quayside Cold Store', [unitOf('D1', 1), unitOf('D2', 1)], {
  since: '2026-06-01T08:12:00.000Z',
  sharedPart: { kind: 'transmitter', name: 'T4' },
});
const silent = cause('silent', 'Millrace Housing', [unitOf('A1', 1)], {
  sharedPart: { kind: 'gateway', name: 'Gateway 3' },
});
const CAUSES = [silent, newer, hazard, older];
const lantern = site('Lantern Works', {
  counts: counts({ units: 420, shutdown: 420 }),
  commands: [command('initiator', '2026-06-01T13:21:00.000Z')],
});
const depot = site('Furrowfield Depot', {
  commands: [command('keep_alive_lost', '2026-06-01T12:00:00.000Z')],
});

describe('the groups of the Shutdown page', () => {
  const all = shutdownGroups(CAUSES, { q: '', show: 'all' });

  it('go gravest question first, the oldest cause first within', () => {
    expect(all.map((g) => [g.verdict, g.causes.map((c) => c.siteName)])).toEqual([
      ['not_shutting_down', ['Kestrel Row School']],
      ['stuck', ['Quayside Cold Store', 'Old Tannery Market Hall']],
      ['silent', ['Millrace Housing']],
    ]);
  });

  it('filter by verdict, and by site, part, string or serial', () => {
    const names = (q: string) =>
      shutdownGroups(CAUSES, { q, show: 'all' }).flatMap((g) =>
        g.causes.map((c) => `${c.siteName} ${c.units.length}`),
      );
    expect(shutdownGroups(CAUSES, { q: '', show: 'stuck' }).map((g) => g.verdict)).toEqual(['stuck']);
    expect(names('t4')).toEqual(['Quayside Cold Store 2']);
    expect(names('tannery')).toEqual(['Old Tannery Market Hall 2']);
    expect(names('aab35')).toEqual(['Old Tannery Market Hall 1']);
    expect(names('d2')).toEqual(['Quayside Cold Store 1']);
    expect(names('nothing like it')).toEqual([]);
  });

  it('begin with their first causes where there are many; of hazards none is left out', () => {
    const many = (verdict: 'silent' | 'not_shutting_down') => ({
      verdict,
      causes: Array.from({ length: 30 }, (_, i) => cause(verdict, `Roof ${i}`, [unitOf('A1', 1)])),
    });
    expect(shownOf(many('silent'), new Set())).toHaveLength(CAUSES_AT_ONCE);
    expect(shownOf(many('silent'), new Set(['silent']))).toHaveLength(30);
    expect(shownOf(many('not_shutting_down'), new Set())).toHaveLength(30);
  });

  it('become one row a unit in the download', () => {
    const rows = shutdownRows(all);
    expect(rows).toHaveLength(7);
    const cells = SHUTDOWN_COLUMNS.map((c) => c.value(rows[0] ?? { cause: hazard, unit: null }));
    expect(cells.slice(0, 4)).toEqual(['not shutting down', 'Kestrel Row School', 'C2', 3]);
    const whole = shutdownRows([{ verdict: 'stuck', causes: [{ ...older, units: [] }] }]);
    expect(whole).toHaveLength(1);
  });
});

describe('shutdown on purpose', () => {
  it('is kept apart from a command that was lost', () => {
    const { purpose, lost } = heldSites([depot, lantern]);
    expect(purpose.map((h) => h.site.name)).toEqual(['Lantern Works']);
    expect(lost.map((h) => h.site.name)).toEqual(['Furrowfield Depot']);
  });

  it('makes no finding of itself', () => {
    expect(shutdownFinding([lantern], [])).toEqual({
      heading: 'No unit is stuck, and none is known to pass against a command',
      sentence: 'Lantern Works is in shutdown on purpose, wholly or in part.',
    });
  });
});

describe('the finding of the Shutdown page', () => {
  it('names the hazard, what to treat as live, and what else there is', () => {
    const { heading, sentence } = shutdownFinding([lantern, depot], CAUSES);
    expect(heading).toBe('Two units at Kestrel Row School did not shut down');
    expect(sentence).toContain('Treat every string there as live');
    expect(sentence).toContain('4\u00a0units are stuck in shutdown and 1\u00a0unit is silent');
    expect(sentence).toContain('Lantern Works is in shutdown on purpose');
    expect(sentence).toContain('At Furrowfield Depot the keep-alive or the power of a zone went');
  });

  it('never says that anything is safe', () => {
    for (const causes of [[], [silent], [older], [hazard]])
      expect(Object.values(shutdownFinding([lantern], causes)).join(' ')).not.toMatch(/\bsafe\b/i);
  });
});

describe('what /live brings', () => {
  it('lets a site leave the page once nothing holds there', () => {
    const now: ShutdownNow = {
      at: '2026-06-01T14:00:00.000Z',
      causes: [hazard],
      sites: [site('Kestrel Row School'), lantern],
      contacts: [],
      acknowledgements: [],
    };
    const next = changedShutdown(
      now,
      { causes: [], sites: [{ ...lantern, commands: [] }, depot] },
      '2026-06-01T14:01:00.000Z',
    );
    expect(next.causes).toEqual([]);
    expect(next.sites.map((s) => s.name)).toEqual(['Furrowfield Depot']);
  });
});

describe('the first page of a large fleet', () => {
  const many = Array.from({ length: CAUSES_AT_ONCE + 5 }, (_, i) =>
    cause('stuck', `Works ${100 + i}`, [unitOf('A1', 1), unitOf('A1', 2)], {
      since: new Date(Date.UTC(2026, 5, 1, 8, i)).toISOString(),
    }),
  );
  const now: ShutdownNow = {
    at: '2026-06-01T14:00:00.000Z',
    causes: [...many, hazard],
    sites: [...[...many, hazard].map((c) => site(c.siteName)), lantern],
    contacts: [],
    acknowledgements: [],
  };

  it('is all there is, where that is little', () => {
    const few = { ...now, causes: [hazard, newer] };
    expect(firstPage(few, { q: '', show: 'all' })).toEqual({ shutdown: few, whole: null });
  });

  it('holds what is drawn, every site that is held, and counts the whole', () => {
    const { shutdown, whole } = firstPage(now, { q: '', show: 'all' });
    expect(shutdown.causes).toHaveLength(CAUSES_AT_ONCE + 1);
    expect(shutdown.causes).toContain(hazard);
    expect(shutdown.sites.map((s) => s.name)).toContain('Lantern Works');
    expect(shutdown.sites.map((s) => s.name)).not.toContain('Works 124');
    expect(whole?.groups.stuck).toEqual({ causes: many.length, units: 2 * many.length });
    expect(whole?.finding).toEqual(shutdownFinding(now.sites, now.causes));
  });

  it('of a search holds what is found, with all its units', () => {
    const { shutdown } = firstPage(now, { q: 'works 124', show: 'all' });
    expect(shutdown.causes.map((c) => [c.siteName, c.units.length])).toEqual([['Works 124', 2]]);
  });
});

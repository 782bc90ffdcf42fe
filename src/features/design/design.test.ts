import { describe, expect, it } from 'vitest';
import { DESIGN_CHECKS } from '../../domain/photovoltaics/limits/design-finding';
import type { SiteDesign, SiteDesignItem } from '../../schemas/api/design';
import { DESIGN_DEFAULTS, shownFindings } from './list';
import { CHECK_WORDS, designFinding, mayNotShutDown, stringsInShort } from '../../words/design-sentences';

const finding = (changed: Partial<SiteDesignItem>): SiteDesignItem => ({
  key: `${changed.check ?? 'unit_current'} ${changed.outcome ?? 'within'}`,
  check: 'unit_current',
  strings: [{ id: 'a1', name: 'A1' }],
  outcome: 'within',
  value: 12,
  limit: 15,
  unit: 'A',
  safety: true,
  words: 'words',
  clause: 'NEC 690.8(A)(1)',
  remedy: null,
  alternatives: [],
  ...changed,
});
const design = (findings: SiteDesignItem[], strings = 3): SiteDesign => ({
  at: '2026-12-01T12:00:00.000Z',
  siteId: '00000000-0000-4000-8000-000000000000',
  siteName: 'Old Tannery Market Hall',
  timeZone: 'UTC',
  stage: 'commissioning',
  ruleSet: 'rapid_shutdown_30s',
  structure: 'other_building',
  temperatures: { coldest: { value: -5, from: 'entered' }, hottest: { value: 35, from: 'entered' } },
  strings,
  stringsWithoutSlots: [],
  findings,
});
const heading = (findings: SiteDesignItem[], strings?: number) =>
  designFinding(design(findings, strings)).heading.replaceAll('\u00a0', ' ');

describe('the heading of the design checks', () => {
  it.each([
    [[finding({})], '3 strings stay within every limit'],
    [[finding({ outcome: 'cannot_tell' })], 'Nothing is exceeded; 1 point can’t be told'],
    [[finding({ outcome: 'exceeded' })], 'One of 3 strings is beyond a limit'],
    [
      [finding({ outcome: 'exceeded', safety: false, check: 'mppt_window_hot' })],
      'No limit of safety is exceeded; 1 string may lose energy',
    ],
  ])('%#: %s', (findings, words) => expect(heading(findings)).toBe(words));
  it('of a site without strings asks for them', () => {
    expect(heading([], 0)).toBe('No string to check yet');
  });
  it('never approves', () => {
    for (const findings of [[finding({})], [finding({ outcome: 'exceeded' })]])
      expect(designFinding(design(findings)).sentence).toMatch(/never an approval/);
  });
});

describe('strings in short', () => {
  const of = (...names: string[]) => stringsInShort(names.map((name) => ({ name })));
  it.each([
    [of('A1', 'A2', 'A3', 'B1'), 'A1 to A3, B1'],
    [of('A1', 'A2'), 'A1, A2'],
    [of('A9', 'A10', 'A11', 'A13'), 'A9 to A11, A13'],
    [of('North', 'South 1'), 'North, South 1'],
    [of('A01', 'A02', 'A03'), 'A01 to A03'],
    [of(), ''],
  ])('%s', (short, words) => expect(short).toBe(words));
});

describe('the list of design checks', () => {
  const all = design([
    finding({ outcome: 'exceeded', check: 'slots_without_unit', words: 'No unit at position 5' }),
    finding({ outcome: 'cannot_tell', check: 'series_fuse' }),
    finding({ outcome: 'within' }),
  ]);
  it('shows what is open first, and finds by string, clause and word', () => {
    expect(shownFindings(all, DESIGN_DEFAULTS)).toHaveLength(2);
    expect(shownFindings(all, { ...DESIGN_DEFAULTS, show: 'all' })).toHaveLength(3);
    for (const q of ['a1', '690.8', 'position 5', 'slots'])
      expect(shownFindings(all, { ...DESIGN_DEFAULTS, show: 'all', q }).length, q).toBeGreaterThan(0);
    expect(shownFindings(all, { ...DESIGN_DEFAULTS, q: 'b7' })).toEqual([]);
  });
  it('sorts by check in the order of the checks, and the other way round', () => {
    const up = shownFindings(all, { ...DESIGN_DEFAULTS, show: 'all', sort: 'check' }).map((f) => f.check);
    expect(up).toEqual(['unit_current', 'series_fuse', 'slots_without_unit']);
    const down = shownFindings(all, { ...DESIGN_DEFAULTS, show: 'all', sort: 'check', order: 'up' });
    expect(down.map((f) => f.check)).toEqual([...up].reverse());
  });
  it('names strings that may not shut down', () => {
    expect(mayNotShutDown(all).map((s) => s.name)).toEqual(['A1']);
    expect(mayNotShutDown(design([finding({ outcome: 'exceeded' })]))).toEqual([]);
  });
  it('has words for every check', () => {
    for (const check of DESIGN_CHECKS) expect(CHECK_WORDS[check]).toBeTruthy();
  });
});

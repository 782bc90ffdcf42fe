import { describe, expect, it } from 'vitest';
import type { SiteSteps, StepNow } from '../../schemas/api/commissioning';
import { daysInStep, listedSites, siteHeading, UNDER_WAY_DEFAULTS, underWayHeading } from './under-way';

const AT = '2026-12-01T12:00:00.000Z';
const step = (key: StepNow['key'], state: StepNow['state'], more: Partial<StepNow> = {}): StepNow => ({
  key,
  state,
  words: '161 of 184 heard',
  gaps: [],
  startedAt: null,
  ...more,
});
const gap = (key: string) => ({ key, words: `${key}.`, accepted: false });
const site = (name: string, more: Partial<SiteSteps> = {}): SiteSteps => ({
  id: '00000000-0000-4000-8000-000000000001',
  name,
  place: '',
  timeZone: 'UTC',
  stage: 'commissioning',
  units: 184,
  strings: 13,
  rollCallRunning: false,
  steps: [
    step('as_built', 'done'),
    step('roll_call', 'under_way', { gaps: [gap('a'), gap('b')], startedAt: '2026-11-28T12:00:00.000Z' }),
    step('handover', 'not_started'),
  ],
  lastHand: null,
  ...more,
});

describe('the list of sites under way', () => {
  it.each<[SiteSteps[], string]>([
    [[], 'No site is being commissioned'],
    [[site('A')], 'One site is being commissioned'],
    [[site('A'), site('B')], '2 sites are being commissioned'],
    [[site('A', { rollCallRunning: true }), site('B')], 'The roll call is running at A: 161 of 184 heard'],
    [
      [site('A', { rollCallRunning: true }), site('B', { rollCallRunning: true })],
      'Roll calls are running at 2 sites',
    ],
  ])('%#', (sites, words) => {
    expect(underWayHeading(sites).replace(/\u00a0/g, ' ')).toBe(words);
  });

  it('counts days from the first record of the step that is worked on', () => {
    expect(daysInStep(site('A'), AT)).toBe(3);
    expect(daysInStep(site('A', { steps: [step('as_built', 'not_started')] }), AT)).toBeNull();
  });

  it('filters by name, place, person and step', () => {
    const sites = [
      site('Mill', { place: 'by the weir' }),
      site('Barn', { lastHand: { person: 'Odile', at: AT } }),
      site('Shed', { steps: [step('as_built', 'under_way')] }),
    ];
    const names = (view: Partial<typeof UNDER_WAY_DEFAULTS>) =>
      listedSites(sites, { ...UNDER_WAY_DEFAULTS, ...view }, AT).map((s) => s.name);
    expect(names({})).toEqual(['Barn', 'Mill', 'Shed']);
    expect(names({ q: 'WEIR' })).toEqual(['Mill']);
    expect(names({ q: 'odile' })).toEqual(['Barn']);
    expect(names({ step: 'roll_call' })).toEqual(['Barn', 'Mill']);
    expect(names({ step: 'as_built' })).toEqual(['Shed']);
  });

  it('sorts by days and by what blocks', () => {
    const old = site('Old', {
      steps: [step('roll_call', 'under_way', { startedAt: '2026-11-01T12:00:00.000Z' })],
    });
    const sites = [site('Mill'), old];
    expect(listedSites(sites, { ...UNDER_WAY_DEFAULTS, sort: 'days' }, AT)[0]?.name).toBe('Old');
    expect(listedSites(sites, { ...UNDER_WAY_DEFAULTS, sort: 'blocks' }, AT)[0]?.name).toBe('Mill');
  });
});

describe('the heading of a site', () => {
  it('counts what blocks', () => {
    expect(siteHeading(site('A'))).toMatchObject({ finding: 'One of 3\u00a0steps is done' });
    expect(siteHeading(site('A')).sentence.replaceAll('\u00a0', ' ')).toContain(
      '2 points block the handover',
    );
  });
  it('says when nothing blocks, and when it is done', () => {
    const ready = site('A', { steps: [step('as_built', 'done'), step('handover', 'not_started')] });
    expect(siteHeading(ready).finding).toBe('A is ready to be handed over');
    expect(siteHeading(site('A', { steps: [step('handover', 'done')] })).finding).toBe('A is handed over');
  });
});

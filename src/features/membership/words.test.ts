import { describe, expect, it } from 'vitest';
import { groupsOf, suspectWords } from '../../components/placements/suspects';
import type { IsolationPage, IsolationRun } from '../../schemas/api/isolation';
import type { MembershipPage, MembershipSuspect } from '../../schemas/api/membership';
import { decisive, isolationWords, membershipWords } from './words';

const ID = '00000000-0000-4000-8000-00000000000';
const at = '2026-12-01T14:00:00.000Z';
const suspect = (name: string, more: Partial<MembershipSuspect> = {}): MembershipSuspect => {
  const [string = '', position] = name.split('-');
  return {
    stringId: `${ID}1`,
    string,
    position: Number(position),
    serial: `U-${name}`,
    outcome: 'elsewhere',
    fitsOwn: false,
    otherString: 'D1',
    otherStringId: `${ID}2`,
    logOdds: 40,
    apartOwn: 0.06,
    apartOther: 0.004,
    steps: 22,
    undecidedWith: [],
    words: '',
    counterpart: null,
    series: { at: [], unit: [], own: [], otherName: null, other: [] },
    ...more,
  };
};
const pair = (): [MembershipSuspect, MembershipSuspect] => [
  suspect('C3-4', { counterpart: { stringId: `${ID}2`, string: 'D1', position: 4, serial: 'U-D1-4' } }),
  suspect('D1-4', {
    otherString: 'C3',
    counterpart: { stringId: `${ID}1`, string: 'C3', position: 4, serial: 'U-C3-4' },
  }),
];
const nothing: IsolationPage = { at, reportIntervalS: 10, open: null, currents: null, runs: [] };
const page = (more: Partial<MembershipPage> = {}): MembershipPage => ({
  at,
  site: { id: `${ID}9`, name: 'Old Tannery Market Hall', place: '', timeZone: 'UTC', stage: 'commissioning' },
  window: { from: at, to: at, hours: 6, stepS: 60, steps: 100, withCurrent: 90 },
  counts: { here: 180, elsewhere: 0, cantTell: 4, fitsNone: 0, mute: 0 },
  reasons: [],
  suspects: [],
  daylight: true,
  strings: [],
  isolation: nothing,
  ...more,
});
type Unit = IsolationRun['finding']['units'][number];
const unit = (name: string, fate: Unit['fate']): Unit => {
  const [string = '', position] = name.split('-');
  return {
    serial: `U-${name}`,
    string,
    position: Number(position),
    fate,
    before: 8,
    during: 0,
    dropped: null,
  };
};
const run = (finding: Partial<IsolationRun['finding']>, more: Partial<IsolationRun> = {}): IsolationRun => ({
  id: `${ID}5`,
  stringId: `${ID}1`,
  stringName: 'C3',
  startedAt: at,
  startedBy: 'Bram Ottersley',
  personOnSite: 'Per Aalto',
  endsAt: at,
  stoppedAt: at,
  stoppedBy: 'Bram Ottersley',
  finding: {
    outcome: 'told',
    reason: null,
    strings: ['C3'],
    dropped: null,
    returned: null,
    units: [],
    inputs: [],
    ...finding,
  },
  ...more,
});
const plain = (text: string): string => text.replace(/\u00a0/g, ' ');
const heading = (p: MembershipPage, isolation = nothing): string =>
  plain(membershipWords(p, isolation).heading);

describe('what currents say', () => {
  it('a pair is one group, and says both figures', () => {
    const [a, b] = pair();
    expect(groupsOf([a, b])).toEqual([[a, b]]);
    expect(plain(suspectWords([a, b]))).toBe(
      'C3-4 and D1-4 look exchanged: each carries a current like the other string’s (0.4 % apart over 22 reports, against 6.0 % from its own; 0.4 % apart over 22 reports, against 6.0 % from its own).',
    );
    const unsure = { ...a, outcome: 'cant_tell' as const };
    expect(suspectWords([unsure, b])).toContain('may be exchanged');
    expect(suspectWords([unsure, b])).toContain('only isolating one decides');
  });
  it('one alone names a string and never a position there', () => {
    expect(suspectWords([suspect('C3-4')])).toContain('Which unit belongs there the currents don’t say');
    const alike = suspect('C3-4', { outcome: 'cant_tell', otherString: null, undecidedWith: ['A1', 'D1'] });
    expect(suspectWords([alike])).toContain('A1 and D1 and maybe others fit alike');
    expect(suspectWords([suspect('C3-4', { outcome: 'fits_none' })])).toContain('measurement may be wrong');
  });
  it.each<[string, Partial<MembershipPage>, string]>([
    [
      'a pair',
      { suspects: pair(), counts: { here: 180, elsewhere: 2, cantTell: 2, fitsNone: 0, mute: 0 } },
      'C3-4 and D1-4 look exchanged',
    ],
    ['one', { suspects: [suspect('C3-4')] }, 'C3-4 carries the current of D1'],
    ['some can’t be told', {}, '180 of 184 units carry the current of their string'],
    [
      'all here',
      { counts: { here: 184, elsewhere: 0, cantTell: 0, fitsNone: 0, mute: 0 } },
      'All 184 units carry the current of their string',
    ],
    [
      'alike',
      { counts: { here: 0, elsewhere: 0, cantTell: 184, fitsNone: 0, mute: 0 } },
      'Can’t tell for any of 184 units',
    ],
    [
      'no report',
      { window: { from: at, to: at, hours: 6, stepS: 60, steps: 0, withCurrent: 0 } },
      'Can’t tell yet: no unit has told its current',
    ],
    [
      'no current',
      { window: { from: at, to: at, hours: 6, stepS: 60, steps: 9, withCurrent: 0 } },
      'Can’t tell yet: no string carried current',
    ],
    [
      'mute',
      { counts: { here: 0, elsewhere: 0, cantTell: 0, fitsNone: 0, mute: 60 } },
      'No unit here tells its current',
    ],
    [
      'no string fits',
      { counts: { here: 183, elsewhere: 0, cantTell: 0, fitsNone: 1, mute: 0 } },
      'One unit fits no string’s current',
    ],
  ])('%s', (_, more, words) => {
    expect(heading(page(more))).toBe(words);
  });
  it('at night it says so', () => {
    const dark = page({
      daylight: false,
      window: { from: at, to: at, hours: 6, stepS: 60, steps: 9, withCurrent: 0 },
    });
    expect(membershipWords(dark, nothing).strong).toBe('It is night there');
  });
});

describe('what isolating a string shows', () => {
  it.each<[Partial<IsolationRun['finding']>, Partial<IsolationRun>, string]>([
    [
      { units: [unit('C3-1', 'member_dropped'), unit('C3-2', 'member_dropped')] },
      {},
      'All 2 units of C3 are in it',
    ],
    [
      { units: [unit('C3-1', 'member_dropped'), unit('C3-4', 'member_kept'), unit('D1-4', 'other_dropped')] },
      {},
      'C3-4 kept its current; D1-4 went to zero with C3',
    ],
    [
      { units: [unit('C3-1', 'member_dropped'), unit('C3-2', 'not_told')] },
      {},
      '1 unit is in C3, 1 told nothing',
    ],
    [{ outcome: 'watching' }, { stoppedAt: null, stoppedBy: null }, 'Watching C3: nothing has fallen yet'],
    [{ outcome: 'watching' }, { stoppedBy: null }, 'C3: nobody’s current went to zero'],
    [{ outcome: 'cant_tell', reason: 'everything_stopped' }, {}, 'C3: can’t tell'],
    [{ outcome: 'other_string', strings: ['B4'] }, {}, 'Not C3 but B4 went to zero'],
    [{ outcome: 'several_strings', strings: ['C3', 'C2'] }, {}, 'C3 and C2 went to zero together'],
    [{ outcome: 'input_only' }, {}, 'The input lost C3’s part'],
  ])('%#', (finding, more, words) => {
    expect(plain(isolationWords(run(finding, more)).heading)).toBe(words);
  });

  it('comes before what currents suggest, as long as the units still stand there', () => {
    const found = run({ units: [unit('C3-4', 'member_kept')] });
    const isolation = { ...nothing, runs: [found] };
    const standing = page();
    const slot = { position: 4, serial: 'U-C3-4' };
    const strings = [{ name: 'C3', slots: [slot] }] as unknown as MembershipPage['strings'];
    expect(decisive({ ...standing, strings }, isolation)).toBe(found);
    expect(decisive(standing, isolation)).toBeNull();
    const open = run({ outcome: 'watching' }, { stoppedAt: null });
    expect(heading(standing, { ...isolation, open })).toContain('Watching C3');
  });
});

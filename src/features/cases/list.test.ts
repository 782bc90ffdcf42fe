import { describe, expect, it } from 'vitest';
import type { CaseItem, CasesPage } from '../../schemas/api/cases';
import { CASES_DEFAULTS, casesFinding, listedCases } from './list';

const item = (change: Partial<CaseItem>): CaseItem => ({
  id: `id-${change.number ?? 1}`,
  number: 1,
  title: 'Unit stuck',
  siteId: 'site-1',
  siteName: 'Clinic',
  timeZone: 'UTC',
  kind: 'stuck',
  origin: 'hand',
  state: 'open',
  assignee: null,
  dueOn: null,
  overdue: false,
  openedAt: '2026-06-01T10:00:00.000Z',
  openedBy: 'Ada Birch',
  changedAt: '2026-06-01T10:00:00.000Z',
  closedAt: null,
  outcome: null,
  strings: [],
  units: 0,
  comments: 0,
  photos: 0,
  checked: 0,
  version: 1,
  ...change,
});
const tom = { id: 'p2', name: 'Tom Lee' };
const cases = [
  item({ number: 1, dueOn: '2026-06-03', assignee: tom }),
  item({ number: 2, title: 'Low in the morning', kind: 'low_output', strings: [{ id: 's', name: 'B12' }] }),
  item({ number: 3, dueOn: '2026-05-30', overdue: true, siteId: 'site-2', siteName: 'School' }),
  item({ number: 4, state: 'done', closedAt: '2026-06-02T10:00:00.000Z', assignee: tom }),
];
const numbers = (some: Partial<typeof CASES_DEFAULTS>) =>
  listedCases(cases, { ...CASES_DEFAULTS, sort: 'number', dir: 'asc', ...some }, 'p2').map((c) => c.number);

describe('the cases of a view', () => {
  it('filters by person, day, site, kind and state', () => {
    expect(numbers({})).toEqual([1, 2, 3, 4]);
    expect(numbers({ who: 'mine' })).toEqual([1, 4]);
    expect(numbers({ who: 'unassigned' })).toEqual([2, 3]);
    expect(numbers({ due: 'overdue' })).toEqual([3]);
    expect(numbers({ site: 'site-2' })).toEqual([3]);
    expect(numbers({ kind: 'low_output' })).toEqual([2]);
    expect(numbers({ show: 'open' })).toEqual([1, 2, 3]);
  });

  it('finds by title, string, person and number, every word', () => {
    expect(numbers({ q: 'b12' })).toEqual([2]);
    expect(numbers({ q: 'lee clinic' })).toEqual([1, 4]);
    expect(numbers({ q: '#3' })).toEqual([3]);
    expect(numbers({ q: 'b12 school' })).toEqual([]);
  });

  it('puts what has no day or nobody last, whichever way', () => {
    expect(numbers({ sort: 'due', dir: 'asc' })).toEqual([3, 1, 4, 2]);
    expect(numbers({ sort: 'due', dir: 'desc' })).toEqual([1, 3, 4, 2]);
    expect(numbers({ sort: 'assignee', dir: 'desc' })).toEqual([4, 1, 3, 2]);
  });
});

describe('the heading', () => {
  const page = (list: CaseItem[]): CasesPage => ({
    at: '2026-06-01T12:00:00.000Z',
    me: 'p2',
    cases: list,
    closedDays: 30,
    people: [],
    sites: [],
  });
  it('says what is open, overdue, one’s own and nobody’s', () => {
    expect(casesFinding(page(cases))).toEqual({
      finding: 'Three cases are open',
      sentence: '1 is overdue, 1 is yours and 2 have nobody yet.',
    });
    expect(casesFinding(page([])).finding).toBe('No case is open');
  });
});

import { describe, expect, it } from 'vitest';
import { lowOutputView } from '../schemas/api/low-output';
import { lowRows, type LowOutput, type LowString } from '../schemas/api/low-output-rows';
import { lowFinding } from './low-output-sentences';

const row = (name: string, more: Partial<LowString> = {}): LowString => ({
  site: { id: '00000000-0000-4000-8000-000000000001', name: 'Mill', timeZone: 'UTC' },
  string: { id: `string ${name}`, name },
  plane: 'South',
  day: '2026-11-30',
  since: '2026-11-27',
  share: 0.14,
  lossKWhDay: 2,
  lossKWhDayLow: 1.5,
  lossKWhDayHigh: 2.5,
  moneyDay: null,
  lossKWh: null,
  signature: 'units_missing',
  words: 'the voltage of 2 of 14 modules is missing',
  method: 'siblings',
  scope: 'string',
  confidence: 0.85,
  cause: null,
  openCase: null,
  ...more,
});
const low = (rows: LowString[], more: Partial<LowOutput> = {}): LowOutput => ({
  at: '2026-12-01T12:00:00Z',
  currency: 'EUR',
  rows,
  judged: 40,
  cantTell: 0,
  unjudgedSites: [],
  ...more,
});
const plain = (text: string) => text.replaceAll('\u00a0', ' ');
const view = (more: object) => lowOutputView.parse(more);

describe('the finding about low strings', () => {
  it('says how many, what it is worth and what is not taken up', () => {
    const { heading, sentence } = lowFinding(
      low([row('A1', { moneyDay: 0.6 }), row('A2', { openCase: { id: 'x', number: 7 } })]),
    );
    expect(plain(heading)).toBe('Two of 40 strings make less than they should');
    expect(plain(sentence)).toBe('Together 4.0 kWh a day, €0.60 where a price is set. One without a case.');
  });

  it('does not take what is not judged for sound', () => {
    expect(lowFinding(low([], { judged: 0 })).heading).toBe('No string’s output was judged yet');
    const none = lowFinding(low([], { cantTell: 3, unjudgedSites: ['Netloft'] }));
    expect(plain(none.heading)).toBe('All strings that could be judged make what they should');
    expect(plain(none.sentence)).toContain('37 strings judged. Of 3 others nothing can be told yet');
    expect(plain(none.sentence)).toContain('No night of Netloft was judged');
  });
});

describe('the list of low strings', () => {
  const rows = [
    row('B10', { lossKWhDay: 1, openCase: { id: 'x', number: 7 } }),
    row('B2', { lossKWhDay: null, signature: 'shade', words: 'low while the sun stands in the east' }),
    row('A1', { lossKWhDay: 3, plane: 'East' }),
  ];
  const names = (more: object) => lowRows(rows, view(more)).map((r) => r.string.name);

  it('begins with the greatest loss; what is not known stands last either way', () => {
    expect(names({})).toEqual(['A1', 'B10', 'B2']);
    expect(names({ order: 'up' })).toEqual(['B10', 'A1', 'B2']);
    expect(names({ sort: 'string', order: 'up' })).toEqual(['A1', 'B2', 'B10']);
  });

  it('is filtered by what it looks like, by case, and by words', () => {
    expect(names({ signature: 'shade' })).toEqual(['B2']);
    expect(names({ case: 'none' })).toEqual(['A1', 'B2']);
    expect(names({ q: 'east' })).toEqual(['A1', 'B2']);
    expect(names({ signature: 'no such', case: 'x', sort: 'y' })).toHaveLength(3);
  });
});

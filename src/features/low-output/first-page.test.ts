import { describe, expect, it } from 'vitest';
import { lowOutputView } from '../../schemas/api/low-output';
import { lowRows, type LowOutput, type LowString } from '../../schemas/api/low-output-rows';
import { firstPage } from './first-page';

const row = (n: number): LowString => ({
  site: { id: `site ${n % 3}`, name: ['Mill', 'Barn', 'Quay'][n % 3] ?? '', timeZone: 'UTC' },
  string: { id: `string ${n}`, name: `A${n}` },
  plane: n % 2 === 0 ? 'South' : 'East',
  day: '2026-11-30',
  since: '2026-11-27',
  share: 0.14,
  lossKWhDay: (n * 37) % 101,
  lossKWhDayLow: 1.5,
  lossKWhDayHigh: 2.5,
  moneyDay: n === 70 ? 0.5 : null,
  lossKWh: null,
  signature: 'unclear',
  words: 'low',
  method: 'siblings',
  scope: 'string',
  confidence: 0.85,
  cause: null,
  openCase: null,
});
const low = (rows: number): LowOutput => ({
  at: '2026-12-01T12:00:00Z',
  currency: 'EUR',
  rows: Array.from({ length: rows }, (_, n) => row(n)),
  judged: 400,
  cantTell: 0,
  unjudgedSites: ['Loft'],
});
const view = (more: object) => lowOutputView.parse(more);

describe('the first page of low strings', () => {
  it('is all of them where they fit', () => {
    expect(firstPage(low(50), view({}))).toEqual({ low: low(50), whole: null });
  });

  it('has the rows with which the view begins, and says of the others what all of them would say', () => {
    const all = low(80);
    const asked = view({ q: 'south', sort: 'loss' });
    const { low: first, whole } = firstPage(low(140), view({}));
    expect(first.rows).toEqual(lowRows(low(140).rows, view({})).slice(0, 50));
    expect(whole).toMatchObject({ rows: 140, shown: 140, priced: true });
    expect(whole?.sites.map((s) => s.name)).toEqual(['Barn', 'Mill', 'Quay']);
    expect(whole?.finding.heading).toContain('140');
    expect(whole?.finding.sentence).toContain('Loft');
    expect(firstPage(all, asked).whole).toMatchObject({ rows: 80, shown: 40 });
    expect(firstPage(all, asked).low.rows).toEqual(lowRows(all.rows, asked));
  });
});

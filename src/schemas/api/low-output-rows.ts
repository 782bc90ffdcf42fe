import type { SignatureKind } from '../../domain/output/signature';

/** Strings that make less than they should, as their newest judged day found them. Without zod: it goes to the browser. */

export const SIGNATURES = [
  'units_missing',
  'bypassed_substring',
  'shade',
  'soiling',
  'current_low',
  'everything',
  'unclear',
] as const satisfies readonly SignatureKind[];

export interface LowString {
  site: { id: string; name: string; timeZone: string };
  string: { id: string; name: string };
  plane: string;
  /** The judged day, yyyy-mm-dd. */
  day: string;
  /** The first day on which it was low, of those that decided; with the cause's own start where that is older. */
  since: string;
  /** Of what was expected, over the days that decided. */
  share: number | null;
  /** kWh a day, and in the middle 90 %. */
  lossKWhDay: number | null;
  lossKWhDayLow: number | null;
  lossKWhDayHigh: number | null;
  /** Money a day by the site's price on the judged day. */
  moneyDay: number | null;
  /** kWh since it was found; null: no cause is open. */
  lossKWh: number | null;
  signature: SignatureKind;
  words: string;
  method: 'siblings' | 'model';
  /** The figures are those of an input that several strings share. */
  scope: 'string' | 'input';
  confidence: number;
  cause: string | null;
  openCase: { id: string; number: number } | null;
}

export interface LowOutput {
  at: string;
  currency: string | null;
  rows: LowString[];
  /** Strings judged within the last fourteen days, and those of them of which nothing could be told. */
  judged: number;
  cantTell: number;
  /** Operating sites of which no night was judged within that time. */
  unjudgedSites: string[];
}

export const LOW_SORTS = [
  'loss',
  'money',
  'since',
  'string',
  'site',
  'share',
  'confidence',
  'plane',
] as const;
export type LowSort = (typeof LOW_SORTS)[number];
export type LowOutputView = {
  q: string;
  /** By identifier, or all. */
  site: string;
  signature: SignatureKind | 'all';
  case: 'all' | 'open' | 'none';
  sort: LowSort;
  order: 'up' | 'down';
};

const VALUE: Record<LowSort, (r: LowString) => number | string | null> = {
  loss: (r) => r.lossKWhDay,
  money: (r) => r.moneyDay,
  since: (r) => r.since,
  string: (r) => r.string.name,
  site: (r) => r.site.name,
  share: (r) => r.share,
  confidence: (r) => r.confidence,
  plane: (r) => r.plane,
};
const byName = new Intl.Collator('en', { numeric: true });

/** The rows that the filters leave, in order; what is not known stands last either way. Pages and CSV agree by this. */
export function lowRows(rows: readonly LowString[], view: LowOutputView): LowString[] {
  const words = view.q.toLowerCase();
  const of = VALUE[view.sort];
  const sign = view.order === 'down' ? -1 : 1;
  return rows
    .filter(
      (r) =>
        (view.site === 'all' || r.site.id === view.site) &&
        (view.signature === 'all' || r.signature === view.signature) &&
        (view.case === 'all' || (view.case === 'open') === (r.openCase !== null)) &&
        `${r.site.name} ${r.string.name} ${r.plane} ${r.words}`.toLowerCase().includes(words),
    )
    .sort((a, b) => {
      const [x, y] = [of(a), of(b)];
      if (x === null || y === null) return Number(x === null) - Number(y === null);
      const way =
        typeof x === 'number' && typeof y === 'number' ? x - y : byName.compare(String(x), String(y));
      return (
        sign * way || byName.compare(a.site.name, b.site.name) || byName.compare(a.string.name, b.string.name)
      );
    });
}

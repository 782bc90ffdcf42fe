import { beforeAll, describe, expect, it } from 'vitest';
import { pageWeights, type PageWeight } from '../support/page-weight';

/** Scripts that a page's first load fetches, gzip: by the build itself, so nothing grows unnoticed. Bytes. */
const WITHOUT_CHART = 95_000;
const WITH_CHART = 290_000;
/** Before the chart comes. */
const BEFORE_CHART = 120_000;
/** What an island that is scrolled to brings beyond what its page has. */
const VISIBLE = 45_000;

let pages: PageWeight[];
beforeAll(async () => {
  pages = await pageWeights();
});

/** Those over a limit, with the heaviest of their files: what the failing test says. */
const over = (limit: (page: PageWeight) => number, of: (page: PageWeight) => number): string[] =>
  pages
    .filter((p) => of(p) > limit(p))
    .map(
      (p) =>
        `${p.page}: ${of(p)}, of it ${p.files
          .slice(0, 8)
          .map(([f, bytes]) => `${f} ${bytes}`)
          .join(', ')}`,
    );

describe('what a page loads', () => {
  it('is weighed: islands, their renderer, the chart', () => {
    const fleet = pages.find((p) => p.page === 'index.astro');
    expect(fleet?.first).toBeGreaterThan(50_000);
    expect(pages.filter((p) => p.chart > 0).map((p) => p.page)).toContain(
      'sites/[site]/strings/[string].astro',
    );
    expect(pages.find((p) => p.page === 'sign-in.astro')?.first).toBeGreaterThan(0);
  });

  it('stays below its limit without a chart', () => {
    expect(
      over(
        () => WITHOUT_CHART,
        (p) => (p.chart > 0 ? 0 : p.first),
      ),
    ).toEqual([]);
  });

  it('stays below its limits with a chart, which comes late', () => {
    expect(
      over(
        () => BEFORE_CHART,
        (p) => (p.chart > 0 ? p.first : 0),
      ),
    ).toEqual([]);
    expect(
      over(
        () => WITH_CHART,
        (p) => (p.chart > 0 ? p.first + p.chart : 0),
      ),
    ).toEqual([]);
  });

  it('brings little more with an island that is scrolled to', () => {
    const islands = pages.flatMap((p) => p.visible.map(([name, bytes]) => ({ page: p.page, name, bytes })));
    expect(islands.map((i) => i.name)).toContain('LiveExample');
    expect(islands.filter((i) => i.bytes === 0)).toEqual([]);
    expect(islands.filter((i) => i.bytes > VISIBLE)).toEqual([]);
  });
});

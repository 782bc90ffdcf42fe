import { beforeAll, describe, expect, it } from 'vitest';
import { pageWeights, type PageWeight } from '../support/page-weight';

/** Scripts that a page's first load fetches, gzip: by the build itself, so nothing grows unnoticed. Bytes. */
const WITHOUT_CHART = 95_000;
const WITH_CHART = 290_000;
/** Pages that are still above the aim, and what they may weigh: a line may only shrink or go. */
const STILL_ABOVE: Readonly<Record<string, number>> = {
  'cases/[case].astro': 98_000,
  'commissioning/[site]/checks.astro': 101_000,
  'commissioning/[site]/readings.astro': 97_500,
};
/** Before the chart comes. */
const BEFORE_CHART = 120_000;

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
        (p) => STILL_ABOVE[p.page] ?? WITHOUT_CHART,
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
});

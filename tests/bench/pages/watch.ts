import type { Page } from 'playwright-core';

/** What a page's own clocks have seen since it was opened. Times in ms. */
export interface Seen {
  largestPaint: number;
  shift: number;
  /** Of each interaction the longest of its events, from the touch to the next paint; under 16 ms they are not told. */
  interactions: number[];
  longTasks: number[];
}

type Keeper = typeof globalThis & {
  seen?: { lcp: number; shift: number; taps: Map<number, number>; tasks: number[] };
};

/** Before the page is opened. */
export async function watch(page: Page): Promise<void> {
  await page.addInitScript(() => {
    const seen = { lcp: 0, shift: 0, taps: new Map<number, number>(), tasks: [] as number[] };
    (globalThis as Keeper).seen = seen;
    const on = (type: string, heed: (entry: PerformanceEntry) => void, more: object = {}): void => {
      new PerformanceObserver((list) => list.getEntries().forEach(heed)).observe({
        type,
        buffered: true,
        ...more,
      });
    };
    on('largest-contentful-paint', (entry) => (seen.lcp = entry.startTime));
    on('layout-shift', (entry) => {
      const { value, hadRecentInput } = entry as PerformanceEntry & {
        value: number;
        hadRecentInput: boolean;
      };
      if (!hadRecentInput) seen.shift += value;
    });
    on('longtask', (entry) => seen.tasks.push(entry.duration));
    on(
      'event',
      (entry) => {
        const id = (entry as PerformanceEntry & { interactionId: number }).interactionId;
        if (id) seen.taps.set(id, Math.max(seen.taps.get(id) ?? 0, entry.duration));
      },
      { durationThreshold: 16 },
    );
  });
}

export const seenBy = (page: Page): Promise<Seen> =>
  page.evaluate(() => {
    const seen = (globalThis as Keeper).seen;
    return {
      largestPaint: seen?.lcp ?? NaN,
      shift: seen?.shift ?? NaN,
      interactions: [...(seen?.taps.values() ?? [])],
      longTasks: seen?.tasks ?? [],
    };
  });

/** Forgets interactions and long tasks: what follows is measured. */
export const forget = (page: Page): Promise<void> =>
  page.evaluate(() => {
    const seen = (globalThis as Keeper).seen;
    seen?.taps.clear();
    seen?.tasks.splice(0);
  });

/** Slows the page's processor down so many times. */
export async function slowDown(page: Page, times: number): Promise<void> {
  const devtools = await page.context().newCDPSession(page);
  await devtools.send('Emulation.setCPUThrottlingRate', { rate: times });
}

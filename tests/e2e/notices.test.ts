import type { Browser } from 'playwright-core';
import { afterAll, beforeAll, beforeEach, expect, it } from 'vitest';
import { signedInContext, startBrowser } from '../support/browser';
import { testDatabase, type TestDatabase } from '../support/database';
import { testFleet } from '../support/fleet';
import { Happenings, HERE, tellAll } from '../support/happenings';
import { noticesJourney } from '../support/notices-journey';
import { startSite, type RunningSite } from '../support/server';

let db: TestDatabase;
let site: RunningSite;
let browser: Browser;
let scene: Happenings;

beforeAll(async () => {
  db = await testDatabase();
  await testFleet(db, [HERE]);
  scene = new Happenings(db);
  site = await startSite(db, { WAKELINE_ROLES: 'web' });
  browser = await startBrowser();
});
afterAll(async () => {
  await browser.close();
  await site.stop();
  await db.drop();
});
beforeEach(() => scene.forget());

it.each([
  ['a desk', 1440, 900],
  ['a phone', 390, 844],
])(
  'notices come live at %s; letters are chosen, ended by a link, and chosen again',
  async (_at, width, height) => {
    const options = { viewport: { width, height }, reducedMotion: 'reduce' } as const;
    const desk = await signedInContext(browser, site.url, 'technician', options);
    const signedOut = await browser.newContext(options);
    const at = new Date();
    const comes = async (kind: string, headline: string) => {
      await scene.happens({ kind: 'cause_opened', detail: await scene.cause(kind, headline), at });
      await tellAll(at);
    };
    try {
      const faults = await noticesJourney(await desk.newPage(), signedOut, site.url, {
        work: async () => {
          await scene.happens({ kind: 'planned_work', detail: { reason: 'gutters' }, at });
          await tellAll(at);
        },
        hazard: (headline) => comes('not_shutting_down', headline),
        cause: (headline) => comes('stuck', headline),
        wayOut: async () => {
          const letters = await scene.letters();
          const mine = letters.filter((l) => l.to === 'technician@lowfield.example' && l.kind === 'cause');
          return /\/unsubscribe\/[\w.-]+/.exec(mine.at(-1)?.text ?? '')?.[0] ?? 'no way out';
        },
      });
      expect(faults).toEqual([]);
    } finally {
      await desk.close();
      await signedOut.close();
    }
  },
);

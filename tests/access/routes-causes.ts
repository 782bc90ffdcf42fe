import { get, type Route } from './route';

const NOBODY = '00000000-0000-4000-8000-000000000000';

/** Causes, planned works and background jobs. */
export const CAUSES: readonly Route[] = [
  get('causes/index.astro', 'cause.read', 'nothing', () => '/causes'),
  get('causes/[cause].astro', 'cause.read', 'nothing', () => `/causes/${NOBODY}`, [404]),
  get('api/causes.csv.ts', 'cause.read', 'nothing', () => '/api/causes.csv'),
  get('sites/[site]/planned-works.astro', 'site.read', 'site', (t) => `/sites/${t.site}/planned-works`),
  get('api/sites/[site]/planned-works.ts', 'site.read', 'site', (t) => `/api/sites/${t.site}/planned-works`),
  get(
    'api/sites/[site]/planned-works.csv.ts',
    'site.read',
    'site',
    (t) => `/api/sites/${t.site}/planned-works.csv`,
  ),
  {
    file: 'api/sites/[site]/planned-works.ts',
    method: 'POST',
    permission: 'planned_work.write',
    of: 'site',
    path: (t) => `/api/sites/${t.site}/planned-works`,
    body: {
      ref: '00000000-0000-4000-8000-0000000000a1',
      from: '2030-05-02T08:00',
      to: '2030-05-02T16:00',
      reason: 'New home run',
      strings: null,
    },
    served: [200],
  },
  {
    file: 'api/planned-works/[work]/end.ts',
    method: 'POST',
    permission: 'planned_work.write',
    of: 'nothing',
    path: () => `/api/planned-works/${NOBODY}/end`,
    served: [404],
  },
  get('jobs.astro', 'jobs.read', 'nothing', () => '/jobs'),
  {
    file: 'api/jobs/retry.ts',
    method: 'POST',
    permission: 'jobs.retry',
    of: 'nothing',
    path: () => '/api/jobs/retry',
    body: { job: '1' },
    served: [409],
  },
];

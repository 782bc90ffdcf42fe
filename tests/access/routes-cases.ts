import { randomUUID } from 'node:crypto';
import { get, type Route } from './route';

const NOBODY = '00000000-0000-4000-8000-000000000000';
const write = (
  file: string,
  method: Route['method'],
  path: string,
  body: unknown,
  served: readonly number[],
): Route => ({
  file,
  method,
  permission: 'case.write',
  of: 'nothing',
  path: () => path,
  body,
  served,
});

/** Routes of cases. That a case of another organisation is not there is told apart in the test of cases. */
export const CASES: readonly Route[] = [
  get('cases/index.astro', 'case.read', 'nothing', () => '/cases'),
  get('cases/new.astro', 'case.write', 'nothing', () => '/cases/new'),
  get('cases/[case].astro', 'case.read', 'nothing', () => `/cases/${NOBODY}`, [404]),
  get('api/cases/index.ts', 'case.read', 'nothing', () => '/api/cases'),
  get('api/cases.csv.ts', 'case.read', 'nothing', () => '/api/cases.csv'),
  get('api/cases/draft.ts', 'case.write', 'nothing', () => '/api/cases/draft'),
  write('api/cases/index.ts', 'POST', '/api/cases', {}, [422]),
  get('api/cases/[case]/index.ts', 'case.read', 'nothing', () => `/api/cases/${NOBODY}`, [404]),
  write(
    'api/cases/[case]/index.ts',
    'PATCH',
    `/api/cases/${NOBODY}`,
    { act: 'state', version: 1, state: 'waiting' },
    [404],
  ),
  write(
    'api/cases/[case]/comments.ts',
    'POST',
    `/api/cases/${NOBODY}/comments`,
    { ref: randomUUID(), body: 'A word' },
    [404],
  ),
  write(
    'api/cases/[case]/photos.ts',
    'POST',
    `/api/cases/${NOBODY}/photos?ref=${randomUUID()}&name=x.jpg&at=2026-11-03T10:15:00Z`,
    {},
    [404],
  ),
  get(
    'api/cases/[case]/evidence.pdf.ts',
    'case.read',
    'nothing',
    () => `/api/cases/${NOBODY}/evidence.pdf`,
    [404],
  ),
  get(
    'api/cases/[case]/evidence.zip.ts',
    'case.read',
    'nothing',
    () => `/api/cases/${NOBODY}/evidence.zip`,
    [404],
  ),
  get('api/sites/[site]/cases.ts', 'case.read', 'site', (t) => `/api/sites/${t.site}/cases`),
  get('api/my-site/[site]/reports.ts', 'case.report', 'site', (t) => `/api/my-site/${t.site}/reports`),
  {
    file: 'api/my-site/[site]/reports.ts',
    method: 'POST',
    permission: 'case.report',
    of: 'site',
    path: (t) => `/api/my-site/${t.site}/reports`,
    // a report of its own each time
    body: () => ({ ref: randomUUID(), what: 'The inverter hums louder than it did.' }),
    served: [200],
  },
];

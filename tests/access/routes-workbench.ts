import { get, type Route } from './route';

const NOBODY = '00000000-0000-4000-8000-000000000000';
const AT = 1_796_133_780;
const ofString = (permission: 'string.read' | 'telemetry.export', part: string, query = ''): Route =>
  get(
    `api/strings/[string]/${part}.ts`,
    permission,
    'string',
    (t) => `/api/strings/${t.string}/${part}${query}`,
  );

/** Routes of looking into a string, of notes on the time axis, of low strings and saved views. */
export const WORKBENCH: readonly Route[] = [
  get('low-output.astro', 'cause.read', 'nothing', () => '/low-output'),
  get('api/low-output.ts', 'cause.read', 'nothing', () => '/api/low-output'),
  get('api/low-output.csv.ts', 'cause.read', 'nothing', () => '/api/low-output.csv'),
  ofString('string.read', 'moment', `?at=${AT}`),
  ofString('string.read', 'heat'),
  ofString('telemetry.export', 'heat.csv'),
  ofString('string.read', 'loop'),
  ofString('telemetry.export', 'loop.csv'),
  ofString('string.read', 'explanations'),
  get(
    'api/sites/[site]/annotations/index.ts',
    'annotation.read',
    'site',
    (t) => `/api/sites/${t.site}/annotations`,
  ),
  {
    file: 'api/sites/[site]/annotations/index.ts',
    method: 'POST',
    permission: 'annotation.write',
    of: 'site',
    path: (t) => `/api/sites/${t.site}/annotations`,
    body: {
      ref: '00000000-0000-4000-8000-0000000000a1',
      string: null,
      from: '2026-11-03T10:43:00Z',
      to: null,
      text: 'Hail',
    },
    served: [200, 201, 409], // the same note once more is that note; of somebody else it clashes
  },
  {
    file: 'api/sites/[site]/annotations/[annotation].ts',
    method: 'DELETE',
    permission: 'annotation.write',
    of: 'site',
    path: (t) => `/api/sites/${t.site}/annotations/${NOBODY}`,
    served: [404],
  },
  {
    file: 'api/sites/[site]/annotations/[annotation].ts',
    method: 'PUT',
    permission: 'annotation.write',
    of: 'site',
    path: (t) => `/api/sites/${t.site}/annotations/${NOBODY}`,
    served: [404],
  },
  get('api/saved-views/index.ts', 'saved_view.use', 'nothing', () => '/api/saved-views?list=low_output'),
  {
    file: 'api/saved-views/index.ts',
    method: 'POST',
    permission: 'saved_view.use',
    of: 'nothing',
    path: () => '/api/saved-views',
    body: { list: 'low_output', name: '', query: '' },
    served: [422],
  },
  {
    file: 'api/saved-views/[view].ts',
    method: 'PATCH',
    permission: 'saved_view.use',
    of: 'nothing',
    path: () => `/api/saved-views/${NOBODY}`,
    body: { shared: true },
    served: [404],
  },
  {
    file: 'api/saved-views/[view].ts',
    method: 'DELETE',
    permission: 'saved_view.use',
    of: 'nothing',
    path: () => `/api/saved-views/${NOBODY}`,
    served: [404],
  },
];

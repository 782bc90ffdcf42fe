import { get, type Route } from './route';

/** The as-built: a new site, its parts, its units, its history. */
export const AS_BUILT_ROUTES: readonly Route[] = [
  get('commissioning/new.astro', 'as_built.write', 'nothing', () => '/commissioning/new'),
  get(
    'commissioning/[site]/as-built.astro',
    'as_built.read',
    'site',
    (t) => `/commissioning/${t.site}/as-built`,
  ),
  get(
    'commissioning/[site]/history.astro',
    'as_built.read',
    'site',
    (t) => `/commissioning/${t.site}/history`,
  ),
  {
    file: 'api/sites/index.ts',
    method: 'POST',
    permission: 'as_built.write',
    of: 'nothing',
    path: () => '/api/sites',
    body: { values: {} },
    served: [422],
  },
  get('api/sites/[site]/as-built/index.ts', 'as_built.read', 'site', (t) => `/api/sites/${t.site}/as-built`),
  get(
    'api/sites/[site]/as-built.csv.ts',
    'telemetry.export',
    'site',
    (t) => `/api/sites/${t.site}/as-built.csv`,
  ),
  get(
    'api/sites/[site]/as-built/history.ts',
    'as_built.read',
    'site',
    (t) => `/api/sites/${t.site}/as-built/history?find=4E02-77A1`,
  ),
  get(
    'api/sites/[site]/as-built/history.csv.ts',
    'telemetry.export',
    'site',
    (t) => `/api/sites/${t.site}/as-built/history.csv`,
  ),
  {
    file: 'api/sites/[site]/as-built/parts/index.ts',
    method: 'POST',
    permission: 'as_built.write',
    of: 'site',
    path: (t) => `/api/sites/${t.site}/as-built/parts`,
    body: { kind: 'plane', values: {} },
    served: [422],
  },
  {
    file: 'api/sites/[site]/as-built/parts/[part].ts',
    method: 'PATCH',
    permission: 'as_built.write',
    of: 'string',
    path: (t) => `/api/sites/${t.site}/as-built/parts/${t.string}`,
    body: { kind: 'string', before: { cableResistance: 1 }, after: { cableResistance: 1 } },
    served: [204],
  },
  {
    file: 'api/sites/[site]/as-built/parts/[part].ts',
    method: 'DELETE',
    permission: 'as_built.write',
    of: 'string',
    path: (t) => `/api/sites/${t.site}/as-built/parts/${t.string}`,
    body: { kind: 'string' }, // its units are placed, and no reason is given
    served: [422, 409],
  },
  {
    file: 'api/sites/[site]/as-built/loggers/[logger]/token.ts',
    method: 'POST',
    permission: 'as_built.write',
    of: 'site',
    path: (t) => `/api/sites/${t.site}/as-built/loggers/${t.string}/token`,
    body: {},
    served: [404], // no logger has a string's identifier
  },
  {
    file: 'api/sites/[site]/placements.ts',
    method: 'POST',
    permission: 'as_built.write',
    of: 'site',
    path: (t) => `/api/sites/${t.site}/placements`,
    body: { changes: [] },
    served: [200],
  },
];

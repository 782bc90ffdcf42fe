import { get, type Route } from './route';

const NO_SUCH = '00000000-0000-4000-8000-0000000000aa';

/** Ingest by HTTPS, loggers with their tokens, readings of earlier times from a file. */
export const INGEST_LOGGERS_HISTORY: readonly Route[] = [
  // a logger's token lets in, nobody's session: signed in or not, a person is told that the token is missing
  {
    file: 'api/v1/ingest/index.ts',
    method: 'POST',
    permission: 'public',
    of: 'nothing',
    path: () => '/api/v1/ingest',
    body: { type: 'hello' },
    served: [401],
  },
  get('api/v1/ingest/roster.ts', 'public', 'nothing', () => '/api/v1/ingest/roster', [401]),
  get('sites/[site]/loggers.astro', 'logger.read', 'site', (t) => `/sites/${t.site}/loggers`),
  get('api/sites/[site]/loggers.csv.ts', 'logger.read', 'site', (t) => `/api/sites/${t.site}/loggers.csv`),
  get(
    'api/sites/[site]/history-imports.csv.ts',
    'history.import',
    'site',
    (t) => `/api/sites/${t.site}/history-imports.csv`,
  ),
  get('api/sites/[site]/loggers/index.ts', 'logger.read', 'site', (t) => `/api/sites/${t.site}/loggers`),
  {
    file: 'api/sites/[site]/loggers/[logger]/tokens/index.ts',
    method: 'POST',
    permission: 'logger_token.manage',
    of: 'site',
    path: (t) => `/api/sites/${t.site}/loggers/${NO_SUCH}/tokens`,
    body: { name: 'trial', overlapHours: 0, reason: 'trial' },
    served: [404], // no such logger
  },
  {
    file: 'api/sites/[site]/loggers/[logger]/tokens/[token]/end.ts',
    method: 'POST',
    permission: 'logger_token.manage',
    of: 'site',
    path: (t) => `/api/sites/${t.site}/loggers/${NO_SUCH}/tokens/${NO_SUCH}/end`,
    body: { reason: 'trial' },
    served: [404],
  },
  get(
    'sites/[site]/history-import.astro',
    'history.import',
    'site',
    (t) => `/sites/${t.site}/history-import`,
  ),
  get(
    'api/sites/[site]/history-imports/index.ts',
    'history.import',
    'site',
    (t) => `/api/sites/${t.site}/history-imports`,
  ),
  {
    file: 'api/sites/[site]/history-imports/index.ts',
    method: 'POST',
    permission: 'history.import',
    of: 'site',
    path: (t) => `/api/sites/${t.site}/history-imports`,
    body: {}, // no order in its first line
    served: [422],
  },
  {
    file: 'api/sites/[site]/history-imports/[import]/undo.ts',
    method: 'POST',
    permission: 'history.import',
    of: 'site',
    path: (t) => `/api/sites/${t.site}/history-imports/${NO_SUCH}/undo`,
    body: { reason: '' },
    served: [404],
  },
];

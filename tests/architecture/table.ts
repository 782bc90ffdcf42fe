/** Who may import whom. A folder that is not in here fails the test: name it, and say what it may lean on. */
export interface Row {
  /** Path prefix; the longest that fits a file is its folder. */
  folder: string;
  /** Folders of ours that it may import besides itself; single files; with a `*` at the end, files that begin so. */
  may: readonly string[];
  /** Packages: a list, or every one (`any`), or every one that runs in a browser (`browser`). */
  packages: readonly string[] | 'any' | 'browser';
  /** Subfolders that may exist; undefined: any. */
  subfolders?: readonly string[];
}

export const FEATURES = [
  'fleet',
  'site',
  'strings',
  'commissioning',
  'shutdown',
  'cases',
  'equipment',
  'figures',
  'low-output',
  'settings',
  'people',
  'customer',
  'readings',
  'methods',
  'shutdown-test',
  'walk',
  'membership',
  'handover',
  'account',
  'audit',
  'checks',
  'letters',
  'capture',
  'as-built',
  'import',
  'developers',
  'serials',
  'roof',
  'design',
  'causes',
  'jobs',
  'planned-works',
  'notices',
  'webhooks',
  'history-import',
  'loggers',
] as const;
const AREAS = FEATURES.map((name) => `src/features/${name}`);

const EVERYTHING = [
  'src/words',
  'src/components',
  'src/drawings',
  ...AREAS,
  'src/layouts',
  'src/lib',
  'src/pages',
  'src/schemas',
  'src/server',
  'src/styles',
  'src/domain',
  'src/env.d.ts',
] as const;
/** What routes may use: all of src but the database itself. */
const ROUTED = [
  'src/words',
  'src/components',
  'src/drawings',
  ...AREAS,
  'src/layouts',
  'src/lib',
  'src/schemas',
  'src/server',
  'src/server/queries',
  'src/styles',
  'src/domain',
];
const FEATURE = ['src/words', 'src/components', 'src/drawings', 'src/lib', 'src/schemas', 'src/domain'];

export const TABLE: readonly Row[] = [
  {
    folder: 'src/domain',
    may: ['src/words/domain-*'], // what it says; those know of the domain by type alone
    packages: [], // the allow-list: reference-grade, pure packages only
    subfolders: [
      'photovoltaics',
      'readings',
      'verdicts',
      'causes',
      'output',
      'commissioning',
      'access',
      'equipment',
      'notices',
      'cases',
      'saved-views',
      'settings',
      'history-import',
      'time',
    ],
  },
  {
    folder: 'src/words', // what people read; its formatters, and types of what it speaks of
    may: ['src/drawings/numbers.ts', 'src/drawings/times.ts', 'src/schemas', 'src/domain'],
    packages: [],
    subfolders: [],
  },
  { folder: 'src/schemas', may: ['src/words', 'src/domain'], packages: ['zod'], subfolders: ['api'] },
  { folder: 'src/lib', may: ['src/words', 'src/schemas', 'src/domain'], packages: 'browser', subfolders: [] },
  { folder: 'src/drawings', may: ['src/words', 'src/domain'], packages: ['react'], subfolders: [] },
  {
    folder: 'src/components',
    may: ['src/words', 'src/drawings', 'src/lib', 'src/schemas', 'src/domain'],
    packages: 'browser',
    subfolders: [
      'ui',
      'commissioning',
      'charts',
      'shell',
      'states',
      'causes',
      'events',
      'status',
      'trace',
      'readings',
      'capture',
      'saved-views',
      'placements',
      'table-file',
      'logger-token',
    ],
  },
  { folder: 'src/features', may: [], packages: [], subfolders: FEATURES },
  ...FEATURES.map((name): Row => ({ folder: `src/features/${name}`, may: FEATURE, packages: 'browser' })),
  {
    folder: 'src/server/db',
    may: ['src/server/queries', 'src/server/config.ts', 'src/server/log.ts', 'src/schemas', 'src/domain'],
    packages: ['pg', 'knex', 'pg-copy-streams'],
    subfolders: [],
  },
  {
    folder: 'src/server/queries',
    may: ['src/server/db', 'src/server/config.ts', 'src/schemas', 'src/domain'],
    packages: ['pg', 'knex', 'pg-copy-streams', 'zod'],
    subfolders: [],
  },
  {
    folder: 'src/server',
    may: ['src/server/db', 'src/server/queries', 'src/words', 'src/drawings', 'src/schemas', 'src/domain'],
    packages: 'any',
    subfolders: [
      'db',
      'queries',
      'services',
      'auth',
      'http',
      'ingest',
      'live',
      'jobs',
      'mail',
      'observe',
      'files',
      'reports',
      'cli',
      'up',
      'v1',
    ],
  },
  { folder: 'src/pages', may: ROUTED, packages: ['astro', 'zod', 'node:'] },
  { folder: 'src/layouts', may: ROUTED, packages: ['astro'], subfolders: [] },
  { folder: 'src/middleware.ts', may: ROUTED, packages: ['astro', 'node:'] },
  { folder: 'src/env.d.ts', may: EVERYTHING, packages: 'any' },
  { folder: 'src/styles', may: [], packages: 'browser', subfolders: [] },
  { folder: 'simulator', may: ['src/domain', 'src/schemas'], packages: 'any' },
  {
    folder: 'seeds',
    may: ['simulator', 'src/domain', 'src/schemas', 'src/server', 'src/server/db', 'src/server/queries'],
    packages: 'any',
  },
  { folder: 'migrations', may: [], packages: ['knex'], subfolders: [] },
  {
    folder: 'tests',
    may: [
      ...EVERYTHING,
      'src/server/db',
      'src/server/queries',
      'src/middleware.ts',
      'simulator',
      'seeds',
      'migrations',
    ],
    packages: 'any',
    subfolders: [
      'setup',
      'support',
      'reference',
      'integration',
      'access',
      'attacks',
      'migrations',
      'architecture',
      'e2e',
      'bench',
      'torture',
    ],
  },
];

/** Packages that have no place in a browser. */
export const SERVER_PACKAGES = [
  'pg',
  'knex',
  'pino',
  'ws',
  'sirv',
  'lucia',
  '@lucia-auth/adapter-postgresql',
  '@node-rs/argon2',
  'graphile-worker',
  'nodemailer',
  'smtp-server',
  'pdfkit',
  'sharp',
  'pg-copy-streams',
  'rate-limiter-flexible',
  'prom-client',
];

/** Whether an entry of `may` names this file. */
export const names = (entry: string, file: string): boolean =>
  entry.endsWith('*') ? file.startsWith(entry.slice(0, -1)) : file === entry;

/** The row of a file: the one with the longest prefix. */
export function rowOf(file: string): Row | undefined {
  return TABLE.filter((row) => file === row.folder || file.startsWith(`${row.folder}/`)).sort(
    (a, b) => b.folder.length - a.folder.length,
  )[0];
}

/** `@scope/name/deep` → `@scope/name`; `node:fs` and `astro:middleware` → `node:`, `astro`. */
export function packageOf(specifier: string): string {
  if (specifier.startsWith('node:')) return 'node:';
  if (specifier.startsWith('astro:')) return 'astro';
  return specifier.split('/', specifier.startsWith('@') ? 2 : 1).join('/');
}

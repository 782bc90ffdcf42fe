import { randomUUID } from 'node:crypto';
import type { Permission } from '../../src/domain/access/permissions';

/** A site of the matrix and one of its strings, by public identifier. */
export interface Target {
  site: string;
  string: string;
}
export interface Route {
  /** The file under src/pages. */
  file: string;
  method: 'GET' | 'POST' | 'PUT' | 'PATCH' | 'DELETE';
  /** What the table of permissions must say for it; `public`: works before anybody is signed in. */
  permission: Permission | 'public';
  /** What its address names. */
  of: 'nothing' | 'site' | 'string';
  path: (target: Target) => string;
  /** As it is, or made for the target. */
  body?: unknown;
  /** Statuses that mean that somebody who may was served. */
  served: readonly number[];
}

const get = (
  file: string,
  permission: Route['permission'],
  of: Route['of'],
  path: Route['path'],
  served: readonly number[] = [200],
): Route => ({ file, method: 'GET', permission, of, path, served });

/** Every route of the product. A file under src/pages that is not here fails the matrix. */
export const ROUTES: readonly Route[] = [
  // pages
  get('index.astro', 'fleet.read', 'nothing', () => '/'),
  get('shutdown.astro', 'shutdown.read', 'nothing', () => '/shutdown'),
  get('status.astro', 'status.read', 'nothing', () => '/status'),
  get('try-a-reading.astro', 'reading.try', 'nothing', () => '/try-a-reading'),
  get('capture/index.astro', 'public', 'nothing', () => '/capture'),
  get('capture/[site].astro', 'checks.write', 'site', (t) => `/capture/${t.site}`),
  get('methods.astro', 'methods.read', 'nothing', () => '/methods'),
  get('commissioning/index.astro', 'roll_call.read', 'nothing', () => '/commissioning'),
  get(
    'commissioning/[site]/roll-call.astro',
    'roll_call.read',
    'site',
    (t) => `/commissioning/${t.site}/roll-call`,
  ),
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
  get(
    'commissioning/[site]/import.astro',
    'as_built.write',
    'site',
    (t) => `/commissioning/${t.site}/import`,
  ),
  get('commissioning/[site]/walk.astro', 'site.read', 'site', (t) => `/commissioning/${t.site}/walk`),
  get(
    'commissioning/[site]/membership.astro',
    'roll_call.read',
    'site',
    (t) => `/commissioning/${t.site}/membership`,
  ),
  get('sites/[site]/index.astro', 'site.read', 'site', (t) => `/sites/${t.site}`),
  get(
    'sites/[site]/strings/[string].astro',
    'string.read',
    'string',
    (t) => `/sites/${t.site}/strings/${t.string}`,
  ),
  get('my-site/index.astro', 'customer_page.read', 'nothing', () => '/my-site', [200, 303]),
  get('my-site/[site].astro', 'customer_page.read', 'site', (t) => `/my-site/${t.site}`),
  get('sign-in.astro', 'public', 'nothing', () => '/sign-in', [200, 303]),
  get('404.astro', 'public', 'nothing', () => '/404', [404]),
  get('500.astro', 'public', 'nothing', () => '/500', [500]),
  get('problem.astro', 'public', 'nothing', () => '/problem', [404]),
  // API
  {
    file: 'api/sign-in.ts',
    method: 'POST',
    permission: 'public',
    of: 'nothing',
    path: () => '/api/sign-in',
    body: {},
    served: [422],
  },
  {
    file: 'api/sign-out.ts',
    method: 'POST',
    permission: 'public',
    of: 'nothing',
    path: () => '/api/sign-out',
    served: [204],
  },
  {
    file: 'api/theme.ts',
    method: 'PUT',
    permission: 'own_account.use',
    of: 'nothing',
    path: () => '/api/theme',
    body: { theme: 'system' },
    served: [204],
  },
  get('api/search.ts', 'fleet.read', 'nothing', () => '/api/search?q=a1'),
  get('api/fleet.ts', 'fleet.read', 'nothing', () => '/api/fleet'),
  get('api/fleet.csv.ts', 'fleet.read', 'nothing', () => '/api/fleet.csv'),
  get('api/shutdown.ts', 'shutdown.read', 'nothing', () => '/api/shutdown'),
  get('api/shutdown.csv.ts', 'shutdown.read', 'nothing', () => '/api/shutdown.csv'),
  get('api/sites/[site]/index.ts', 'site.read', 'site', (t) => `/api/sites/${t.site}`),
  get('api/sites/[site]/events.ts', 'site.read', 'site', (t) => `/api/sites/${t.site}/events`),
  {
    file: 'api/sites/[site]/acknowledge.ts',
    method: 'POST',
    permission: 'hazard.acknowledge',
    of: 'site',
    path: (t) => `/api/sites/${t.site}/acknowledge`,
    body: { key: 'a cause that is over' },
    served: [200, 204, 409],
  },
  get(
    'api/sites/[site]/roll-call/index.ts',
    'roll_call.read',
    'site',
    (t) => `/api/sites/${t.site}/roll-call`,
  ),
  {
    file: 'api/sites/[site]/roll-call/index.ts',
    method: 'POST',
    permission: 'roll_call.run',
    of: 'site',
    path: (t) => `/api/sites/${t.site}/roll-call`,
    body: { personOnSite: 'Per Aalto', onSite: true },
    served: [200, 409],
  },
  get('api/sites/[site]/walk/index.ts', 'site.read', 'site', (t) => `/api/sites/${t.site}/walk`),
  get(
    'api/sites/[site]/walk/stops.csv.ts',
    'telemetry.export',
    'site',
    (t) => `/api/sites/${t.site}/walk/stops.csv`,
  ),
  get(
    'api/sites/[site]/membership/index.ts',
    'roll_call.read',
    'site',
    (t) => `/api/sites/${t.site}/membership`,
  ),
  get(
    'api/sites/[site]/membership/units.csv.ts',
    'telemetry.export',
    'site',
    (t) => `/api/sites/${t.site}/membership/units.csv`,
  ),
  get(
    'api/sites/[site]/isolation/index.ts',
    'roll_call.read',
    'site',
    (t) => `/api/sites/${t.site}/isolation`,
  ),
  {
    file: 'api/sites/[site]/isolation/index.ts',
    method: 'POST',
    permission: 'roll_call.run',
    of: 'site',
    path: (t) => `/api/sites/${t.site}/isolation`,
    body: {},
    served: [422],
  },
  {
    file: 'api/sites/[site]/isolation/stop.ts',
    method: 'POST',
    permission: 'roll_call.run',
    of: 'site',
    path: (t) => `/api/sites/${t.site}/isolation/stop`,
    served: [409],
  },
  {
    file: 'api/sites/[site]/roll-call/place.ts',
    method: 'POST',
    permission: 'as_built.write',
    of: 'site',
    path: (t) => `/api/sites/${t.site}/roll-call/place`,
    body: {},
    served: [422],
  },
  {
    file: 'api/sites/[site]/roll-call/stop.ts',
    method: 'POST',
    permission: 'roll_call.run',
    of: 'site',
    path: (t) => `/api/sites/${t.site}/roll-call/stop`,
    served: [200, 409],
  },
  get(
    'api/sites/[site]/roll-call/units.csv.ts',
    'telemetry.export',
    'site',
    (t) => `/api/sites/${t.site}/roll-call/units.csv`,
  ),
  get('api/sites/[site]/traces.ts', 'string.read', 'site', (t) => `/api/sites/${t.site}/traces`),
  get('api/strings/[string]/index.ts', 'string.read', 'string', (t) => `/api/strings/${t.string}`),
  get('api/strings/[string]/history.ts', 'string.read', 'string', (t) => `/api/strings/${t.string}/history`),
  get(
    'api/strings/[string]/history.csv.ts',
    'telemetry.export',
    'string',
    (t) => `/api/strings/${t.string}/history.csv`,
  ),
  get('api/strings/[string]/units.ts', 'string.read', 'string', (t) => `/api/strings/${t.string}/units`),
  get(
    'api/strings/[string]/units.csv.ts',
    'telemetry.export',
    'string',
    (t) => `/api/strings/${t.string}/units.csv`,
  ),
  get('api/my-site/[site].ts', 'customer_page.read', 'site', (t) => `/api/my-site/${t.site}`),
  {
    file: 'api/sites/[site]/as-built/import.ts',
    method: 'POST',
    permission: 'as_built.write',
    of: 'site',
    path: (t) => `/api/sites/${t.site}/as-built/import`,
    body: {
      mode: 'check',
      table: { columns: ['string', 'position', 'serial'], lines: [2], rows: [['A1', '1', '']] },
      choices: { decimalMark: null, fillDown: false, meanings: {}, newStrings: null },
    },
    served: [200],
  },
  // install checks, meter readings and photos
  get('commissioning/[site]/checks.astro', 'checks.read', 'site', (t) => `/commissioning/${t.site}/checks`),
  get(
    'commissioning/[site]/readings.astro',
    'checks.read',
    'site',
    (t) => `/commissioning/${t.site}/readings`,
  ),
  get('api/sites/[site]/checks.ts', 'checks.read', 'site', (t) => `/api/sites/${t.site}/checks`),
  {
    file: 'api/sites/[site]/checks.ts',
    method: 'POST',
    permission: 'checks.write',
    of: 'site',
    path: (t) => `/api/sites/${t.site}/checks`,
    body: (t: Target) => ({
      ref: randomUUID(),
      stringId: t.string,
      check: 'strain_relief',
      result: 'pass',
      at: new Date().toISOString(),
    }),
    served: [201, 409],
  },
  get('api/sites/[site]/checks.csv.ts', 'checks.read', 'site', (t) => `/api/sites/${t.site}/checks.csv`),
  get('api/sites/[site]/readings.ts', 'checks.read', 'site', (t) => `/api/sites/${t.site}/readings`),
  {
    file: 'api/sites/[site]/readings.ts',
    method: 'POST',
    permission: 'checks.write',
    of: 'site',
    path: (t) => `/api/sites/${t.site}/readings`,
    body: (t: Target) => ({
      ref: randomUUID(),
      stringId: t.string,
      stage: 'before_energising',
      kind: 'positive_to_negative',
      light: 'bright',
      voltage: 8.4,
      at: new Date().toISOString(),
    }),
    served: [201, 409],
  },
  get('api/sites/[site]/readings.csv.ts', 'checks.read', 'site', (t) => `/api/sites/${t.site}/readings.csv`),
  get('api/sites/[site]/capture.ts', 'checks.read', 'site', (t) => `/api/sites/${t.site}/capture`),
  get(
    'api/sites/[site]/attachments.ts',
    'attachment.read',
    'site',
    (t) => `/api/sites/${t.site}/attachments`,
  ),
  {
    file: 'api/sites/[site]/attachments.ts',
    method: 'POST',
    permission: 'checks.write',
    of: 'site',
    path: (t) =>
      `/api/sites/${t.site}/attachments?ref=${randomUUID()}&subject=site&name=x.jpg&at=${new Date().toISOString()}`,
    body: { not: 'a picture' },
    served: [422],
  },
  get(
    'api/attachments/[attachment].ts',
    'attachment.read',
    'nothing',
    () => '/api/attachments/00000000-0000-4000-8000-000000000002',
    [404],
  ),
  {
    file: 'api/strings/[string]/sign-off.ts',
    method: 'POST',
    permission: 'checks.write',
    of: 'string',
    path: (t) => `/api/strings/${t.string}/sign-off`,
    body: { ref: '00000000-0000-4000-8000-000000000003', fingerprint: '0'.repeat(64) },
    served: [409],
  },
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

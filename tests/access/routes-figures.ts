import { get, type Route } from './route';

const NOBODY = '00000000-0000-4000-8000-000000000000';

/** Routes of energy, yields and prices, and of an organisation's settings. */
export const FIGURES: readonly Route[] = [
  get('figures.astro', 'figures.read', 'nothing', () => '/figures'),
  get('api/figures.csv.ts', 'figures.read', 'nothing', () => '/api/figures.csv?period=2026-10'),
  get('sites/[site]/figures.astro', 'figures.read', 'site', (t) => `/sites/${t.site}/figures`),
  get('api/sites/[site]/figures.csv.ts', 'figures.read', 'site', (t) => `/api/sites/${t.site}/figures.csv`),
  get(
    'api/sites/[site]/month-report.pdf.ts',
    'figures.read',
    'site',
    (t) => `/api/sites/${t.site}/month-report.pdf?month=2026-10`,
  ),
  get(
    'api/my-site/[site]/month-report.pdf.ts',
    'papers.read',
    'site',
    (t) => `/api/my-site/${t.site}/month-report.pdf?month=2026-10`,
  ),
  {
    file: 'api/my-site/[site]/letter.ts',
    method: 'PUT',
    permission: 'customer_page.read',
    of: 'site',
    path: (t) => `/api/my-site/${t.site}/letter`,
    body: { every: 'month' },
    served: [200],
  },
  {
    file: 'api/sites/[site]/tariffs/index.ts',
    method: 'POST',
    permission: 'tariff.write',
    of: 'site',
    path: (t) => `/api/sites/${t.site}/tariffs`,
    body: { from: '2026-04-01', priceKWh: 0.3 },
    served: [200, 201, 204, 409],
  },
  {
    file: 'api/sites/[site]/tariffs/[tariff].ts',
    method: 'DELETE',
    permission: 'tariff.write',
    of: 'site',
    path: (t) => `/api/sites/${t.site}/tariffs/${NOBODY}`,
    served: [404],
  },
  // settings
  get('settings.astro', 'settings.read', 'nothing', () => '/settings'),
  {
    file: 'api/settings/organisation.ts',
    method: 'PUT',
    permission: 'settings.write',
    of: 'nothing',
    path: () => '/api/settings/organisation',
    body: { name: '' },
    served: [422],
  },
  {
    file: 'api/settings/thresholds.ts',
    method: 'PUT',
    permission: 'settings.write',
    of: 'nothing',
    path: () => '/api/settings/thresholds',
    body: { lowOutputLoss: 'much' },
    served: [422],
  },
  get('api/settings/logo.ts', 'own_account.use', 'nothing', () => '/api/settings/logo', [404]),
  {
    file: 'api/settings/logo.ts',
    method: 'POST',
    permission: 'settings.write',
    of: 'nothing',
    path: () => '/api/settings/logo',
    body: 'no picture',
    served: [422],
  },
  {
    file: 'api/settings/logo.ts',
    method: 'DELETE',
    permission: 'settings.write',
    of: 'nothing',
    path: () => '/api/settings/logo',
    served: [200],
  },
];

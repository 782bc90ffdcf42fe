import { get, type Route } from './route';

/** Routes of the steps, the handover, its papers and letters. */
export const HANDOVER: readonly Route[] = [
  get('commissioning/[site]/index.astro', 'roll_call.read', 'site', (t) => `/commissioning/${t.site}`),
  get(
    'commissioning/[site]/handover.astro',
    'handover.read',
    'site',
    (t) => `/commissioning/${t.site}/handover`,
  ),
  get('mail.astro', 'mail.read', 'nothing', () => '/mail'),
  get('api/commissioning.csv.ts', 'roll_call.read', 'nothing', () => '/api/commissioning.csv'),
  get(
    'api/sites/[site]/commissioning.ts',
    'roll_call.read',
    'site',
    (t) => `/api/sites/${t.site}/commissioning`,
  ),
  get('api/sites/[site]/handover.ts', 'handover.read', 'site', (t) => `/api/sites/${t.site}/handover`),
  {
    file: 'api/sites/[site]/handover.ts',
    method: 'POST',
    permission: 'handover.make',
    of: 'site',
    path: (t) => `/api/sites/${t.site}/handover`,
    body: {},
    served: [409], // points block it
  },
  {
    file: 'api/sites/[site]/accepted-gaps.ts',
    method: 'POST',
    permission: 'gap.accept',
    of: 'site',
    path: (t) => `/api/sites/${t.site}/accepted-gaps`,
    body: { gap: 'as_built/none', reason: 'for a test' },
    served: [409], // there is no such point
  },
  get(
    'api/papers/[paper].ts',
    'papers.read',
    'nothing',
    () => '/api/papers/00000000-0000-4000-8000-000000000000',
    [404],
  ),
];

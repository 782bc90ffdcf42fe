import { get, type Route } from './route';

const NOBODY = '00000000-0000-4000-8000-000000000000';
const NO_TOKEN = 'x'.repeat(43);

/** Routes of shared pages: made and ended by managers, read with the link alone. */
export const SHARED_PAGES: readonly Route[] = [
  get('shared/[token].astro', 'public', 'nothing', () => `/shared/${NO_TOKEN}`, [404]),
  get('api/shared/[token].ts', 'public', 'nothing', () => `/api/shared/${NO_TOKEN}`, [404]),
  get('api/sites/[site]/share-links.ts', 'share.manage', 'site', (t) => `/api/sites/${t.site}/share-links`),
  {
    file: 'api/sites/[site]/share-links.ts',
    method: 'POST',
    permission: 'share.manage',
    of: 'site',
    path: (t) => `/api/sites/${t.site}/share-links`,
    body: { label: 'Lobby', kiosk: true, endsOn: null },
    served: [200],
  },
  {
    file: 'api/share-links/[link].ts',
    method: 'DELETE',
    permission: 'share.manage',
    of: 'nothing',
    path: () => `/api/share-links/${NOBODY}`,
    served: [404],
  },
];

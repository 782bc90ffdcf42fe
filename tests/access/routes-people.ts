import { get, type Route } from './route';

const NOBODY = '00000000-0000-4000-8000-000000000000';
const NO_TOKEN = 'x'.repeat(43);
const write = (
  file: string,
  method: Route['method'],
  permission: Route['permission'],
  path: string,
  body: unknown,
  served: readonly number[],
): Route => ({ file, method, permission, of: 'nothing', path: () => path, body, served });

/** Routes of people, invitations and one's own account. */
export const PEOPLE_AND_ACCOUNTS: readonly Route[] = [
  get('people.astro', 'people.manage', 'nothing', () => '/people'),
  get('audit.astro', 'audit.read', 'nothing', () => '/audit'),
  get('api/audit.csv.ts', 'audit.read', 'nothing', () => '/api/audit.csv'),
  get('account.astro', 'own_account.use', 'nothing', () => '/account'),
  get('invitation/[token].astro', 'public', 'nothing', () => `/invitation/${NO_TOKEN}`, [404]),
  get('forgot-password.astro', 'public', 'nothing', () => '/forgot-password'),
  get('new-password/[token].astro', 'public', 'nothing', () => `/new-password/${NO_TOKEN}`, [404]),
  get('confirm-email/[token].astro', 'public', 'nothing', () => `/confirm-email/${NO_TOKEN}`),
  get('api/people/index.ts', 'people.manage', 'nothing', () => '/api/people'),
  get('api/people.csv.ts', 'people.manage', 'nothing', () => '/api/people.csv'),
  write('api/people/[person].ts', 'PATCH', 'people.manage', `/api/people/${NOBODY}`, { active: true }, [404]),
  write('api/invitations/index.ts', 'POST', 'people.manage', '/api/invitations', {}, [422]),
  write(
    'api/invitations/[invitation].ts',
    'DELETE',
    'people.manage',
    `/api/invitations/${NOBODY}`,
    undefined,
    [409],
  ),
  get('api/account/index.ts', 'own_account.use', 'nothing', () => '/api/account'),
  write('api/account/password.ts', 'PUT', 'own_account.use', '/api/account/password', {}, [422]),
  write('api/account/email.ts', 'PUT', 'own_account.use', '/api/account/email', {}, [422]),
  write(
    'api/account/sessions.ts',
    'DELETE',
    'own_account.use',
    '/api/account/sessions',
    { key: 'none' },
    [204],
  ),
  write('api/account/second-factor.ts', 'POST', 'own_account.use', '/api/account/second-factor', {}, [422]),
  write('api/account/second-factor.ts', 'PUT', 'own_account.use', '/api/account/second-factor', {}, [422]),
  write('api/account/second-factor.ts', 'DELETE', 'own_account.use', '/api/account/second-factor', {}, [422]),
];

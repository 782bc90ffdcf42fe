import { get, type Route } from './route';

const NOBODY = '00000000-0000-4000-8000-000000000000';
const write = (
  file: string,
  method: Route['method'],
  permission: Route['permission'],
  path: string,
  body: unknown,
  served: readonly number[],
): Route => ({ file, method, permission, of: 'nothing', path: () => path, body, served });

/** Notices, what one is told of, the way out of letters, and calls to other systems. */
export const NOTICES_AND_WEBHOOKS: readonly Route[] = [
  get('notices.astro', 'notice.read', 'nothing', () => '/notices'),
  get('api/notices/index.ts', 'notice.read', 'nothing', () => '/api/notices'),
  get('api/notices.csv.ts', 'notice.read', 'nothing', () => '/api/notices.csv'),
  write('api/notices/read.ts', 'POST', 'notice.read', '/api/notices/read', { ids: [NOBODY] }, [204]),
  get('account/notices.astro', 'own_account.use', 'nothing', () => '/account/notices'),
  get('api/account/notices.ts', 'own_account.use', 'nothing', () => '/api/account/notices'),
  write('api/account/notices.ts', 'PUT', 'own_account.use', '/api/account/notices', {}, [422]),
  get('unsubscribe/[token].astro', 'public', 'nothing', () => `/unsubscribe/${'x'.repeat(43)}`, [404]),
  get('webhooks/index.astro', 'webhook.manage', 'nothing', () => '/webhooks'),
  get('webhooks/[webhook].astro', 'webhook.manage', 'nothing', () => `/webhooks/${NOBODY}`, [404]),
  get('api/webhooks/index.ts', 'webhook.manage', 'nothing', () => '/api/webhooks'),
  write('api/webhooks/index.ts', 'POST', 'webhook.manage', '/api/webhooks', {}, [422]),
  write('api/webhooks/[webhook]/index.ts', 'PATCH', 'webhook.manage', `/api/webhooks/${NOBODY}`, {}, [404]),
  write(
    'api/webhooks/[webhook]/index.ts',
    'DELETE',
    'webhook.manage',
    `/api/webhooks/${NOBODY}`,
    undefined,
    [404],
  ),
  write(
    'api/webhooks/[webhook]/test.ts',
    'POST',
    'webhook.manage',
    `/api/webhooks/${NOBODY}/test`,
    undefined,
    [404],
  ),
  get(
    'api/webhooks/[webhook]/deliveries.ts',
    'webhook.manage',
    'nothing',
    () => `/api/webhooks/${NOBODY}/deliveries`,
    [404],
  ),
  get(
    'api/webhooks/[webhook]/deliveries.csv.ts',
    'webhook.manage',
    'nothing',
    () => `/api/webhooks/${NOBODY}/deliveries.csv`,
    [404],
  ),
  write(
    'api/webhook-deliveries/[delivery]/resend.ts',
    'POST',
    'webhook.manage',
    `/api/webhook-deliveries/${NOBODY}/resend`,
    undefined,
    [404],
  ),
];

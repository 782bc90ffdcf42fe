import { get, type Route } from './route';

const NO_SUCH = '00000000-0000-4000-8000-0000000000aa';
/** A token lets in, nobody's session: signed in or not, a person is told that the token is missing (bearer.test.ts). */
const byToken = (method: Route['method'], status: number): Route => ({
  file: 'api/v1/[...path].ts',
  method,
  permission: 'public',
  of: 'nothing',
  path: () => (method === 'POST' ? '/api/v1/cases' : '/api/v1/sites'),
  body: method === 'GET' ? undefined : {},
  served: [status],
});

/** What programs ask by token, the tokens, and the page that says how. */
export const API_AND_TOKENS: readonly Route[] = [
  byToken('GET', 401),
  byToken('POST', 401),
  byToken('PUT', 405),
  byToken('PATCH', 405),
  byToken('DELETE', 405),
  get('api/v1/openapi.json.ts', 'public', 'nothing', () => '/api/v1/openapi.json'),
  get('developers.astro', 'api_token.use', 'nothing', () => '/developers'),
  get('api/account/tokens/index.ts', 'api_token.use', 'nothing', () => '/api/account/tokens'),
  {
    file: 'api/account/tokens/index.ts',
    method: 'POST',
    permission: 'api_token.use',
    of: 'nothing',
    path: () => '/api/account/tokens',
    body: {},
    served: [422],
  },
  {
    file: 'api/account/tokens/[token].ts',
    method: 'DELETE',
    permission: 'api_token.use',
    of: 'nothing',
    path: () => `/api/account/tokens/${NO_SUCH}`,
    served: [404],
  },
  {
    file: 'api/people/[person]/tokens.ts',
    method: 'DELETE',
    permission: 'people.manage',
    of: 'nothing',
    path: () => `/api/people/${NO_SUCH}/tokens`,
    served: [404],
  },
];

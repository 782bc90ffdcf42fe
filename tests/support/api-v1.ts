import type { APIContext } from 'astro';
import type pg from 'pg';
import type { Actor } from '../../src/domain/access/permissions';
import { TOKEN_SCOPES, type TokenScope } from '../../src/domain/access/scopes';
import { GET } from '../../src/pages/api/v1/[...path]';
import { asActor } from '../../src/server/db/transaction';
import { makeToken } from '../../src/server/services/api-tokens';
import { PASSWORD } from './fleet';

interface Asked {
  token?: string | undefined;
  method?: string;
  headers?: Record<string, string>;
  body?: unknown;
  drained?: () => Promise<void>;
  address?: string;
}

/** Asks the door of /api/v1 as Astro would, without a server between. */
export async function askV1(path: string, asked: Asked = {}): Promise<Response> {
  const { token, method = 'GET', headers = {}, body, drained, address = '192.0.2.9' } = asked;
  const url = new URL(`/api/v1${path}`, 'http://localhost');
  const request = new Request(url, {
    method,
    headers: {
      ...(token === undefined ? {} : { authorization: `Bearer ${token}` }),
      ...(body === undefined ? {} : { 'content-type': 'application/json' }),
      ...headers,
    },
    body: body === undefined ? undefined : JSON.stringify(body),
  });
  const locals = { requestId: 'test', actor: null, viewer: null, sessionId: null, drained };
  // of the whole context the door reads only these
  return GET({ locals, url, request, clientAddress: address, params: {} } as unknown as APIContext);
}

/** A token as its person makes it on the account page. */
export async function tokenFor(
  actor: Actor,
  options: { scopes?: readonly TokenScope[]; sites?: readonly string[]; at?: Date; password?: string } = {},
): Promise<{ token: string; id: string }> {
  const name = `of a test ${Math.random().toString(36).slice(2)}`;
  const made = await asActor(actor, (tx) =>
    makeToken(
      tx,
      { actor, address: '192.0.2.7' },
      {
        name,
        scopes: [...(options.scopes ?? TOKEN_SCOPES)],
        sites: [...(options.sites ?? [])],
        days: 30,
        current: options.password ?? PASSWORD,
      },
      options.at ?? new Date(),
    ),
  );
  return { token: made.token, id: made.item.id };
}

/** Reports of every string of a site for some minutes from `from`, all units passing. */
export async function writeFrames(
  owner: pg.Pool,
  siteId: number,
  from: Date,
  minutes: number,
): Promise<void> {
  await owner.query(
    `select ensure_days($1::timestamptz::date, ($1::timestamptz + make_interval(mins => $2))::date)`,
    [from, minutes],
  );
  await owner.query(
    `insert into string_frame (at, mask, string_id, voltage_sum, power_sum, voltage, current, temperature, signal, via, state)
     select $2::timestamptz + make_interval(mins => m), (1::int8 << s.slots::int) - 1, s.id, 3900 * s.slots, 3120 * s.slots,
            array_fill(3900::int2, array[s.slots::int]), array_fill(8000::int2, array[s.slots::int]),
            array_fill(400::int2, array[s.slots::int]), array_fill(-60::int2, array[s.slots::int]),
            array_fill(1::int2, array[s.slots::int]), array_fill(1::int2, array[s.slots::int])
     from string s cross join generate_series(0, $3::int - 1) m where s.site_id = $1`,
    [siteId, from, minutes],
  );
}

import { gzip } from 'node:zlib';
import { promisify } from 'node:util';

const packed = promisify(gzip);

/**
 * A large document that a client keeps: 304 while it has the version named by `tag`, packed where it can unpack.
 */
export async function snapshotReply(request: Request, data: unknown, tag: string): Promise<Response> {
  const headers: Record<string, string> = {
    'content-type': 'application/json',
    'cache-control': 'private, no-cache',
    vary: 'cookie, accept-encoding',
    etag: tag,
  };
  const known = (request.headers.get('if-none-match') ?? '')
    .split(',')
    .map((t) => t.trim().replace(/^W\//, ''));
  if (known.includes(tag)) return new Response(null, { status: 304, headers });
  const text = JSON.stringify(data);
  if (!/\bgzip\b/.test(request.headers.get('accept-encoding') ?? '')) return new Response(text, { headers });
  return new Response(new Uint8Array(await packed(text)), {
    headers: { ...headers, 'content-encoding': 'gzip' },
  });
}

import type { APIContext, APIRoute } from 'astro';
import { gzipSync } from 'node:zlib';
import { GET as rosterRoute } from '../../src/pages/api/v1/ingest/roster';
import { POST as batchRoute } from '../../src/pages/api/v1/ingest/index';
import type { IngestReply, RosterReply } from '../../src/schemas/ingest';

export interface Answer<T> {
  status: number;
  retryAfter: string | null;
  body: T;
}
interface Problem {
  detail: string;
  fields: { field: string; message: string }[];
}

async function call<T>(route: APIRoute, request: Request, address: string): Promise<Answer<T>> {
  const context = {
    locals: { requestId: 'test' },
    params: {},
    url: new URL(request.url),
    request,
    clientAddress: address,
  };
  // of the whole context these routes read only this
  const response = await route(context as unknown as APIContext);
  return {
    status: response.status,
    retryAfter: response.headers.get('retry-after'),
    body: (await response.json()) as T,
  };
}

/** A logger that reports by HTTPS, without a server between. */
export class HttpsLogger {
  constructor(
    private readonly token: string,
    private readonly address = '192.0.2.7',
  ) {}

  /** Sends messages as lines, packed. */
  post(messages: readonly unknown[]): Promise<Answer<IngestReply & Problem>> {
    const body = messages.map((m) => (typeof m === 'string' ? m : JSON.stringify(m))).join('\n');
    return this.send(new Uint8Array(gzipSync(body)), {
      'content-type': 'application/x-ndjson',
      'content-encoding': 'gzip',
    });
  }
  postJson(value: unknown): Promise<Answer<IngestReply & Problem>> {
    return this.send(JSON.stringify(value), { 'content-type': 'application/json' });
  }
  send(body: BodyInit | null, headers: Record<string, string>): Promise<Answer<IngestReply & Problem>> {
    const authorization = `Bearer ${this.token}`;
    const request = new Request('http://here/api/v1/ingest', {
      method: 'POST',
      headers: { ...headers, authorization },
      body,
    });
    return call(batchRoute, request, this.address);
  }
  roster(): Promise<Answer<RosterReply & Problem>> {
    const headers = { authorization: `Bearer ${this.token}` };
    return call(rosterRoute, new Request('http://here/api/v1/ingest/roster', { headers }), this.address);
  }
}

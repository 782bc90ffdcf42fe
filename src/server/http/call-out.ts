import dns from 'node:dns';
import { request as httpRequest } from 'node:http';
import { request as httpsRequest } from 'node:https';
import { isIP, type LookupFunction } from 'node:net';
import { performance } from 'node:perf_hooks';
import { isLoopback, isPublicAddress } from './private-address';
import { callOutRefusals } from '../../words/refusals';

/** A POST to an address that somebody entered: guarded, bounded in time and in what is read back. */

export interface CallOut {
  url: string;
  headers: Record<string, string>;
  body: string;
}
export interface CallLimits {
  /** Which addresses of ours may be reached: none, this machine's, or every one. */
  within: 'nothing' | 'loopback' | 'everything';
  timeoutMs: number;
}
export interface CallAnswer {
  /** null: no answer came. */
  status: number | null;
  latencyMs: number;
  excerpt: string;
  /** Why it failed; null: it was answered. */
  error: string | null;
}

const EXCERPT_BYTES = 2048;

export class AddressRefused extends Error {}

/** What an address may be, before a name is resolved. @returns what is wrong, or undefined */
export function faultOfUrl(text: string, within: CallLimits['within']): string | undefined {
  if (!URL.canParse(text)) return callOutRefusals.noAddress;
  const url = new URL(text);
  if (url.username || url.password) return callOutRefusals.noPassword;
  const host = url.hostname.replace(/^\[|\]$/g, '');
  const local = isIP(host) ? isLoopback(host) : host === 'localhost' || host.endsWith('.localhost');
  const plainAllowed = within === 'everything' || (within === 'loopback' && local);
  if (url.protocol !== 'https:' && !(url.protocol === 'http:' && plainAllowed))
    return callOutRefusals.useHttps;
  if ((isIP(host) && !isAllowed(host, within)) || (local && within === 'nothing'))
    return callOutRefusals.privateAddress;
  return undefined;
}

const isAllowed = (address: string, within: CallLimits['within']): boolean =>
  within === 'everything' || isPublicAddress(address) || (within === 'loopback' && isLoopback(address));

/** Resolves a name for the connection itself: what was looked at is what is connected to. */
const guardedLookup =
  (within: CallLimits['within']): LookupFunction =>
  (hostname, options, callback) => {
    dns.lookup(hostname, { ...options, all: true }, (error, addresses) => {
      if (error) return callback(error, []);
      const bad = addresses.find((a) => !isAllowed(a.address, within));
      const [first] = addresses;
      if (bad || !first)
        return callback(
          new AddressRefused(callOutRefusals.leadsToPrivate(hostname, bad?.address ?? 'nothing')),
          [],
        );
      if (options.all) callback(null, addresses);
      else callback(null, first.address, first.family);
    });
  };

/** @throws never: what goes wrong is in the answer. Redirects are not followed. */
export function callOut(call: CallOut, limits: CallLimits): Promise<CallAnswer> {
  const began = performance.now();
  const took = () => Math.round(performance.now() - began);
  const failed = (error: string, status: number | null = null, excerpt = ''): CallAnswer => ({
    status,
    latencyMs: took(),
    excerpt,
    error,
  });
  // what is allowed may have changed since it was entered
  const fault = faultOfUrl(call.url, limits.within);
  if (fault) return Promise.resolve(failed(fault));
  return new Promise((resolve) => {
    const signal = AbortSignal.timeout(limits.timeoutMs);
    const url = new URL(call.url);
    const send = url.protocol === 'https:' ? httpsRequest : httpRequest;
    const late = callOutRefusals.noAnswer(limits.timeoutMs / 1000);
    const request = send(
      url,
      {
        method: 'POST',
        headers: { ...call.headers, 'content-length': String(Buffer.byteLength(call.body)) },
        lookup: guardedLookup(limits.within),
        agent: false,
        signal,
      },
      (response) => {
        const chunks: Buffer[] = [];
        let bytes = 0;
        const status = response.statusCode ?? null;
        const end = (error: string | null) => {
          const excerpt = Buffer.concat(chunks).subarray(0, EXCERPT_BYTES).toString('utf8');
          resolve({ status, latencyMs: took(), excerpt, error });
          request.destroy();
        };
        response.on('data', (chunk: Buffer) => {
          chunks.push(chunk);
          bytes += chunk.byteLength;
          if (bytes >= EXCERPT_BYTES) end(null); // the rest is not for us
        });
        response.on('end', () => end(null));
        response.on('error', (error) => end(signal.aborted ? late : error.message));
      },
    );
    request.on('error', (error) => resolve(failed(signal.aborted ? late : error.message)));
    request.end(call.body);
  });
}

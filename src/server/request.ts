import { AsyncLocalStorage } from 'node:async_hooks';
import { randomUUID } from 'node:crypto';

/** The request that is being answered: its number stands in every line of the log that comes of it. */
export interface CurrentRequest {
  readonly requestId: string;
  /** Its route as the router has it, `/sites/[site]`; undefined: a file of the build, or nothing of ours. */
  route?: string;
}

// one per process, also when a development server reloads this module
const KEY = Symbol.for('wakeline.request');
const shared = globalThis as unknown as Record<symbol, AsyncLocalStorage<CurrentRequest> | undefined>;
const current = (shared[KEY] ??= new AsyncLocalStorage<CurrentRequest>());

/** Runs `work`, and all that it starts, as a part of a request. */
export const inRequest = <T>(request: CurrentRequest, work: () => T): T => current.run(request, work);

export const currentRequest = (): CurrentRequest | undefined => current.getStore();

/** The number that a proxy gave to a request, where it is believed and readable; else one of our own. */
export function requestIdOf(given: string | string[] | undefined, believed: boolean): string {
  return believed && typeof given === 'string' && /^[\w-]{8,64}$/.test(given) ? given : randomUUID();
}

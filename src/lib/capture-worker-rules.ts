import { paths } from '../schemas/paths';

/** What the worker of the phone's page answers itself, and what it keeps. Pure. */

export const CACHE_PREFIX = 'wakeline-capture-';

/** `shell`: the network first, the kept page where there is none. `asset`: what is kept of this build. */
export type Rule = 'shell' | 'asset' | 'sign' | 'pass';

export interface Asked {
  method: string;
  url: string;
  /** Whether it opens a page. */
  navigates: boolean;
}

const CAPTURE = /^\/capture(\/[0-9a-f-]{36})?\/?$/;
/** Named by their content: a build never changes one. */
const HASHED = /^\/_astro\//;

/** Everything that is not named here goes to the network as if there were no worker: API, other pages, uploads. */
export function ruleFor(asked: Asked, origin: string): Rule {
  const url = new URL(asked.url);
  if (url.origin !== origin) return 'pass';
  const path = url.pathname;
  if (asked.method === 'POST')
    return [paths.api.signIn(), paths.api.signOut(), paths.signIn()].includes(path) ? 'sign' : 'pass';
  if (asked.method !== 'GET') return 'pass';
  if (asked.navigates) return CAPTURE.test(path) ? 'shell' : 'pass';
  return HASHED.test(path) || path === '/favicon.svg' ? 'asset' : 'pass';
}

/** A sign-in or sign-out that was done: who was here before is here no longer. */
export const changesPerson = (response: { ok: boolean; type: string; status: number }): boolean =>
  response.ok || response.type === 'opaqueredirect' || (response.status >= 300 && response.status < 400);

/** An answer of a proxy whose server is away stands for no answer. */
export const isAway = (status: number): boolean => status === 502 || status === 503 || status === 504;

const REFERENCE = /["'`(]((?:\.{1,2}\/|\/?_astro\/)[\w@./-]+\.(?:js|mjs|css|woff2?|svg|png|webp))["'`)]/g;

/** Addresses of this build that a page, a script or a style sheet of it speaks of, each once. */
export function referencesIn(text: string, from: string): string[] {
  const found = new Set<string>();
  for (const [, reference = ''] of text.matchAll(REFERENCE)) {
    // a script's list of what it loads later is relative to the site's root
    const url = new URL(reference.startsWith('_astro/') ? `/${reference}` : reference, from);
    if (url.origin === new URL(from).origin && HASHED.test(url.pathname)) found.add(url.href);
  }
  return [...found];
}

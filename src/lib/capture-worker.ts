// The service worker of the phone's page, built into one file at the site's root. It keeps a page that has nobody's
// data and the scripts of one build, and nothing else: no answer of the API, no other page, nothing of a person.
import { paths } from '../schemas/paths';
import { CaptureStore } from './capture-store';
import { CACHE_PREFIX, changesPerson, isAway, referencesIn, ruleFor } from './capture-worker-rules';

/** Put in by the build: a name for this build's files. */
declare const WAKELINE_BUILD: string;

interface Lasting extends Event {
  waitUntil(work: Promise<unknown>): void;
}
interface Fetching extends Lasting {
  readonly request: Request;
  respondWith(response: Promise<Response>): void;
}
interface Worker {
  readonly location: Location;
  readonly clients: { claim(): Promise<void> };
  addEventListener(type: 'install' | 'activate', hear: (event: Lasting) => void): void;
  addEventListener(type: 'fetch', hear: (event: Fetching) => void): void;
}
const worker = globalThis as unknown as Worker;
const CACHE = `${CACHE_PREFIX}${WAKELINE_BUILD}`;
/** A network that takes longer than this to open a page is none. */
const PATIENCE_MS = 6000;

/** Keeps the page and all that it loads, or nothing: then the worker of the build before stays. */
async function keepBuild(): Promise<void> {
  const cache = await caches.open(CACHE);
  const shellUrl = new URL(paths.captureShell(), worker.location.origin).href;
  const take = async (url: string, how: RequestInit): Promise<Response> => {
    const response = await fetch(url, how);
    if (!response.ok) throw new Error(`${url} answered ${response.status}`);
    return response;
  };
  const shell = await take(shellUrl, { credentials: 'omit', cache: 'no-store' });
  const html = await shell.clone().text();
  const favicon = new URL('/favicon.svg', worker.location.origin).href;
  const waiting = [...referencesIn(html, shellUrl), favicon];
  const seen = new Set(waiting);
  for (let url = waiting.shift(); url !== undefined; url = waiting.shift()) {
    const response = await take(url, { credentials: 'omit' });
    const text = /\.(m?js|css)$/.test(url) ? await response.clone().text() : '';
    for (const reference of referencesIn(text, url))
      if (!seen.has(reference)) {
        seen.add(reference);
        waiting.push(reference);
      }
    await cache.put(url, response);
  }
  await cache.put(shellUrl, shell);
}

async function dropOthers(): Promise<void> {
  for (const name of await caches.keys())
    if (name.startsWith(CACHE_PREFIX) && name !== CACHE) await caches.delete(name);
  await worker.clients.claim();
}

const keptShell = async (): Promise<Response | undefined> =>
  (await caches.open(CACHE)).match(new URL(paths.captureShell(), worker.location.origin).href, {
    ignoreVary: true,
  });

/** The page from the network; without one, the kept page, which fills itself from what the phone holds. */
async function openPage(request: Request): Promise<Response> {
  const kept = await keptShell();
  if (!kept) return fetch(request);
  const late = new Promise<'late'>((resolve) => setTimeout(() => resolve('late'), PATIENCE_MS));
  try {
    const first = await Promise.race([fetch(request), late]);
    return first === 'late' || isAway(first.status) ? kept : first;
  } catch {
    return kept; // no network
  }
}

async function asset(request: Request): Promise<Response> {
  return (await (await caches.open(CACHE)).match(request.url, { ignoreVary: true })) ?? fetch(request);
}

/** Whoever signs in or out: what was kept for the one before to read goes; what waits to be sent stays. */
async function signing(request: Request): Promise<Response> {
  const response = await fetch(request);
  if (!changesPerson(response)) return response;
  try {
    const store = await CaptureStore.open();
    await store.signOut();
    store.close();
  } catch (error) {
    console.warn('What this phone keeps could not be hidden.', error);
  }
  return response;
}

worker.addEventListener('install', (event) => event.waitUntil(keepBuild()));
worker.addEventListener('activate', (event) => event.waitUntil(dropOthers()));
worker.addEventListener('fetch', (event) => {
  const { request } = event;
  const asked = { method: request.method, url: request.url, navigates: request.mode === 'navigate' };
  switch (ruleFor(asked, worker.location.origin)) {
    case 'shell':
      event.respondWith(openPage(request));
      break;
    case 'asset':
      event.respondWith(asset(request));
      break;
    case 'sign':
      event.respondWith(signing(request));
      break;
    case 'pass':
      break;
  }
});

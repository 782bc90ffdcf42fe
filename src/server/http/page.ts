import type { AstroGlobal } from 'astro';
import { mayUse, type Actor, type Permission } from '../../domain/access/permissions';
import { paths } from '../../schemas/paths';
import type { Viewer } from '../auth/viewer';
import { asActor, type Tx } from '../db/transaction';
import { AppError, ERROR_KINDS } from '../errors';
import { log } from '../log';
import { asOnlooker } from '../replica';
import { hasJustWritten } from './just-written';
import { inTime } from './in-time';
import { explain } from './problem';
import { pageRefusals } from '../../words/refusals';

/** Statements end after 30 s by themselves, unless the database stands still. */
const READ_WITHIN_MS = 35_000;

export interface Loaded<T> {
  actor: Actor;
  viewer: Viewer;
  data: T;
}

/**
 * The one wrapper of pages: `const loaded = await page(Astro, 'fleet.read', async ({ tx }) => …);
 * if (loaded instanceof Response) return loaded;`. Signed out goes to sign-in and comes back.
 */
export async function page<T>(
  astro: AstroGlobal,
  permission: Permission,
  load: (call: { actor: Actor; tx: Tx }) => Promise<T>,
  /** For reports, which only read: a replica may answer, some seconds behind. */
  { mayLag = false } = {},
): Promise<Loaded<T> | Response> {
  const { actor, viewer } = astro.locals;
  if (!actor || !viewer) return astro.redirect(paths.signIn(astro.url.pathname + astro.url.search), 303);
  try {
    if (!mayUse(actor.role, permission)) throw new AppError('forbidden', { message: pageRefusals.forStaff });
    const work = (tx: Tx): Promise<T> => load({ actor, tx });
    const data = mayLag ? asOnlooker(actor, work, hasJustWritten(astro.request)) : asActor(actor, work);
    return { actor, viewer, data: await inTime(READ_WITHIN_MS, data) };
  } catch (error) {
    return problemPage(astro, error);
  }
}

/** Pages that must work before anybody is signed in declare it with this. */
export function publicPage(astro: AstroGlobal): { viewer: Viewer | null } {
  return { viewer: astro.locals.viewer };
}

function problemPage(astro: AstroGlobal, error: unknown): Promise<Response> {
  const known = explain(error);
  if (!known || ERROR_KINDS[known.kind].status > 499) log.error({ error }, 'a page failed');
  astro.locals.problem = {
    status: known ? ERROR_KINDS[known.kind].status : 500,
    title: known ? ERROR_KINDS[known.kind].title : pageRefusals.failedHere,
    message: known?.message ?? pageRefusals.tryAgain(astro.locals.requestId),
  };
  return astro.rewrite('/problem');
}

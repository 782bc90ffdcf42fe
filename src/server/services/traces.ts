import { timeLimitOf } from '../../domain/verdicts/context';
import type { SiteTraces } from '../../schemas/api/trace';
import type { Tx } from '../db/transaction';
import { found } from '../errors';
import { commandNear, newestTraces, ruleSetOf } from '../queries/trace';
import { visibleSite } from '../queries/visible-site';

/** V between conductors and to earth outside the array boundary: NEC 690.12(B)(1). */
const LIMIT_V = 30;

/**
 * Voltages second by second after the newest command at a site, or after the newest that concerned one string.
 * @throws AppError not_found
 */
export async function readTraces(tx: Tx, siteRef: string, at: Date, stringRef?: string): Promise<SiteTraces> {
  const site = found(await visibleSite(tx, siteRef), 'site');
  const { startedAt, traces } = await newestTraces(tx, site.id, stringRef);
  const { timeLimitS, source } = timeLimitOf(await ruleSetOf(tx, site.id));
  return {
    at: at.toISOString(),
    command: startedAt ? await commandNear(tx, site.id, startedAt) : null,
    startedAt: startedAt?.toISOString() ?? null,
    traces,
    limit: { voltage: LIMIT_V, afterS: timeLimitS, source },
  };
}

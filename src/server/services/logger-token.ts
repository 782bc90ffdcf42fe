import { createHash, randomBytes } from 'node:crypto';
import type { Actor } from '../../domain/access/permissions';
import type { Tx } from '../db/transaction';
import { found } from '../errors';
import { asBuiltSite } from '../queries/as-built-site';
import { partNumber } from '../queries/as-built-parts';
import { replaceToken } from '../queries/logger-tokens';
import { tellSiteChanged } from '../queries/live-notices';
import { addAuditEntry } from '../queries/people';
import { lockAsBuilt } from '../queries/placements';
import { needReason, type How } from './edit-as-built';

/** 256 bits in letters that survive being read out and typed. */
export const newToken = (): string => `wl_${randomBytes(32).toString('base64url')}`;

/**
 * Makes a logger's token and ends those before. Only its hash is kept, as ingest looks it up: whoever made it sees it
 * this once.
 *
 * @throws AppError not_found · invalid (reason, where one was in force)
 */
export async function makeLoggerToken(
  tx: Tx,
  actor: Actor,
  siteId: number,
  loggerRef: string,
  how: How,
  token: string,
): Promise<void> {
  await lockAsBuilt(tx, [siteId]);
  const site = found(await asBuiltSite(tx, siteId), 'site');
  const loggerId = found(await partNumber(tx, 'logger', siteId, loggerRef), 'logger');
  const hash = createHash('sha256').update(token).digest();
  const { ended, serial } = await replaceToken(tx, loggerId, hash);
  needReason(site.stage === 'operating' && ended > 0, how);
  await addAuditEntry(tx, {
    organisationId: site.organisationId,
    personId: actor.personId,
    address: how.address,
    action: 'as_built.token_made',
    subject: `logger ${loggerRef}`,
    siteId,
    after: { of: serial, tokensEnded: ended, source: how.source },
    reason: how.reason.trim(),
  });
  await tellSiteChanged(tx, siteId);
}

import { createHash, randomBytes } from 'node:crypto';
import type { Actor } from '../../domain/access/permissions';
import type { LoggersPage } from '../../schemas/api/loggers';
import type { Tx } from '../db/transaction';
import { AppError, found } from '../errors';
import { asBuiltSite } from '../queries/as-built-site';
import { partNumber } from '../queries/as-built-parts';
import { addToken, endTokenNow, loggersOfSite } from '../queries/logger-tokens';
import { tellSiteChanged, tellTokensEnded } from '../queries/live-notices';
import { addAuditEntry } from '../queries/people';
import { lockAsBuilt } from '../queries/placements';
import { visibleSite } from '../queries/visible-site';
import { needReason, type How } from './edit-as-built';
import { loggerTokenRefusals } from '../../words/refusals-people';

/** 256 bits in letters that survive being read out and typed. */
export const newToken = (): string => `wl_${randomBytes(32).toString('base64url')}`;

/** Who may speak at a site, when each last did, and what was refused. @throws AppError not_found */
export async function loggersPage(tx: Tx, siteRef: string, at: Date): Promise<LoggersPage> {
  const site = found(await visibleSite(tx, siteRef), 'site');
  return {
    at: at.toISOString(),
    site: { id: site.ref, name: site.name, timeZone: site.timeZone, stage: site.stage },
    loggers: await loggersOfSite(tx, site.id),
  };
}

export interface TokenOrder {
  token: string;
  /** What it is for, in the person's words. */
  name?: string;
  /** For how long those before may still be used, seconds. 0: they end at once, and so do their connections. */
  overlapS?: number;
}

/**
 * Makes a logger's token; those before end now, or when the overlap is over. Only its hash is kept, as ingest looks it
 * up: whoever made it sees it this once.
 *
 * @throws AppError not_found · invalid (reason, where one was in force)
 */
export async function makeLoggerToken(
  tx: Tx,
  actor: Actor,
  siteId: number,
  loggerRef: string,
  how: How,
  { token, name = '', overlapS = 0 }: TokenOrder,
): Promise<{ ending: number; endsAt: string }> {
  await lockAsBuilt(tx, [siteId]);
  const site = found(await asBuiltSite(tx, siteId), 'site');
  const loggerId = found(await partNumber(tx, 'logger', siteId, loggerRef), 'logger');
  const hash = createHash('sha256').update(token).digest();
  const { personId } = actor;
  const { ending, endsAt, serial } = await addToken(tx, { loggerId, hash, name, personId, overlapS });
  needReason(site.stage === 'operating' && ending > 0, how);
  await addAuditEntry(tx, {
    organisationId: site.organisationId,
    personId,
    address: how.address,
    action: 'as_built.token_made',
    subject: `logger ${loggerRef}`,
    siteId,
    after: {
      of: serial,
      name,
      tokensEnded: ending,
      endsAt: ending > 0 ? endsAt.toISOString() : null,
      source: how.source,
    },
    reason: how.reason.trim(),
  });
  if (ending > 0) await tellTokensEnded(tx, loggerId);
  await tellSiteChanged(tx, siteId);
  return { ending, endsAt: endsAt.toISOString() };
}

/**
 * Ends a token at this moment; a connection that came with it is closed, in whichever process it is.
 * @throws AppError not_found · conflict (ended before) · invalid (reason)
 */
export async function endLoggerToken(
  tx: Tx,
  actor: Actor,
  siteId: number,
  refs: { logger: string; token: string },
  how: How,
): Promise<void> {
  await lockAsBuilt(tx, [siteId]);
  const site = found(await asBuiltSite(tx, siteId), 'site');
  const loggerId = found(await partNumber(tx, 'logger', siteId, refs.logger), 'logger');
  needReason(site.stage === 'operating', how);
  const { ended, name, serial } = found(await endTokenNow(tx, loggerId, refs.token, actor.personId), 'token');
  if (ended)
    throw new AppError('conflict', {
      message: loggerTokenRefusals.endedAlready,
    });
  await addAuditEntry(tx, {
    organisationId: site.organisationId,
    personId: actor.personId,
    address: how.address,
    action: 'as_built.token_ended',
    subject: `logger ${refs.logger}`,
    siteId,
    after: { of: serial, name, source: how.source },
    reason: how.reason.trim(),
  });
  await tellTokensEnded(tx, loggerId);
  await tellSiteChanged(tx, siteId);
}

import type { IngestReply, RosterReply } from '../../schemas/ingest';
import { AppError } from '../errors';
import { admit } from '../ingest/admit';
import { ingest, type Ingest } from '../ingest/service';
import { ingestRefusals } from '../../words/refusals';

function running(): Ingest {
  const service = ingest();
  if (service) return service;
  throw new AppError('unavailable', { message: ingestRefusals.noReadingsHere, retryAfterS: 10 });
}

/**
 * A batch of a logger's messages; answered after COMMIT. Its token is looked at before a byte of the body is.
 * @throws AppError as admit and OverHttps.take say
 */
export async function takeBatchByHttps(request: Request, address: string): Promise<IngestReply> {
  const service = running();
  const logger = await admit(request.headers.get('authorization'), service, address);
  return service.overHttps.take(logger, address, request);
}

/** @throws AppError as admit says */
export async function rosterByHttps(request: Request, address: string): Promise<RosterReply> {
  const service = running();
  const logger = await admit(request.headers.get('authorization'), service, address);
  return service.overHttps.roster(logger, address);
}

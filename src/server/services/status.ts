import type { InstallationStatus } from '../../schemas/api/status';
import type { Tx } from '../db/transaction';
import { ingest } from '../ingest/service';
import { databaseStatus, loggerStatus, processStatus, workStatus } from '../queries/status';

/** How this installation runs, as far as the actor's organisation is concerned. */
export async function readStatus(tx: Tx, at: Date): Promise<InstallationStatus> {
  return {
    at: at.toISOString(),
    database: await databaseStatus(tx),
    processes: await processStatus(tx),
    unknownTokens: ingest()?.figures().unknownTokens ?? null,
    loggers: await loggerStatus(tx),
    work: await workStatus(tx),
  };
}

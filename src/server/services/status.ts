import type { HistoryHours, ProcessHistory } from '../../schemas/api/processes';
import type { InstallationStatus } from '../../schemas/api/status';
import type { Tx } from '../db/transaction';
import { ingest } from '../ingest/service';
import { replicaStatus } from '../replica';
import { processHistories } from '../queries/process-samples';
import { databaseStatus, loggerStatus, processStatus, workStatus } from '../queries/status';

/** How this installation runs, as far as the actor's organisation is concerned. */
export async function readStatus(tx: Tx, at: Date): Promise<InstallationStatus> {
  const { configured, state, lagS } = await replicaStatus();
  return {
    at: at.toISOString(),
    database: await databaseStatus(tx),
    replica: configured ? { state, lagS } : null,
    processes: await processStatus(tx),
    unknownTokens: ingest()?.figures().unknownTokens ?? null,
    loggers: await loggerStatus(tx),
    work: await workStatus(tx),
  };
}

/** What each process of the installation measured of itself in the last hours. */
export const readProcesses = (tx: Tx, at: Date, hours: HistoryHours): Promise<ProcessHistory[]> =>
  processHistories(tx, new Date(at.getTime() - hours * 3_600_000));

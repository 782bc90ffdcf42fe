import { quantity, number } from '../../drawings/numbers';
import type { InstallationStatus } from '../../schemas/api/status';
import { Notice } from '../ui/Notice';
import { Sheet } from '../ui/Sheet';
import { judgementLate, placesMissing, rollUpLate } from './finding';
import { statusSheets } from '../../words/status';
import { When } from './When';

const row = 'flex flex-wrap justify-between gap-x-4 border-b border-rule-faint py-2 last:border-b-0';

/** How far the work is; the database and the processes. */
export function StatusSheets({ status, timeZone }: { status: InstallationStatus; timeZone: string }) {
  const { at: now, database, processes, replica, work } = status;
  return (
    <div className="space-y-6">
      {!database.rowSecurity && (
        <Notice kind="stale" title={statusSheets.oneDatabaseAccountFor}>
          {statusSheets.theAccountGivenMay}
        </Notice>
      )}
      <div className="grid items-start gap-6 lg:grid-cols-2">
        <Sheet id="work" title={statusSheets.work}>
          <dl>
            <div className={row}>
              <dt>{statusSheets.newestFrame}</dt>
              <dd>
                <When at={work.newestFrameAt} now={now} timeZone={timeZone} />
              </dd>
            </div>
            <div className={row}>
              <dt>{statusSheets.judgement}</dt>
              <dd>
                {judgementLate(status) ? (
                  <>
                    {statusSheets.stringsWaitTheFirst(work.unjudgedStrings)}
                    <When at={work.unjudgedSince} now={now} timeZone={timeZone} />
                  </>
                ) : (
                  statusSheets.upWithWhatHas
                )}
              </dd>
            </div>
            <div className={row}>
              <dt>{statusSheets.rollUps}</dt>
              <dd>
                {rollUpLate(status) && statusSheets.standStill}
                {work.rolledUpTo ? (
                  <>
                    {statusSheets.doneUpTo}
                    <When at={work.rolledUpTo} now={now} timeZone={timeZone} />
                  </>
                ) : (
                  statusSheets.noneDoneYet
                )}
                {statusSheets.quartersWait(work.quartersWaiting)}
              </dd>
            </div>
            <div className={row}>
              <dt>{statusSheets.framesParkedForLack}</dt>
              <dd>{number(work.lateFrames)}</dd>
            </div>
            <div className={row}>
              <dt>{statusSheets.placesPreparedTo}</dt>
              <dd>
                {work.preparedTo ?? statusSheets.none}
                {placesMissing(status) && statusSheets.tomorrowIsMissing}
              </dd>
            </div>
          </dl>
        </Sheet>
        <Sheet id="installation" title={statusSheets.databaseAndProcesses}>
          <dl>
            <div className={row}>
              <dt>{statusSheets.postgreSQL}</dt>
              <dd>
                {database.version}, {quantity(database.bytes / 1e6, 'MB')}
              </dd>
            </div>
            <div className={row}>
              <dt>{statusSheets.organisationsKeptApartBy}</dt>
              <dd>{database.rowSecurity ? statusSheets.yes : statusSheets.noOneAccount}</dd>
            </div>
            {replica && (
              <div className={row}>
                <dt>{statusSheets.replica}</dt>
                <dd>
                  {statusSheets.replicaState[replica.state]}
                  {replica.lagS !== null && statusSheets.secondsBehind(replica.lagS)}
                </dd>
              </div>
            )}
            {status.unknownTokens !== null && (
              <div className={row}>
                <dt>{statusSheets.connectionsRefusedForAn}</dt>
                <dd>{number(status.unknownTokens)}</dd>
              </div>
            )}
            {processes.map((p) => (
              <div key={p.name} className={row}>
                <dt>{statusSheets.processName(p.name.slice(0, 8))}</dt>
                <dd>{statusSheets.servesLoggers(p.loggers)}</dd>
              </div>
            ))}
          </dl>
          {processes.length === 0 && (
            <p className="mt-2 text-sm text-ink-2">{statusSheets.noProcessServesA}</p>
          )}
        </Sheet>
      </div>
    </div>
  );
}

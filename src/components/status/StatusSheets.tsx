import { quantity, number } from '../../drawings/numbers';
import { ago, fullTime } from '../../drawings/times';
import type { InstallationStatus } from '../../schemas/api/status';
import { paths } from '../../schemas/paths';
import { Notice } from '../ui/Notice';
import { Sheet } from '../ui/Sheet';
import { Table, type Column } from '../ui/Table';
import { Tag } from '../ui/Tag';
import { judgementLate, placesMissing, rollUpLate } from './finding';
import { statusSheets } from '../../words/status';

type Logger = InstallationStatus['loggers'][number];

function When({ at, now, timeZone }: { at: string | null; now: string; timeZone: string }) {
  if (!at) return <>{statusSheets.never}</>;
  return (
    <time dateTime={at} title={fullTime(at, timeZone)}>
      {ago(at, now)}
    </time>
  );
}

const row = 'flex flex-wrap justify-between gap-x-4 border-b border-rule-faint py-2 last:border-b-0';

/** Loggers with what was refused from each, the newest refusal first; processes; how far the work is. */
export function StatusSheets({ status, timeZone }: { status: InstallationStatus; timeZone: string }) {
  const { at: now, database, loggers, processes, replica, work } = status;
  const columns: Column<Logger>[] = [
    {
      key: 'logger',
      label: statusSheets.logger,
      cell: (l) => (
        <>
          <span className="font-semibold">{l.serial}</span>
          <span className="block text-sm">
            <a href={paths.site(l.siteId)} className="link">
              {l.siteName}
            </a>
          </span>
        </>
      ),
    },
    {
      key: 'connected',
      label: statusSheets.lastSpoke,
      cell: (l) => (
        <>
          {!l.connected && (
            <Tag tone="slate" shape="▨">
              {statusSheets.notConnected}
            </Tag>
          )}{' '}
          <span className="whitespace-nowrap">
            <When at={l.lastSpokeAt} now={now} timeZone={l.timeZone} />
          </span>
        </>
      ),
    },
    {
      key: 'firmware',
      label: statusSheets.firmwareAddress,
      from: 'md',
      cell: (l) => (
        <>
          {l.firmware ?? '–'}
          <span className="block text-sm text-ink-2">{l.lastAddress ?? statusSheets.noAddressYet}</span>
        </>
      ),
    },
    { key: 'refused', label: statusSheets.refused, numeric: true, cell: (l) => number(l.refused) },
    {
      key: 'refusal',
      label: statusSheets.lastRefusal,
      cell: (l) =>
        l.lastRefusal ? (
          <>
            <code className="font-sans font-semibold">{l.lastRefusal.field}</code>: {l.lastRefusal.reason}
            <span className="block text-sm text-ink-2">
              <When at={l.lastRefusal.at} now={now} timeZone={l.timeZone} />
            </span>
          </>
        ) : (
          <span className="text-ink-2">{statusSheets.none}</span>
        ),
    },
  ];
  return (
    <div className="space-y-6">
      {!database.rowSecurity && (
        <Notice kind="stale" title={statusSheets.oneDatabaseAccountFor}>
          {statusSheets.theAccountGivenMay}
        </Notice>
      )}
      <Sheet id="loggers" flush title={statusSheets.loggers} aside={statusSheets.newestRefusalFirst}>
        <Table
          caption={statusSheets.loggersWithTheirConnection}
          columns={columns}
          rows={loggers}
          rowKey={(l) => l.serial}
          empty={<Notice kind="empty" title={statusSheets.noLoggerIsEntered} />}
        />
      </Sheet>
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

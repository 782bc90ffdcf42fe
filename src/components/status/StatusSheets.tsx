import { quantity, number } from '../../drawings/numbers';
import { ago, fullTime } from '../../drawings/times';
import type { InstallationStatus } from '../../schemas/api/status';
import { paths } from '../../schemas/paths';
import { Notice } from '../ui/Notice';
import { Sheet } from '../ui/Sheet';
import { Table, type Column } from '../ui/Table';
import { Tag } from '../ui/Tag';
import { judgementLate, placesMissing, rollUpLate } from './finding';

type Logger = InstallationStatus['loggers'][number];

function When({ at, now, timeZone }: { at: string | null; now: string; timeZone: string }) {
  if (!at) return <>never</>;
  return (
    <time dateTime={at} title={fullTime(at, timeZone)}>
      {ago(at, now)}
    </time>
  );
}

const row = 'flex flex-wrap justify-between gap-x-4 border-b border-rule-faint py-2 last:border-b-0';

/** Loggers with what was refused from each, the newest refusal first; processes; how far the work is. */
export function StatusSheets({ status, timeZone }: { status: InstallationStatus; timeZone: string }) {
  const { at: now, database, loggers, processes, work } = status;
  const columns: Column<Logger>[] = [
    {
      key: 'logger',
      label: 'Logger',
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
      label: 'Last spoke',
      cell: (l) => (
        <>
          {!l.connected && (
            <Tag tone="slate" shape="▨">
              Not connected
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
      label: 'Firmware, address',
      from: 'md',
      cell: (l) => (
        <>
          {l.firmware ?? '–'}
          <span className="block text-sm text-ink-2">{l.lastAddress ?? 'no address yet'}</span>
        </>
      ),
    },
    { key: 'refused', label: 'Refused', numeric: true, cell: (l) => number(l.refused) },
    {
      key: 'refusal',
      label: 'Last refusal',
      cell: (l) =>
        l.lastRefusal ? (
          <>
            <code className="font-sans font-semibold">{l.lastRefusal.field}</code>: {l.lastRefusal.reason}
            <span className="block text-sm text-ink-2">
              <When at={l.lastRefusal.at} now={now} timeZone={l.timeZone} />
            </span>
          </>
        ) : (
          <span className="text-ink-2">none</span>
        ),
    },
  ];
  return (
    <div className="space-y-6">
      {!database.rowSecurity && (
        <Notice kind="stale" title="One database account for everything">
          The account given may not create roles, so the database itself does not keep organisations apart;
          the queries still do. Give an account that may create roles, or addresses of two accounts, and start
          again.
        </Notice>
      )}
      <Sheet id="loggers" flush title="Loggers" aside="newest refusal first">
        <Table
          caption="Loggers with their connection and what was refused from them"
          columns={columns}
          rows={loggers}
          rowKey={(l) => l.serial}
          empty={<Notice kind="empty" title="No logger is entered yet" />}
        />
      </Sheet>
      <div className="grid items-start gap-6 lg:grid-cols-2">
        <Sheet id="work" title="Work">
          <dl>
            <div className={row}>
              <dt>Newest frame</dt>
              <dd>
                <When at={work.newestFrameAt} now={now} timeZone={timeZone} />
              </dd>
            </div>
            <div className={row}>
              <dt>Judgement</dt>
              <dd>
                {judgementLate(status) ? (
                  <>
                    {number(work.unjudgedStrings)} strings wait, the first since{' '}
                    <When at={work.unjudgedSince} now={now} timeZone={timeZone} />
                  </>
                ) : (
                  'up with what has come in'
                )}
              </dd>
            </div>
            <div className={row}>
              <dt>Roll-ups</dt>
              <dd>
                {rollUpLate(status) && 'stand still; '}
                {work.rolledUpTo ? (
                  <>
                    done up to <When at={work.rolledUpTo} now={now} timeZone={timeZone} />
                  </>
                ) : (
                  'none done yet'
                )}
                ; {number(work.quartersWaiting)} quarters wait
              </dd>
            </div>
            <div className={row}>
              <dt>Frames parked for lack of a place</dt>
              <dd>{number(work.lateFrames)}</dd>
            </div>
            <div className={row}>
              <dt>Places prepared to</dt>
              <dd>
                {work.preparedTo ?? 'none'}
                {placesMissing(status) && ' (tomorrow is missing)'}
              </dd>
            </div>
          </dl>
        </Sheet>
        <Sheet id="installation" title="Database and processes">
          <dl>
            <div className={row}>
              <dt>PostgreSQL</dt>
              <dd>
                {database.version}, {quantity(database.bytes / 1e6, 'MB')}
              </dd>
            </div>
            <div className={row}>
              <dt>Organisations kept apart by the database</dt>
              <dd>{database.rowSecurity ? 'yes' : 'no, one account'}</dd>
            </div>
            {status.unknownTokens !== null && (
              <div className={row}>
                <dt>Connections refused for an unknown token, since the start</dt>
                <dd>{number(status.unknownTokens)}</dd>
              </div>
            )}
            {processes.map((p) => (
              <div key={p.name} className={row}>
                <dt>Process {p.name.slice(0, 8)}</dt>
                <dd>serves {number(p.loggers)} loggers</dd>
              </div>
            ))}
          </dl>
          {processes.length === 0 && (
            <p className="mt-2 text-sm text-ink-2">No process serves a logger of yours just now.</p>
          )}
        </Sheet>
      </div>
    </div>
  );
}

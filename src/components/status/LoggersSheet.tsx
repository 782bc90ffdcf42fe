import { number } from '../../drawings/numbers';
import type { InstallationStatus } from '../../schemas/api/status';
import { paths } from '../../schemas/paths';
import { statusSheets } from '../../words/status';
import { Notice } from '../ui/Notice';
import { Sheet } from '../ui/Sheet';
import { Table, type Column } from '../ui/Table';
import { Tag } from '../ui/Tag';
import { When } from './When';

type Logger = InstallationStatus['loggers'][number];

/** Loggers that stand open; of more the rest is folded away. */
const OPEN = 20;

/** Loggers with what was refused from each, the newest refusal first. */
export function LoggersSheet({ status, timeZone }: { status: InstallationStatus; timeZone: string }) {
  const { at: now, loggers } = status;
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
            <When at={l.lastSpokeAt} now={now} timeZone={timeZone} />
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
              <When at={l.lastRefusal.at} now={now} timeZone={timeZone} />
            </span>
          </>
        ) : (
          <span className="text-ink-2">{statusSheets.none}</span>
        ),
    },
  ];
  const table = (rows: readonly Logger[], caption: string) => (
    <Table
      caption={caption}
      columns={columns}
      rows={rows}
      rowKey={(l) => l.serial}
      empty={<Notice kind="empty" title={statusSheets.noLoggerIsEntered} />}
    />
  );
  const folded = loggers.slice(OPEN);
  return (
    <Sheet id="loggers" flush title={statusSheets.loggers} aside={statusSheets.newestRefusalFirst}>
      {table(loggers.slice(0, OPEN), statusSheets.loggersWithTheirConnection)}
      {folded.length > 0 && (
        <details className="mt-3">
          <summary className="target cursor-pointer text-petrol">
            {statusSheets.moreLoggers(folded.length)}
          </summary>
          {table(folded, statusSheets.moreLoggers(folded.length))}
        </details>
      )}
    </Sheet>
  );
}

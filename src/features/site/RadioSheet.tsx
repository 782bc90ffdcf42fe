import { Notice } from '../../components/ui/Notice';
import { Sheet } from '../../components/ui/Sheet';
import { Tag } from '../../components/ui/Tag';
import { SiteTime } from '../../components/ui/Time';
import { counted } from '../../drawings/numbers';
import type { SitePage } from '../../schemas/api/site';
import { paths } from '../../schemas/paths';

const line =
  'flex flex-wrap items-baseline justify-between gap-x-4 border-b border-rule-faint py-2 last:border-b-0';

/** Who hears the units and who reports them: gateways, learned from what is heard, and loggers. */
export function RadioSheet({ page, now, zone }: { page: SitePage; now: string; zone: boolean }) {
  const { gateways, loggers, site } = page;
  const at = (time: string | null) =>
    time ? <SiteTime at={time} now={now} timeZone={site.timeZone} zone={zone} /> : 'never';
  return (
    <Sheet id="radio" title="Gateways and loggers" aside="gateways are learned from what is heard">
      {gateways.length === 0 && <Notice kind="empty" title="No gateway has been heard yet" />}
      <ul>
        {gateways.map((gateway) => (
          <li key={`${gateway.number} ${gateway.name}`} className={line}>
            <span className="font-semibold">{gateway.name}</span>
            <span className="flex flex-wrap items-baseline gap-x-3 text-sm text-ink-2">
              {gateway.silent && (
                <Tag tone="slate" shape="▨">
                  Silent
                </Tag>
              )}
              {counted(gateway.units, 'unit')} by it · heard {at(gateway.lastHeardAt)}
            </span>
          </li>
        ))}
        {loggers.map((logger) => (
          <li key={logger.serial} className={line}>
            <span className="font-semibold">Logger {logger.serial}</span>
            <span className="text-sm text-ink-2">
              {logger.firmware && `firmware ${logger.firmware} · `}last spoke {at(logger.lastSpokeAt)}
            </span>
          </li>
        ))}
      </ul>
      <a
        className="target inline-flex items-center text-petrol hover:underline"
        href={paths.loggers(site.id)}
      >
        Tokens of the loggers, and what was refused
      </a>
      {gateways.some((g) => g.silent) && (
        <p className="mt-2 text-sm text-ink-2">
          Whether units behind a silent gateway follow a shutdown can't be confirmed until it is heard again.
        </p>
      )}
    </Sheet>
  );
}

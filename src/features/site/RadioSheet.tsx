import { memo } from 'react';
import { Notice } from '../../components/ui/Notice';
import { Sheet } from '../../components/ui/Sheet';
import { Tag } from '../../components/ui/Tag';
import { SiteTime } from '../../components/ui/Time';
import type { SitePage } from '../../schemas/api/site';
import { paths } from '../../schemas/paths';
import { radioSheet } from '../../words/site';

const line =
  'flex flex-wrap items-baseline justify-between gap-x-4 border-b border-rule-faint py-2 last:border-b-0';

interface Props extends Pick<SitePage, 'gateways' | 'loggers'> {
  siteId: string;
  now: string;
  timeZone: string;
  zone: boolean;
}

/** Who hears the units and who reports them: gateways, learned from what is heard, and loggers. */
export const RadioSheet = memo(function RadioSheet({
  siteId,
  gateways,
  loggers,
  now,
  timeZone,
  zone,
}: Props) {
  const at = (time: string | null) =>
    time ? <SiteTime at={time} now={now} timeZone={timeZone} zone={zone} /> : 'never';
  return (
    <Sheet id="radio" title={radioSheet.gatewaysAndLoggers} aside={radioSheet.gatewaysAreLearnedFrom}>
      {gateways.length === 0 && <Notice kind="empty" title={radioSheet.noGatewayHasBeen} />}
      <ul>
        {gateways.map((gateway) => (
          <li key={`${gateway.number} ${gateway.name}`} className={line}>
            <span className="font-semibold">{gateway.name}</span>
            <span className="flex flex-wrap items-baseline gap-x-3 text-sm text-ink-2">
              {gateway.silent && (
                <Tag tone="slate" shape="▨">
                  {radioSheet.silent}
                </Tag>
              )}
              {radioSheet.byItHeard(gateway.units)}
              {at(gateway.lastHeardAt)}
            </span>
          </li>
        ))}
        {loggers.map((logger) => (
          <li key={logger.serial} className={line}>
            <span className="font-semibold">{radioSheet.loggerSerial(logger.serial)}</span>
            <span className="text-sm text-ink-2">
              {logger.firmware && radioSheet.firmware(logger.firmware)}
              {radioSheet.lastSpoke}
              {at(logger.lastSpokeAt)}
            </span>
          </li>
        ))}
      </ul>
      <a className="target inline-flex items-center text-petrol hover:underline" href={paths.loggers(siteId)}>
        {radioSheet.tokensOfTheLoggers}
      </a>
      {gateways.some((g) => g.silent) && (
        <p className="mt-2 text-sm text-ink-2">{radioSheet.whetherUnitsBehindA}</p>
      )}
    </Sheet>
  );
});

import { memo } from 'react';
import { Notice } from '../../components/ui/Notice';
import { Sheet } from '../../components/ui/Sheet';
import { SiteTime } from '../../components/ui/Time';
import { withQuery } from '../../lib/api';
import type { SiteStanding } from '../../schemas/api/causes';
import { paths } from '../../schemas/paths';
import { standingSheet } from '../../words/site';

interface Props {
  siteId: string;
  standing: SiteStanding;
  now: string;
  timeZone: string;
}

/** What stands beside the moment: works that go on or come, and what the nights have found. */
export const StandingSheet = memo(function StandingSheet({ siteId, standing, now, timeZone }: Props) {
  const { works, daily } = standing;
  const going = works.filter((w) => w.startsAt <= now && w.endsAt > now);
  return (
    <>
      {going.map((w) => (
        <div key={w.id} className="mb-4">
          <Notice kind="stale" title={standingSheet.plannedWorks(w.reason)}>
            {standingSheet.stringsUntil(
              w.strings === null
                ? standingSheet.atTheWholeSite
                : standingSheet.atStrings(w.strings.join(', ')),
            )}
            <SiteTime at={w.endsAt} now={now} timeZone={timeZone} />
            {standingSheet.whatHappensThereIs}
            <a href={paths.plannedWorks(siteId)}>{standingSheet.plannedWorks2}</a>
          </Notice>
        </div>
      ))}
      {daily.length > 0 && (
        <Sheet
          id="nights-found"
          title={standingSheet.whatTheNightsHave}
          className="mb-6"
          aside={<a href={withQuery(paths.causes(), { site: siteId })}>{standingSheet.allCausesHere}</a>}
        >
          <ul className="divide-y divide-rule-faint">
            {daily.map((c) => (
              <li key={c.id} className="flex flex-wrap items-baseline justify-between gap-x-4 py-1">
                <a href={paths.cause(c.id)} className="target flex items-center text-petrol hover:underline">
                  {c.headline}
                </a>
                <span className="text-sm text-ink-2">
                  {standingSheet.since}
                  <SiteTime at={c.since} now={now} timeZone={timeZone} />
                  {c.lossWhDay !== null && c.lossWhDay >= 1 && standingSheet.lossWhDayADay(c.lossWhDay)}
                </span>
              </li>
            ))}
          </ul>
        </Sheet>
      )}
    </>
  );
});

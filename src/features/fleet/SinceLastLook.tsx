import { useState } from 'react';
import { Sheet } from '../../components/ui/Sheet';
import { fullTime } from '../../drawings/times';
import { siteClock, useReaderZone } from '../../components/ui/reader-zone';
import type { SinceLastLook as Missed } from '../../schemas/api/fleet';
import { paths } from '../../schemas/paths';
import { missedInWords } from './missed';
import { SEEN_COOKIE } from './seen';
import { sinceLastLook } from '../../words/fleet';

/** For whoever comes back: what happened meanwhile, the gravest first, until they have said that they saw it. */
export function SinceLastLook({ missed, now, timeZone }: { missed: Missed; now: string; timeZone: string }) {
  const [seen, setSeen] = useState(false);
  const readerZone = useReaderZone();
  if (seen) return null;
  return (
    <Sheet
      id="since"
      className="mb-6"
      title={
        <>
          {sinceLastLook.sinceYouLastLooked}
          <time dateTime={missed.since} title={fullTime(missed.since, timeZone)} className="font-medium">
            {siteClock(missed.since, now, timeZone, readerZone)}
          </time>
        </>
      }
      aside={
        <button
          type="button"
          className="target -my-2 px-1 font-medium text-petrol hover:underline"
          onClick={() => {
            document.cookie = `${SEEN_COOKIE}=${encodeURIComponent(missed.since)}; path=/; max-age=2592000; samesite=lax`;
            setSeen(true);
          }}
        >
          {sinceLastLook.seen}
        </button>
      }
    >
      <ul className="grid gap-x-8 gap-y-1.5 sm:grid-cols-2">
        {missed.items.map((item) => (
          <li key={`${item.siteId} ${item.kind}`} className="flex justify-between gap-3">
            <span className="min-w-0">
              {sinceLastLook.itemAt(missedInWords(item))}
              <a href={paths.site(item.siteId)} className="link">
                {item.siteName}
              </a>
            </span>
            <time
              dateTime={item.newestAt}
              title={fullTime(item.newestAt, item.timeZone)}
              className="shrink-0 text-sm text-ink-2"
            >
              {siteClock(item.newestAt, now, item.timeZone, readerZone)}
            </time>
          </li>
        ))}
      </ul>
      {missed.more > 0 && (
        <p className="mt-2 text-sm text-ink-2">{sinceLastLook.andMoreEachSite(missed.more)}</p>
      )}
    </Sheet>
  );
}

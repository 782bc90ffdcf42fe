import { memo, type ReactNode } from 'react';
import { fullTime } from '../../drawings/times';
import type { Acknowledgement, AcknowledgeReply, SiteContact } from '../../schemas/api/fleet';
import type { CauseNow } from '../../schemas/api/now';
import { withQuery } from '../../lib/api';
import { paths } from '../../schemas/paths';
import { StateTag } from '../states/StateTag';
import { Tag } from '../ui/Tag';
import { siteClock, useReaderZone } from '../ui/reader-zone';
import { Acknowledge } from './Acknowledge';
import { later } from '../../lib/later';
import { placesInWords, placesOf, positionsInWords } from './places';
import { alternativesInWords, isHazard, treatAsLive } from './words';
import { causeSheet } from '../../words/shared-causes';
import { capital } from '../../words/domain-counts';

const Taking = later(
  async () => (await import('./Acknowledge')).Acknowledge,
  import.meta.env.SSR ? Acknowledge : null,
);

interface Props {
  cause: CauseNow;
  timeZone: string;
  now: string;
  contact: SiteContact | undefined;
  taken: Acknowledgement | undefined;
  onTaken: (reply: AcknowledgeReply) => void;
  /** The site is what the page is about: it isn't named again. */
  ofThisSite?: boolean;
  /** Beside the words: the units one by one, say. */
  children?: ReactNode;
}

export function CauseTag({ verdict }: Pick<CauseNow, 'verdict'>) {
  if (verdict === 'silent')
    return (
      <Tag tone="slate" shape="▨">
        {causeSheet.silent}
      </Tag>
    );
  return <StateTag state={null} verdict={verdict} />;
}

/** Strings as links while they are few, else in words. */
function Where({ cause, begins }: { cause: CauseNow; begins: boolean }) {
  const places = placesOf(cause.units);
  if (places.length === 0 || places.length > 3) {
    const words = placesInWords(cause.units);
    return <>{begins ? capital(words) : words}</>;
  }
  return (
    <>
      {places.map((place, i) => (
        <span key={place.stringId}>
          {i > 0 && '; '}
          <a href={paths.string(cause.siteId, place.stringId)}>
            {begins && i === 0 ? causeSheet.string : causeSheet.string2} {place.stringName}
          </a>
          , {positionsInWords(place.positions)}
        </span>
      ))}
    </>
  );
}

/** One cause to act on, as a sheet: what, where, what it rests on, since when, and what it costs. */
export const CauseSheet = memo(function CauseSheet({
  cause,
  timeZone,
  now,
  contact,
  taken,
  onTaken,
  ofThisSite = false,
  children,
}: Props) {
  const readerZone = useReaderZone();
  const live = treatAsLive(cause);
  const facts = [
    cause.lossWhPerDay !== null && cause.lossWhPerDay > 0 ? causeSheet.losingDay(cause.lossWhPerDay) : '',
    cause.confidence < 0.9 ? causeSheet.confidenceSure(cause.confidence) : '',
  ].filter(Boolean);
  return (
    <article
      className={`min-w-0 border-b border-t-2 border-b-rule border-t-ink bg-sheet px-[18px] py-4 ${children ? 'grid gap-x-10 gap-y-3 lg:grid-cols-2' : ''}`}
    >
      <div className="min-w-0">
        <div>
          <CauseTag verdict={cause.verdict} />
        </div>
        <h3 className="mt-2.5 text-[17px] leading-6">{cause.headline}</h3>
        <p className="mt-1 text-[15px] leading-[22px] text-ink-2">
          {!ofThisSite && (
            <>
              <a href={paths.site(cause.siteId)}>{cause.siteName}</a>,{' '}
            </>
          )}
          <Where cause={cause} begins={ofThisSite} />. {cause.evidence}
          {live && <strong className="font-semibold text-ink"> {live}</strong>}
        </p>
        <p className="mt-2 text-sm text-ink-2">
          {causeSheet.since}
          <time dateTime={cause.since} title={fullTime(cause.since, timeZone)}>
            {siteClock(cause.since, now, timeZone, readerZone)}
          </time>
          {facts.length > 0 && ` · ${facts.join(' · ')}`}
        </p>
        {cause.alternatives.length > 0 && (
          <p className="mt-1 text-sm text-ink-2">
            {causeSheet.itCouldAlsoBe(alternativesInWords(cause.alternatives))}
          </p>
        )}
        <p className="no-print mt-1">
          <a
            href={withQuery(paths.causes(), { site: cause.siteId, kind: cause.verdict })}
            className="target inline-flex items-center text-sm text-petrol hover:underline"
          >
            {causeSheet.evidenceHistoryWhatTo}
          </a>
        </p>
        {isHazard(cause) && (
          <Taking
            cause={cause}
            contact={contact}
            taken={taken}
            now={now}
            timeZone={timeZone}
            onTaken={onTaken}
          />
        )}
      </div>
      {children && <div className="min-w-0">{children}</div>}
    </article>
  );
});

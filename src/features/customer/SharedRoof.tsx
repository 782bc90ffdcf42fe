import { Caution } from '../../components/ui/Caution';
import { Heading } from '../../components/ui/Heading';
import { clocksDiffer, useReaderZone } from '../../components/ui/reader-zone';
import type { SharedSite } from '../../schemas/api/share';
import { lifeCard, monthCard, yearCard } from './cards';
import { FigureSheet } from '../../components/ui/FigureSheet';
import { TodaySheet } from './TodaySheet';
import { useShared } from './use-shared';
import { customerWords, heardAt } from '../../words/customer-sentences';
import { sharedRoof } from '../../words/shared-page';

/** What is said where a link no longer works. */
export const LINK_OVER = {
  title: sharedRoof.noLongerShared,
  sentence: sharedRoof.theLinkWasEnded,
};

/** A roof for whoever has the link: it says less than the owner's page, and nothing on it can be operated. */
export function SharedRoof({ token, initial }: { token: string; initial: SharedSite }) {
  const readerZone = useReaderZone();
  const { site, ended, late } = useShared(token, initial);
  if (ended) return <Heading finding={LINK_OVER.title} sentence={LINK_OVER.sentence} />;
  const { now, timeZone } = site;
  const words = customerWords(now, site.today, timeZone, site, 'anybody');
  return (
    <>
      <header className="mb-7">
        <h1 className="text-[30px] leading-[36px] tracking-[-0.03em] sm:text-[42px] sm:leading-[50px]">
          {words.heading}
        </h1>
        <p className="mt-2 max-w-[62ch] text-[17px] leading-6 text-ink-2 sm:text-lg">
          {words.sentences.join(' ')}
        </p>
        <p className="mt-2 text-sm text-ink-2">
          {sharedRoof.asOfAtReaderZone(
            heardAt(now),
            now.at,
            timeZone,
            readerZone,
            clocksDiffer(now.at, timeZone, readerZone),
          )}
          {late && sharedRoof.notReadSince}
        </p>
      </header>
      {words.caution && (
        <div className="mb-5">
          <Caution strong={words.caution.strong}>{words.caution.rest}</Caution>
        </div>
      )}
      <div className="grid gap-4">
        <TodaySheet today={site.today} at={now.at} timeZone={timeZone} />
        <div className="grid gap-4 sm:grid-cols-3">
          <FigureSheet card={monthCard(site.month)} />
          <FigureSheet card={yearCard(site.year, site.life)} />
          <FigureSheet card={lifeCard(site.life)} />
        </div>
      </div>
    </>
  );
}

import { useQuery } from '@tanstack/react-query';
import { Caution } from '../../components/ui/Caution';
import { Sheet } from '../../components/ui/Sheet';
import { longDate } from '../../drawings/times';
import { api } from '../../lib/api';
import { queryClient } from '../../lib/query-client';
import { clocksDiffer, useReaderZone } from '../../components/ui/reader-zone';
import { paths } from '../../schemas/paths';
import type { CustomerSite } from '../../schemas/api/customer';
import {
  careWords,
  lifeCard,
  monthCard,
  monthWords,
  switchWords,
  testWords,
  workingTimeCard,
  worthCard,
  yearCard,
} from './cards';
import { FigureSheet } from '../../components/ui/FigureSheet';
import { TodaySheet } from './TodaySheet';
import { customerWords, heardAt } from '../../words/customer-sentences';
import { roofPage } from '../../words/customer';

/** How often the page reads itself again. */
const EVERY_MS = 30_000;

/** The papers of the handover: the newest first, earlier ones below. */
function Papers({ roof }: { roof: CustomerSite }) {
  if (roof.papers.length === 0 && roof.months.length === 0) return null;
  return (
    <Sheet id="papers" title={roofPage.papers}>
      <HandoverPapers roof={roof} />
      <MonthReports roof={roof} />
    </Sheet>
  );
}

function MonthReports({ roof }: { roof: CustomerSite }) {
  const [newest, ...earlier] = roof.months;
  if (!newest) return null;
  const link = (month: string) => (
    <a
      href={paths.api.customerMonth(roof.site.id, month)}
      className="inline-flex min-h-[44px] items-center text-petrol hover:underline"
    >
      {roofPage.monthPdf(monthWords(month))}
    </a>
  );
  return (
    <div className="mt-2">
      <p>{roofPage.whatYourRoofMade}</p>
      <p>{link(newest)}</p>
      {earlier.length > 0 && (
        <details>
          <summary className="target cursor-pointer text-petrol">{roofPage.earlierMonths}</summary>
          <ul className="grid grid-cols-2 gap-x-4 sm:grid-cols-3">
            {earlier.map((month) => (
              <li key={month}>{link(month)}</li>
            ))}
          </ul>
        </details>
      )}
    </div>
  );
}

function HandoverPapers({ roof }: { roof: CustomerSite }) {
  const [newest, ...earlier] = roof.papers;
  if (!newest) return null;
  const file = (paper: CustomerSite['papers'][number]) => `${paths.api.paper(paper.ref)}?form=pdf`;
  const day = (paper: CustomerSite['papers'][number]) => longDate(paper.madeAt, roof.site.timeZone);
  return (
    <>
      <p>{roofPage.handoverSays(day(newest))}</p>
      <p className="mt-2">
        <a
          href={file(newest)}
          className="inline-flex min-h-[44px] items-center font-semibold text-petrol hover:underline"
        >
          {roofPage.handoverPapersPdf}
        </a>
      </p>
      {earlier.length > 0 && (
        <details>
          <summary className="target cursor-pointer text-petrol">{roofPage.earlierVersions}</summary>
          <ul>
            {earlier.map((paper) => (
              <li key={paper.ref}>
                <a
                  href={file(paper)}
                  className="inline-flex min-h-[44px] items-center text-petrol hover:underline"
                >
                  {roofPage.versionOfPaper(paper.version, day(paper))}
                </a>
              </li>
            ))}
          </ul>
        </details>
      )}
    </>
  );
}

/** A roof for the people whom it belongs to: read only, in sentences. */
export function RoofPage({ initial }: { initial: CustomerSite }) {
  const readerZone = useReaderZone();
  const {
    data: roof,
    error,
    dataUpdatedAt,
  } = useQuery(
    {
      queryKey: ['roof', initial.site.id],
      queryFn: ({ signal }) => api<CustomerSite>(paths.api.customer(initial.site.id), { signal }),
      initialData: initial,
      refetchInterval: EVERY_MS,
      refetchOnWindowFocus: true,
    },
    queryClient(),
  );
  const { site, care } = roof;
  const words = customerWords(roof.now, roof.today, site.timeZone, care);
  const phone = care.phone.replace(/[^+\d]/g, '');
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
          {roofPage.asOf(
            heardAt(roof.now),
            roof.now.at,
            site.timeZone,
            readerZone,
            clocksDiffer(roof.now.at, site.timeZone, readerZone),
          )}
          {error && dataUpdatedAt > 0 && roofPage.notReadSince}
        </p>
      </header>
      {words.caution && (
        <div className="mb-5">
          <Caution strong={words.caution.strong}>{words.caution.rest}</Caution>
        </div>
      )}
      <div className="grid gap-4">
        <TodaySheet today={roof.today} at={roof.now.at} timeZone={site.timeZone} />
        <div className={`grid gap-4 ${roof.worth ? 'sm:grid-cols-3' : 'sm:grid-cols-2 lg:grid-cols-4'}`}>
          <FigureSheet card={monthCard(roof.month)} />
          <FigureSheet card={yearCard(roof.year, roof.life)} />
          <FigureSheet card={lifeCard(roof.life)} />
          <FigureSheet card={workingTimeCard(roof.life)} />
          {roof.worth && (
            <div className="sm:col-span-2">
              <FigureSheet card={worthCard(roof.worth)} />
            </div>
          )}
        </div>
        <div className="grid gap-4 sm:grid-cols-2">
          <Sheet id="shutdown" title={roofPage.rapidShutdown}>
            <p>{testWords(roof.lastTest, site.ruleSet, site.timeZone)}</p>
            <p className="mt-2 text-ink-2">{switchWords(site)}</p>
          </Sheet>
          <Sheet id="care" title={roofPage.whoLooksAfterIt}>
            {care.logo && (
              <img
                src={paths.api.logo(care.logo)}
                alt={care.organisation}
                className="mb-3 max-h-[56px] max-w-[220px] bg-[#fff]"
              />
            )}
            <p>{careWords(care)}</p>
            {phone && (
              <p className="mt-2">
                <a
                  className="inline-flex min-h-[44px] items-center text-[17px] font-semibold"
                  href={`tel:${phone}`}
                >
                  {care.phone}
                </a>
              </p>
            )}
            <p className="mt-2 text-ink-2">{roofPage.emergency}</p>
          </Sheet>
        </div>
        <Papers roof={roof} />
      </div>
    </>
  );
}

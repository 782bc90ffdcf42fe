import { useQuery } from '@tanstack/react-query';
import { Caution } from '../../components/ui/Caution';
import { Sheet } from '../../components/ui/Sheet';
import { DayCurve } from '../../drawings/DayCurve';
import { energy, percent } from '../../drawings/numbers';
import { clock, longDate, zoneName } from '../../drawings/times';
import { api } from '../../lib/api';
import { queryClient } from '../../lib/query-client';
import { clocksDiffer, useReaderZone } from '../../components/ui/reader-zone';
import { paths } from '../../schemas/paths';
import type { CustomerSite } from '../../schemas/api/customer';
import {
  careWords,
  clearDayWords,
  lifeCard,
  monthCard,
  switchWords,
  testWords,
  workingTimeCard,
  type Card,
} from './cards';
import { dayHours } from './day-hours';
import { customerWords } from './words';

/** How often the page reads itself again. */
const EVERY_MS = 30_000;

function Figure({ card }: { card: Card }) {
  return (
    <Sheet>
      <h2 className="text-sm font-normal tracking-normal text-ink-2">{card.label}</h2>
      <p className="my-1 text-[26px] font-semibold leading-8 tracking-[-0.02em] sm:text-[30px] sm:leading-9">
        {card.figure}
      </p>
      <p className="text-ink-2">{card.note}</p>
    </Sheet>
  );
}

function Today({ roof }: { roof: CustomerSite }) {
  const { today, site } = roof;
  const curve = dayHours(today, roof.now.at);
  const label =
    today.energy === null
      ? 'Nothing is known of today yet; the dotted line is a clear day of this date.'
      : `Power made today, ${energy(today.energy)} so far, beside a clear day of this date${
          today.clearEnergySoFar > 0 ? `: ${percent(today.energy / today.clearEnergySoFar)} of it by now` : ''
        }.`;
  return (
    <Sheet id="today" title="Today" aside={`solid: made · ${clearDayWords(today.clearFrom)}`} flush>
      <div className="hidden sm:block">
        <DayCurve {...curve} label={label} width={860} height={270} />
      </div>
      <div className="sm:hidden">
        <DayCurve {...curve} label={label} width={360} height={210} />
      </div>
      {today.energy === null && <p className="mt-2 text-ink-2">Nothing is known of today yet.</p>}
      <details className="mt-2 text-sm text-ink-2">
        <summary className="inline-flex min-h-[36px] cursor-pointer items-center underline underline-offset-2">
          The same as a table
        </summary>
        <div
          className="mt-2 max-h-[320px] overflow-auto"
          tabIndex={0}
          role="region"
          aria-label="Today as a table"
        >
          <table className="w-full max-w-[420px] text-left">
            <caption className="sr-only">Mean power of each quarter of an hour</caption>
            <thead>
              <tr className="border-b border-rule">
                <th scope="col" className="py-1 font-medium">
                  From
                </th>
                <th scope="col" className="py-1 text-right font-medium">
                  Made (kW)
                </th>
                <th scope="col" className="py-1 text-right font-medium">
                  Clear day (kW)
                </th>
              </tr>
            </thead>
            <tbody>
              {curve.rows.map((r) => (
                <tr key={r.at} className="border-b border-rule-faint">
                  <td className="py-1">{clock(r.at, site.timeZone)}</td>
                  <td className="py-1 text-right">{r.made === null ? '–' : (r.made / 1000).toFixed(1)}</td>
                  <td className="py-1 text-right">{(r.clear / 1000).toFixed(1)}</td>
                </tr>
              ))}
            </tbody>
          </table>
        </div>
      </details>
    </Sheet>
  );
}

/** The papers of the handover: the newest first, earlier ones below. */
function Papers({ roof }: { roof: CustomerSite }) {
  const [newest, ...earlier] = roof.papers;
  if (!newest) return null;
  const file = (paper: CustomerSite['papers'][number]) => `${paths.api.paper(paper.ref)}?form=pdf`;
  const day = (paper: CustomerSite['papers'][number]) => longDate(paper.madeAt, roof.site.timeZone);
  return (
    <Sheet id="papers" title="Papers">
      <p>
        How your system is built, what was measured, and how to look after it, as of {day(newest)}. Keep a
        copy where the people who work on the roof will find it.
      </p>
      <p className="mt-2">
        <a
          href={file(newest)}
          className="inline-flex min-h-[44px] items-center font-semibold text-petrol hover:underline"
        >
          Handover papers, PDF
        </a>
      </p>
      {earlier.length > 0 && (
        <details>
          <summary className="target cursor-pointer text-petrol">Earlier versions</summary>
          <ul>
            {earlier.map((paper) => (
              <li key={paper.ref}>
                <a
                  href={file(paper)}
                  className="inline-flex min-h-[44px] items-center text-petrol hover:underline"
                >
                  Version {paper.version}, {day(paper)}
                </a>
              </li>
            ))}
          </ul>
        </details>
      )}
    </Sheet>
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
          As of {clock(roof.now.at, site.timeZone)}
          {readerZone && clocksDiffer(roof.now.at, site.timeZone, readerZone)
            ? ` ${zoneName(roof.now.at, site.timeZone)}, the time at the roof`
            : ''}
          .
          {error && dataUpdatedAt > 0 && ' It could not be read again since; the next try follows by itself.'}
        </p>
      </header>
      {words.caution && (
        <div className="mb-5">
          <Caution strong={words.caution.strong}>{words.caution.rest}</Caution>
        </div>
      )}
      <div className="grid gap-4">
        <Today roof={roof} />
        <div className="grid gap-4 sm:grid-cols-3">
          <Figure card={monthCard(roof.month)} />
          <Figure card={lifeCard(roof.life)} />
          <Figure card={workingTimeCard(roof.life)} />
        </div>
        <div className="grid gap-4 sm:grid-cols-2">
          <Sheet id="shutdown" title="Rapid shutdown">
            <p>{testWords(roof.lastTest, site.ruleSet, site.timeZone)}</p>
            <p className="mt-2 text-ink-2">{switchWords(site)}</p>
          </Sheet>
          <Sheet id="care" title="Who looks after it">
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
            <p className="mt-2 text-ink-2">In an emergency call the emergency services first.</p>
          </Sheet>
        </div>
        <Papers roof={roof} />
      </div>
    </>
  );
}

import { QueryClientProvider, useQuery, useQueryClient } from '@tanstack/react-query';
import { useState } from 'react';
import { ButtonLink } from '../../components/ui/Button';
import { Caution } from '../../components/ui/Caution';
import { Heading } from '../../components/ui/Heading';
import { LiveMark } from '../../components/ui/Live';
import { NotRead } from '../../components/ui/NotRead';
import { energy } from '../../drawings/numbers';
import { clock } from '../../drawings/times';
import { TraceSheet } from '../../components/trace/TraceSheet';
import { Sheet } from '../../components/ui/Sheet';
import { withQuery } from '../../lib/api';
import { useLive } from '../../lib/live-hook';
import { queryClient } from '../../lib/query-client';
import type { StringHistory, StringPage } from '../../schemas/api/string';
import { paths } from '../../schemas/paths';
import { cautionOf, nextSteps, readingsOf } from './advice';
import { EventsSheet } from './EventsSheet';
import { HistorySheet } from './HistorySheet';
import { NextStrings } from './NextStrings';
import { ReadingsSheet } from './ReadingsSheet';
import { StaircaseSheet } from './StaircaseSheet';
import { UnitsSheet } from './UnitsSheet';
import { UnitTable } from './UnitTable';
import { stringQuery } from './queries';
import { findingOf, type Sentence } from './words';

interface Props {
  page: StringPage;
  history: StringHistory;
}

function Words({ sentence }: { sentence: Sentence }) {
  return sentence.map((part, i) =>
    typeof part === 'string' ? part : <strong key={i}>{part.strong}</strong>,
  );
}

/** What /live says of this string replaces what the page said; events come on top. */
function useStringLive(initial: StringPage) {
  const client = useQueryClient();
  const options = stringQuery(initial.string.id);
  const result = useQuery({
    ...options,
    initialData: initial,
    initialDataUpdatedAt: new Date(initial.at).getTime(),
  });
  const status = useLive(`string:${initial.string.id}`, (change) => {
    client.setQueryData(options.queryKey, (page) => {
      if (!page) return page;
      const string = change.strings?.find((s) => s.id === page.string.id) ?? page.string;
      const known = new Set(page.events.map((e) => e.id));
      const fresh = (change.events ?? []).filter((e) => !known.has(e.id)).reverse();
      return {
        ...page,
        string,
        events: [...fresh, ...page.events].slice(0, 60),
        at: new Date().toISOString(),
      };
    });
    // the judgement's evidence comes with the page, not by the wire
    if (change.events?.length) void client.invalidateQueries({ queryKey: options.queryKey, exact: true });
  });
  return { page: result.data, failed: result.isRefetchError ? result.error : null, status };
}

function Page({ page: initial, history }: Props) {
  const { page, failed, status } = useStringLive(initial);
  const [chosen, setChosen] = useState<ReadonlySet<number> | null>(null);
  const { string, site } = page;
  const when = { now: page.at, timeZone: site.timeZone };
  const finding = findingOf(string, when);
  const readings = readingsOf(page, finding);
  const steps = nextSteps(page, finding);
  const caution = cautionOf(finding);
  return (
    <>
      <Heading
        crumbs={[
          { label: 'Fleet', href: paths.fleet() },
          { label: site.name, href: paths.site(site.id) },
          { label: `String ${string.name}` },
        ]}
        finding={finding.heading}
        sentence={<Words sentence={finding.sentence} />}
        actions={<NextStrings page={page} />}
      />
      <div className="-mt-3 mb-3 flex flex-col gap-2 empty:hidden">
        <LiveMark
          lostSince={!status.live && status.since ? status.since.toISOString() : null}
          timeZone={site.timeZone}
        />
        <NotRead error={failed} title="The newest figures could not be fetched" />
      </div>
      <p className="sr-only" role="status">
        {finding.heading}
      </p>
      <div className="grid gap-5 lg:grid-cols-[minmax(0,1fr)_minmax(280px,28%)]">
        <div className="flex min-w-0 flex-col gap-5">
          <StaircaseSheet page={page} />
          <div className="lg:hidden">
            <Caution strong={caution.strong}>{caution.rest}</Caution>
          </div>
          <HistorySheet
            id={string.id}
            subject={`${site.name}, string ${string.name}`}
            initial={history}
            today={page.at}
          />
          <TraceSheet siteId={site.id} stringId={string.id} timeZone={site.timeZone} />
        </div>
        <div className="flex min-w-0 flex-col gap-5">
          {readings.main && <ReadingsSheet readings={readings} />}
          {steps.length > 0 && (
            <Sheet title="Do next" id="next">
              <ol className="list-decimal space-y-1.5 pl-5 text-[15px] leading-[22px]">
                {steps.map((step) => (
                  <li key={step}>{step}</li>
                ))}
              </ol>
              <p className="no-print mt-3">
                <ButtonLink href={withQuery(paths.walk(site.id), { string: string.name })}>
                  Walk and ladder card
                </ButtonLink>
              </p>
            </Sheet>
          )}
          <div className="hidden lg:block">
            <Caution strong={caution.strong}>{caution.rest}</Caution>
          </div>
          {page.lostToday && (
            <Sheet title="Lost here today" id="lost">
              <p className="text-[28px] font-semibold leading-8 tracking-[-0.02em]">
                {energy(page.lostToday.wh)}
              </p>
              <p className="mt-2 text-sm text-ink-2">
                since {clock(page.lostToday.since, site.timeZone)}, against {page.lostToday.against}
              </p>
            </Sheet>
          )}
          <EventsSheet page={page} />
        </div>
        <div className="flex min-w-0 flex-col gap-5 lg:col-span-2">
          {string.kind !== 'shutdown_only' && <UnitsSheet page={page} chosen={chosen} onChoose={setChosen} />}
          <UnitTable page={page} />
        </div>
      </div>
    </>
  );
}

/** The page of one string, rendered on the server and then kept live. */
export function StringView(props: Props) {
  return (
    <QueryClientProvider client={queryClient()}>
      <Page {...props} />
    </QueryClientProvider>
  );
}

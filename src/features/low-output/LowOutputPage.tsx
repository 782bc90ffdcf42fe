import { QueryClientProvider, useQuery } from '@tanstack/react-query';
import { useMemo, useState } from 'react';
import { SavedViews } from '../../components/saved-views/SavedViews';
import { ButtonLink } from '../../components/ui/Button';
import { Choice } from '../../components/ui/Choice';
import { Heading } from '../../components/ui/Heading';
import { LongTable } from '../../components/ui/LongTable';
import { NotRead } from '../../components/ui/NotRead';
import { Notice } from '../../components/ui/Notice';
import { SearchInput } from '../../components/ui/SearchInput';
import { Sheet } from '../../components/ui/Sheet';
import type { Column } from '../../components/ui/Table';
import { energy, money, percent, UNKNOWN } from '../../drawings/numbers';
import { shortDate } from '../../drawings/times';
import { api, withQuery } from '../../lib/api';
import { queryClient } from '../../lib/query-client';
import { addressOf, useViewInUrl } from '../../lib/view-in-url';
import {
  LOW_SORTS,
  lowRows,
  SIGNATURES,
  type LowOutput,
  type LowOutputView,
  type LowString,
} from '../../schemas/api/low-output-rows';
import type { SavedView } from '../../schemas/api/saved-views';
import { paths } from '../../schemas/paths';
import { SIGNATURE_WORDS } from '../../words/low-output-sentences';
import { lowOutputPage } from '../../words/low-output';
import { toldOf, type Whole } from './first-page';

interface Props {
  initial: LowOutput;
  /** Of a large fleet, of which `initial` is the first page; null: it is all. */
  whole: Whole | null;
  saved: SavedView[];
  view: LowOutputView;
  defaults: LowOutputView;
}

const day = (text: string): string => shortDate(`${text}T12:00:00Z`, 'UTC');
const between = (r: LowString): string =>
  r.lossKWhDayLow === null || r.lossKWhDayHigh === null
    ? ''
    : lowOutputPage.lossKWhDayLowToLossKWhDayHigh(r.lossKWhDayLow, r.lossKWhDayHigh);

function columnsFor(currency: string | null, priced: boolean): Column<LowString>[] {
  return [
    {
      key: 'string',
      label: lowOutputPage.string,
      sortable: true,
      cell: (r) => (
        <>
          <a
            href={withQuery(paths.string(r.site.id, r.string.id), { on: r.day })}
            className="inline-flex min-h-[44px] items-center font-medium text-petrol hover:underline"
          >
            {r.string.name}
          </a>
          <span className="-mt-2 block text-sm leading-4 text-ink-2 md:hidden">
            {r.site.name} · {SIGNATURE_WORDS[r.signature].toLowerCase()}
          </span>
        </>
      ),
    },
    {
      key: 'site',
      label: lowOutputPage.site,
      sortable: true,
      from: 'md',
      cell: (r) => (
        <a href={paths.site(r.site.id)} className="hover:text-petrol hover:underline">
          {r.site.name}
        </a>
      ),
    },
    {
      key: 'loss',
      label: lowOutputPage.lossADay,
      numeric: true,
      sortable: true,
      cell: (r) => (
        <>
          {r.lossKWhDay === null ? UNKNOWN : energy(r.lossKWhDay * 1000)}
          <span className="block text-xs text-ink-2">{between(r)}</span>
        </>
      ),
    },
    ...(priced
      ? [
          {
            key: 'money',
            label: lowOutputPage.worthADay,
            numeric: true,
            sortable: true,
            from: 'sm' as const,
            cell: (r: LowString) => money(r.moneyDay, currency ?? 'EUR'),
          },
        ]
      : []),
    {
      key: 'share',
      label: lowOutputPage.missing,
      numeric: true,
      sortable: true,
      from: 'sm',
      cell: (r) => percent(r.share),
    },
    {
      key: 'since',
      label: lowOutputPage.since,
      numeric: true,
      sortable: true,
      from: 'sm',
      cell: (r) => (
        <time dateTime={r.since} title={lowOutputPage.judgedAfter(r.day)}>
          {day(r.since)}
        </time>
      ),
    },
    {
      key: 'signature',
      label: lowOutputPage.whatItLooksLike,
      from: 'md',
      cell: (r) => (
        <>
          <span className="font-medium">{SIGNATURE_WORDS[r.signature]}</span>
          <span className="block max-w-[300px] text-sm leading-4 text-ink-2">{r.words}</span>
        </>
      ),
    },
    { key: 'plane', label: lowOutputPage.plane, sortable: true, from: 'lg', cell: (r) => r.plane },
    {
      key: 'confidence',
      label: lowOutputPage.confidence,
      numeric: true,
      sortable: true,
      from: 'lg',
      cell: (r) => (
        <>
          {percent(r.confidence)}
          <span className="block text-xs text-ink-2">
            {r.method === 'siblings' ? lowOutputPage.bySiblings : lowOutputPage.byTheModel}
            {r.scope === 'input' ? lowOutputPage.input : ''}
          </span>
        </>
      ),
    },
    {
      key: 'case',
      label: lowOutputPage.case,
      cell: (r) => (
        <a
          href={
            r.openCase
              ? paths.caseFile(r.openCase.id)
              : paths.caseNew(r.cause ? { cause: r.cause } : { string: r.string.id })
          }
          className="inline-flex min-h-[44px] items-center whitespace-nowrap text-petrol hover:underline"
        >
          {r.openCase ? lowOutputPage.caseOpenCase(r.openCase.number) : lowOutputPage.openACase}
        </a>
      ),
    },
  ];
}

function Page({ initial, whole, saved, view: asked, defaults }: Props) {
  const [view, setView] = useViewInUrl(asked, defaults);
  const [allWanted, setAllWanted] = useState(false);
  const {
    data: low,
    error,
    isFetching,
    refetch,
  } = useQuery({
    queryKey: ['low-output'],
    queryFn: ({ signal }) => api<LowOutput>(paths.api.lowOutput(), { signal }),
    initialData: initial,
    initialDataUpdatedAt: 0,
    // the rest of a large fleet is asked for by who wants to see other rows than the first
    enabled: whole !== null && (allWanted || view !== asked),
  });
  const partly = low === initial ? whole : null;
  const rows = useMemo(() => lowRows(low.rows, view), [low.rows, view]);
  const told = useMemo(() => partly ?? toldOf(low), [partly, low]);
  const { heading, sentence } = told.finding;
  const query = addressOf('', view, defaults).replace(/^\?/, '');
  return (
    <>
      <Heading
        crumbs={[{ label: lowOutputPage.causes, href: paths.causes() }, { label: lowOutputPage.lowStrings }]}
        finding={heading}
        sentence={sentence}
        actions={<ButtonLink href={withQuery(paths.api.lowOutputCsv(), { ...view })}>CSV</ButtonLink>}
      />
      {told.rows === 0 ? (
        <Notice kind={low.judged === 0 ? 'empty' : 'done'} title={heading}>
          {sentence}
        </Notice>
      ) : (
        <Sheet
          id="low"
          title={lowOutputPage.strings}
          aside={
            partly && (isFetching || view !== asked)
              ? lowOutputPage.theOthersAreNot
              : lowOutputPage.rowsOfRows(partly ? partly.shown : rows.length, told.rows)
          }
          flush
        >
          <form
            className="no-print mb-3 flex flex-wrap items-center gap-x-4 gap-y-2"
            onSubmit={(event) => event.preventDefault()}
          >
            <SearchInput
              name="q"
              label={lowOutputPage.findBySiteString}
              placeholder={lowOutputPage.siteStringPlane}
              value={view.q}
              onChange={(q) => setView({ q }, 'typed')}
            />
            <Choice
              inline
              label={lowOutputPage.site}
              value={view.site}
              options={[
                { value: 'all', label: lowOutputPage.all },
                ...told.sites.map(({ id, name }) => ({ value: id, label: name })),
              ]}
              onChange={(site) => setView({ site })}
            />
            <Choice
              inline
              label={lowOutputPage.looksLike}
              value={view.signature}
              options={[
                { value: 'all', label: lowOutputPage.anything },
                ...SIGNATURES.map((s) => ({ value: s, label: SIGNATURE_WORDS[s].toLowerCase() })),
              ]}
              onChange={(value) => setView({ signature: SIGNATURES.find((s) => s === value) ?? 'all' })}
            />
            <Choice
              inline
              label={lowOutputPage.case}
              value={view.case}
              options={[
                { value: 'all', label: lowOutputPage.withOrWithout },
                { value: 'open', label: lowOutputPage.withACase },
                { value: 'none', label: lowOutputPage.withoutACase },
              ]}
              onChange={(value) => setView({ case: value === 'open' || value === 'none' ? value : 'all' })}
            />
          </form>
          <div className="mb-3">
            <SavedViews list="low_output" path={paths.lowOutput()} query={query} initial={saved} />
          </div>
          <NotRead error={error} title={lowOutputPage.theOthersCouldNot} onRetry={refetch} className="mb-3" />
          <LongTable
            caption={lowOutputPage.stringsThatMakeLess}
            columns={columnsFor(low.currency, told.priced)}
            rows={rows}
            what={lowOutputPage.rows}
            of={view === asked ? partly?.shown : undefined}
            onMore={() => setAllWanted(true)}
            rowKey={(r) => r.string.id}
            sorting={{ key: view.sort, descending: view.order === 'down' }}
            onSort={({ key, descending }) => {
              const sort = LOW_SORTS.find((k) => k === key);
              if (sort) setView({ sort, order: descending ? 'down' : 'up' });
            }}
            empty={
              <p className="py-4 text-ink-2">
                {partly ? lowOutputPage.noneOfTheFirst : lowOutputPage.noLowStringIs}
              </p>
            }
          />
          <p className="mt-3 text-xs text-ink-3">{lowOutputPage.asEachStringsNewest}</p>
        </Sheet>
      )}
    </>
  );
}

/** Strings that are low now, over all sites. */
export function LowOutputPage(props: Props) {
  return (
    <QueryClientProvider client={queryClient()}>
      <Page {...props} />
    </QueryClientProvider>
  );
}

import { QueryClientProvider } from '@tanstack/react-query';
import { SavedViews } from '../../components/saved-views/SavedViews';
import { ButtonLink } from '../../components/ui/Button';
import { Choice } from '../../components/ui/Choice';
import { Heading } from '../../components/ui/Heading';
import { LongTable } from '../../components/ui/LongTable';
import { Notice } from '../../components/ui/Notice';
import { SearchInput } from '../../components/ui/SearchInput';
import { Sheet } from '../../components/ui/Sheet';
import type { Column } from '../../components/ui/Table';
import { energy, money, percent, UNKNOWN } from '../../drawings/numbers';
import { shortDate } from '../../drawings/times';
import { withQuery } from '../../lib/api';
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
import { lowFinding, SIGNATURE_WORDS } from '../../words/low-output-sentences';
import { lowOutputPage } from '../../words/low-output';

interface Props {
  low: LowOutput;
  saved: SavedView[];
  view: LowOutputView;
  defaults: LowOutputView;
}

const day = (text: string): string => shortDate(`${text}T12:00:00Z`, 'UTC');
const between = (r: LowString): string =>
  r.lossKWhDayLow === null || r.lossKWhDayHigh === null
    ? ''
    : lowOutputPage.lossKWhDayLowToLossKWhDayHigh(r.lossKWhDayLow, r.lossKWhDayHigh);

function columnsFor(low: LowOutput): Column<LowString>[] {
  const priced = low.currency !== null && low.rows.some((r) => r.moneyDay !== null);
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
            cell: (r: LowString) => money(r.moneyDay, low.currency ?? 'EUR'),
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

function Page({ low, saved, view: asked, defaults }: Props) {
  const [view, setView] = useViewInUrl(asked, defaults);
  const rows = lowRows(low.rows, view);
  const { heading, sentence } = lowFinding(low);
  const sites = [...new Map(low.rows.map((r) => [r.site.id, r.site.name]))].sort((a, b) =>
    a[1].localeCompare(b[1]),
  );
  const query = addressOf('', view, defaults).replace(/^\?/, '');
  return (
    <>
      <Heading
        crumbs={[{ label: lowOutputPage.causes, href: paths.causes() }, { label: lowOutputPage.lowStrings }]}
        finding={heading}
        sentence={sentence}
        actions={<ButtonLink href={withQuery(paths.api.lowOutputCsv(), { ...view })}>CSV</ButtonLink>}
      />
      {low.rows.length === 0 ? (
        <Notice kind={low.judged === 0 ? 'empty' : 'done'} title={heading}>
          {sentence}
        </Notice>
      ) : (
        <Sheet
          id="low"
          title={lowOutputPage.strings}
          aside={lowOutputPage.rowsOfRows(rows.length, low.rows.length)}
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
                ...sites.map(([value, label]) => ({ value, label })),
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
          <LongTable
            caption={lowOutputPage.stringsThatMakeLess}
            columns={columnsFor(low)}
            rows={rows}
            what={lowOutputPage.rows}
            rowKey={(r) => r.string.id}
            sorting={{ key: view.sort, descending: view.order === 'down' }}
            onSort={({ key, descending }) => {
              const sort = LOW_SORTS.find((k) => k === key);
              if (sort) setView({ sort, order: descending ? 'down' : 'up' });
            }}
            empty={<p className="py-4 text-ink-2">{lowOutputPage.noLowStringIs}</p>}
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

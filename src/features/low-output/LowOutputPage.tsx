import { QueryClientProvider } from '@tanstack/react-query';
import { SavedViews } from '../../components/saved-views/SavedViews';
import { ButtonLink } from '../../components/ui/Button';
import { Choice } from '../../components/ui/Choice';
import { Heading } from '../../components/ui/Heading';
import { Notice } from '../../components/ui/Notice';
import { SearchInput } from '../../components/ui/SearchInput';
import { Sheet } from '../../components/ui/Sheet';
import { Table, type Column } from '../../components/ui/Table';
import { energy, money, number, percent, UNKNOWN } from '../../drawings/numbers';
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
import { lowFinding, SIGNATURE_WORDS } from './words';

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
    : `${number(r.lossKWhDayLow, 1)} to ${number(r.lossKWhDayHigh, 1)}`;

function columnsFor(low: LowOutput): Column<LowString>[] {
  const priced = low.currency !== null && low.rows.some((r) => r.moneyDay !== null);
  return [
    {
      key: 'string',
      label: 'String',
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
      label: 'Site',
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
      label: 'Loss a day',
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
            label: 'Worth a day',
            numeric: true,
            sortable: true,
            from: 'sm' as const,
            cell: (r: LowString) => money(r.moneyDay, low.currency ?? 'EUR'),
          },
        ]
      : []),
    {
      key: 'share',
      label: 'Missing',
      numeric: true,
      sortable: true,
      from: 'sm',
      cell: (r) => percent(r.share),
    },
    {
      key: 'since',
      label: 'Since',
      numeric: true,
      sortable: true,
      from: 'sm',
      cell: (r) => (
        <time dateTime={r.since} title={`judged after ${r.day}`}>
          {day(r.since)}
        </time>
      ),
    },
    {
      key: 'signature',
      label: 'What it looks like',
      from: 'md',
      cell: (r) => (
        <>
          <span className="font-medium">{SIGNATURE_WORDS[r.signature]}</span>
          <span className="block max-w-[300px] text-sm leading-4 text-ink-2">{r.words}</span>
        </>
      ),
    },
    { key: 'plane', label: 'Plane', sortable: true, from: 'lg', cell: (r) => r.plane },
    {
      key: 'confidence',
      label: 'Confidence',
      numeric: true,
      sortable: true,
      from: 'lg',
      cell: (r) => (
        <>
          {percent(r.confidence)}
          <span className="block text-xs text-ink-2">
            {r.method === 'siblings' ? 'by siblings' : 'by the model'}
            {r.scope === 'input' ? ', input' : ''}
          </span>
        </>
      ),
    },
    {
      key: 'case',
      label: 'Case',
      cell: (r) => (
        <a
          href={
            r.openCase
              ? paths.caseFile(r.openCase.id)
              : paths.caseNew(r.cause ? { cause: r.cause } : { string: r.string.id })
          }
          className="inline-flex min-h-[44px] items-center whitespace-nowrap text-petrol hover:underline"
        >
          {r.openCase ? `Case ${r.openCase.number}` : 'Open a case'}
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
        crumbs={[{ label: 'Causes', href: paths.causes() }, { label: 'Low strings' }]}
        finding={heading}
        sentence={sentence}
        actions={<ButtonLink href={withQuery(paths.api.lowOutputCsv(), { ...view })}>CSV</ButtonLink>}
      />
      {low.rows.length === 0 ? (
        <Notice kind={low.judged === 0 ? 'empty' : 'done'} title={heading}>
          {sentence}
        </Notice>
      ) : (
        <Sheet id="low" title="Strings" aside={`${rows.length} of ${low.rows.length}`} flush>
          <form
            className="no-print mb-3 flex flex-wrap items-center gap-x-4 gap-y-2"
            onSubmit={(event) => event.preventDefault()}
          >
            <SearchInput
              name="q"
              label="Find by site, string, plane or words"
              placeholder="Site, string, plane"
              value={view.q}
              onChange={(q) => setView({ q }, 'typed')}
            />
            <Choice
              inline
              label="Site"
              value={view.site}
              options={[{ value: 'all', label: 'all' }, ...sites.map(([value, label]) => ({ value, label }))]}
              onChange={(site) => setView({ site })}
            />
            <Choice
              inline
              label="Looks like"
              value={view.signature}
              options={[
                { value: 'all', label: 'anything' },
                ...SIGNATURES.map((s) => ({ value: s, label: SIGNATURE_WORDS[s].toLowerCase() })),
              ]}
              onChange={(value) => setView({ signature: SIGNATURES.find((s) => s === value) ?? 'all' })}
            />
            <Choice
              inline
              label="Case"
              value={view.case}
              options={[
                { value: 'all', label: 'with or without' },
                { value: 'open', label: 'with a case' },
                { value: 'none', label: 'without a case' },
              ]}
              onChange={(value) => setView({ case: value === 'open' || value === 'none' ? value : 'all' })}
            />
          </form>
          <div className="mb-3">
            <SavedViews list="low_output" path={paths.lowOutput()} query={query} initial={saved} />
          </div>
          <Table
            caption="Strings that make less than they should"
            columns={columnsFor(low)}
            rows={rows}
            rowKey={(r) => r.string.id}
            sorting={{ key: view.sort, descending: view.order === 'down' }}
            onSort={({ key, descending }) => {
              const sort = LOW_SORTS.find((k) => k === key);
              if (sort) setView({ sort, order: descending ? 'down' : 'up' });
            }}
            empty={<p className="py-4 text-ink-2">No low string is like that. Take a filter away.</p>}
          />
          <p className="mt-3 text-xs text-ink-3">
            As each string’s newest judged day found it, over the last five days with enough sun; figures of
            loss with their middle 90 %. Held against the strings of its plane, or against the model where
            fewer than five are alike.
          </p>
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

import { Button, ButtonLink } from '../../components/ui/Button';
import { Choice } from '../../components/ui/Choice';
import { Notice } from '../../components/ui/Notice';
import { SearchInput } from '../../components/ui/SearchInput';
import { Sheet } from '../../components/ui/Sheet';
import { SiteTime } from '../../components/ui/Time';
import { Tag } from '../../components/ui/Tag';
import { CAUSE_KINDS } from '../../domain/causes/kinds';
import { withQuery } from '../../lib/api';
import type { CauseItem, CausesPage } from '../../schemas/api/causes';
import { paths } from '../../schemas/paths';
import { filtered, KIND_TONE, kindWords, lossWords, partsWords } from './words';

const SHOW_WORDS = { open: 'open', over: 'over', all: 'open and over' } as const;
const SORT_WORDS = {
  gravity: 'gravest first',
  newest: 'newest first',
  oldest: 'oldest first',
  loss: 'costliest first',
} as const;

export function KindTag({ kind }: Pick<CauseItem, 'kind'>) {
  const { tone, shape } = KIND_TONE[kind];
  return (
    <Tag tone={tone} shape={shape}>
      {kindWords(kind)}
    </Tag>
  );
}

function Line({ cause, page }: { cause: CauseItem; page: CausesPage }) {
  const time = { now: page.at, timeZone: cause.timeZone };
  const perDay = lossWords(cause.lossWhDay, cause.lossMoneyDay, page.currency, ' a day');
  const upToNow = lossWords(cause.lossWh, cause.lossMoney, page.currency, ' so far');
  return (
    <li className="grid gap-x-6 gap-y-1 py-3 lg:grid-cols-[minmax(0,1fr)_210px_190px]">
      <div className="min-w-0">
        <p className="mb-1 flex flex-wrap items-center gap-2">
          <KindTag kind={cause.kind} />
          {cause.closedAt !== null && (
            <Tag tone="petrol" shape="✓">
              Over
            </Tag>
          )}
          {cause.reopened > 0 && (
            <Tag>came back {cause.reopened === 1 ? 'once' : `${cause.reopened} times`}</Tag>
          )}
        </p>
        <a
          href={paths.cause(cause.id)}
          className="target -my-1 inline-flex items-center break-words py-1 text-[17px] font-semibold leading-6 tracking-[-0.01em] hover:underline"
        >
          {cause.headline}
        </a>
        <p className="text-sm text-ink-2">
          <a href={paths.site(cause.siteId)} className="text-petrol hover:underline">
            {cause.siteName}
          </a>{' '}
          · {partsWords(cause.units)}
        </p>
      </div>
      <p className="text-sm text-ink-2">
        since <SiteTime at={cause.since} {...time} zone />
        {cause.closedAt !== null && (
          <span className="block">
            over <SiteTime at={cause.closedAt} {...time} zone />
          </span>
        )}
        {cause.acknowledged && <span className="block">{cause.acknowledged.person} has it</span>}
        {cause.openCase && (
          <a
            href={paths.caseFile(cause.openCase.id)}
            className="target flex items-center text-petrol hover:underline"
          >
            Case {cause.openCase.number}
          </a>
        )}
      </p>
      <p className="text-sm tabular-nums lg:text-right">
        {perDay && <span className="block">{perDay}</span>}
        {upToNow && <span className="block text-ink-2">{upToNow}</span>}
      </p>
    </li>
  );
}

/** Causes of all sites; a plain form filters by the address. */
export function CausesList({ page }: { page: CausesPage }) {
  const { view } = page;
  const query = {
    show: view.show,
    kind: view.kind === 'any' ? '' : view.kind,
    site: view.site ?? '',
    q: view.q,
    sort: view.sort,
  };
  return (
    <>
      <form action={paths.causes()} className="no-print mb-4 flex flex-wrap items-center gap-x-3 gap-y-2">
        <SearchInput
          name="q"
          label="Find a cause by words, site, string or serial"
          placeholder="Words, site, string or serial"
          defaultValue={view.q}
          className="sm:w-[250px]"
        />
        <Choice
          inline
          label="Show"
          name="show"
          defaultValue={view.show}
          options={Object.entries(SHOW_WORDS).map(([value, label]) => ({ value, label }))}
        />
        <Choice
          inline
          label="Kind"
          name="kind"
          defaultValue={view.kind}
          options={[
            { value: 'any', label: 'any' },
            ...CAUSE_KINDS.map((kind) => ({ value: kind, label: kindWords(kind) })),
          ]}
        />
        <Choice
          inline
          label="Site"
          name="site"
          defaultValue={view.site ?? ''}
          options={[{ value: '', label: 'any' }, ...page.sites.map((s) => ({ value: s.id, label: s.name }))]}
        />
        <Choice
          inline
          label="Order"
          name="sort"
          defaultValue={view.sort}
          options={Object.entries(SORT_WORDS).map(([value, label]) => ({ value, label }))}
        />
        <Button type="submit">Show</Button>
        <ButtonLink href={withQuery(paths.api.causesCsv(), query)} className="sm:ml-auto">
          CSV
        </ButtonLink>
      </form>
      {page.causes.length === 0 ? (
        <Notice kind="empty" title={filtered(page) ? 'Nothing fits' : 'No cause'}>
          {filtered(page)
            ? 'Look at all kinds and sites, or use fewer words.'
            : view.show === 'open'
              ? 'What ended lately is under "over".'
              : 'Nothing was found in the last 90 days.'}
        </Notice>
      ) : (
        <Sheet
          id="causes"
          title={view.show === 'over' ? 'Over' : 'Causes'}
          aside={`${page.causes.length}${page.more ? ' and more: narrow the list' : ''}`}
        >
          <ul className="divide-y divide-rule-faint">
            {page.causes.map((cause) => (
              <Line key={cause.id} cause={cause} page={page} />
            ))}
          </ul>
        </Sheet>
      )}
    </>
  );
}

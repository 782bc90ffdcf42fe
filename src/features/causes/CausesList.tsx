import { Button, ButtonLink } from '../../components/ui/Button';
import { Choice } from '../../components/ui/Choice';
import { Heading } from '../../components/ui/Heading';
import { Notice } from '../../components/ui/Notice';
import { SearchInput } from '../../components/ui/SearchInput';
import { Sheet } from '../../components/ui/Sheet';
import { SiteTime } from '../../components/ui/Time';
import { Tag } from '../../components/ui/Tag';
import { CAUSE_KINDS } from '../../domain/causes/kinds';
import { withQuery } from '../../lib/api';
import type { CauseItem, CausesPage } from '../../schemas/api/causes';
import { paths } from '../../schemas/paths';
import { causesList } from '../../words/causes';
import { filtered, KIND_TONE, kindWords, listFinding, lossWords, partsWords } from './words';

const SHOW_WORDS = { open: causesList.open, over: causesList.over, all: causesList.openAndOver } as const;
const SORT_WORDS = {
  gravity: causesList.gravestFirst,
  newest: causesList.newestFirst,
  oldest: causesList.oldestFirst,
  loss: causesList.costliestFirst,
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
  const perDay = lossWords(cause.lossWhDay, cause.lossMoneyDay, page.currency, causesList.aDay);
  const upToNow = lossWords(cause.lossWh, cause.lossMoney, page.currency, causesList.untilNow);
  return (
    <li className="grid gap-x-6 gap-y-1 py-3 lg:grid-cols-[minmax(0,1fr)_210px_190px]">
      <div className="min-w-0">
        <p className="mb-1 flex flex-wrap items-center gap-2">
          <KindTag kind={cause.kind} />
          {cause.closedAt !== null && (
            <Tag tone="petrol" shape="✓">
              {causesList.over2}
            </Tag>
          )}
          {cause.reopened > 0 && <Tag>{causesList.cameBackReopened1(cause.reopened)}</Tag>}
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
        {causesList.since}
        <SiteTime at={cause.since} {...time} zone />
        {cause.closedAt !== null && (
          <span className="block">
            {causesList.over3}
            <SiteTime at={cause.closedAt} {...time} zone />
          </span>
        )}
        {cause.acknowledged && <span className="block">{causesList.hasIt(cause.acknowledged.person)}</span>}
        {cause.openCase && (
          <a
            href={paths.caseFile(cause.openCase.id)}
            className="target flex items-center text-petrol hover:underline"
          >
            {causesList.caseOpenCase(cause.openCase.number)}
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
  const { finding, sentence } = listFinding(page);
  return (
    <>
      <Heading
        finding={finding}
        sentence={sentence}
        actions={
          <>
            <ButtonLink href={paths.lowOutput()}>{causesList.stringsThatMakeLess}</ButtonLink>
            <ButtonLink href={withQuery(paths.api.causesCsv(), query)}>CSV</ButtonLink>
          </>
        }
      />
      <form action={paths.causes()} className="no-print mb-4 flex flex-wrap items-center gap-x-3 gap-y-2">
        <SearchInput
          name="q"
          label={causesList.findACauseBy}
          placeholder={causesList.wordsSiteStringOr}
          defaultValue={view.q}
          className="sm:w-[250px]"
        />
        <Choice
          inline
          label={causesList.show}
          name="show"
          defaultValue={view.show}
          options={Object.entries(SHOW_WORDS).map(([value, label]) => ({ value, label }))}
        />
        <Choice
          inline
          label={causesList.kind}
          name="kind"
          defaultValue={view.kind}
          options={[
            { value: 'any', label: causesList.any },
            ...CAUSE_KINDS.map((kind) => ({ value: kind, label: kindWords(kind) })),
          ]}
        />
        <Choice
          inline
          label={causesList.site}
          name="site"
          defaultValue={view.site ?? ''}
          options={[
            { value: '', label: causesList.any },
            ...page.sites.map((s) => ({ value: s.id, label: s.name })),
          ]}
        />
        <Choice
          inline
          label={causesList.order}
          name="sort"
          defaultValue={view.sort}
          options={Object.entries(SORT_WORDS).map(([value, label]) => ({ value, label }))}
        />
        <Button type="submit">{causesList.show}</Button>
      </form>
      {page.causes.length === 0 ? (
        <Notice kind="empty" title={filtered(page) ? causesList.nothingFits : causesList.noCause}>
          {filtered(page)
            ? causesList.lookAtAllKinds
            : view.show === 'open'
              ? causesList.whatEndedLatelyIs
              : causesList.nothingWasFoundIn}
        </Notice>
      ) : (
        <Sheet
          id="causes"
          title={view.show === 'over' ? causesList.over2 : causesList.causes}
          aside={causesList.causesMore(page.causes.length, page.more)}
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

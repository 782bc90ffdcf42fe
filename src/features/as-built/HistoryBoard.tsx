import { keepPreviousData, useInfiniteQuery } from '@tanstack/react-query';
import { useDeferredValue } from 'react';
import { Button, ButtonLink } from '../../components/ui/Button';
import { Choice } from '../../components/ui/Choice';
import { Field } from '../../components/ui/Field';
import { Heading } from '../../components/ui/Heading';
import { NotRead } from '../../components/ui/NotRead';
import { Notice } from '../../components/ui/Notice';
import { Sheet } from '../../components/ui/Sheet';
import { SiteTime } from '../../components/ui/Time';
import { api, withQuery } from '../../lib/api';
import { queryClient } from '../../lib/query-client';
import { useViewInUrl } from '../../lib/view-in-url';
import type { HistoryItem, HistoryPage, HistoryView, Stay } from '../../schemas/api/as-built';
import { paths } from '../../schemas/paths';
import { changedFields, historyTitle, sourceWords } from '../../words/as-built-history-sentences';
import { changedBy, historyBoard } from '../../words/as-built-history';

export const HISTORY_DEFAULTS: HistoryView = { find: '', kind: 'all', person: '', string: '' };
const KINDS = [
  { value: 'all', label: historyBoard.everything },
  { value: 'units', label: historyBoard.units },
  { value: 'strings', label: historyBoard.stringsAndSlots },
  { value: 'parts', label: historyBoard.otherParts },
  { value: 'site', label: historyBoard.theSite },
] as const;

interface Props {
  initial: HistoryPage;
  view: HistoryView;
}

/** Who changed what of the as-built, when and why; a serial shows its whole life. */
export function HistoryBoard({ initial, view: initialView }: Props) {
  const client = queryClient();
  const [view, change] = useViewInUrl(initialView, HISTORY_DEFAULTS);
  const asked = useDeferredValue(view);
  const { site } = initial;
  const { data, error, fetchNextPage, hasNextPage, isFetchingNextPage, refetch } = useInfiniteQuery(
    {
      queryKey: ['as-built-history', site.id, asked],
      queryFn: ({ pageParam, signal }) =>
        api<HistoryPage>(paths.api.asBuiltHistory(site.id), {
          query: { ...asked, before: pageParam },
          signal,
        }),
      initialPageParam: null as number | null,
      getNextPageParam: (last: HistoryPage) => last.before,
      ...(JSON.stringify(asked) === JSON.stringify(initialView) && {
        initialData: { pages: [initial], pageParams: [null] },
      }),
      placeholderData: keepPreviousData,
    },
    client,
  );
  const pages = data?.pages ?? [];
  const items = pages.flatMap((p) => p.items);
  const stays = pages[0]?.stays ?? [];
  const [newest] = items;
  const filtered = JSON.stringify(asked) !== JSON.stringify(HISTORY_DEFAULTS);
  const finding = newest
    ? historyTitle(newest)
    : filtered
      ? historyBoard.noChangeFits
      : historyBoard.nothingHasBeenChanged;
  return (
    <>
      <Heading
        crumbs={[
          { label: historyBoard.commissioning, href: paths.commissioning() },
          { label: site.name, href: paths.commissioningSite(site.id) },
          { label: historyBoard.asBuilt, href: paths.asBuilt(site.id) },
          { label: historyBoard.history },
        ]}
        finding={finding}
        sentence={
          newest ? (
            <>
              {historyBoard.filteredPersonAt(filtered, changedBy(newest.person))}
              <SiteTime at={newest.at} now={initial.at} timeZone={site.timeZone} zone />
              {newest.reason ? <>: “{newest.reason}”</> : '.'}
            </>
          ) : (
            historyBoard.everyChangeOfThe
          )
        }
      />
      <div className="no-print mb-5 grid items-end gap-3 sm:grid-cols-2 lg:grid-cols-[1fr_180px_180px_180px_auto]">
        <Field
          label={historyBoard.serialNameOrReason}
          type="search"
          autoComplete="off"
          value={view.find}
          onChange={(e) => change({ find: e.target.value }, 'typed')}
        />
        <Choice
          label={historyBoard.what}
          value={view.kind}
          options={KINDS}
          onChange={(kind) => change({ kind: KINDS.find((k) => k.value === kind)?.value ?? 'all' })}
        />
        <Choice
          label={historyBoard.string}
          value={view.string}
          options={[
            { value: '', label: historyBoard.everyString },
            ...initial.strings.map((s) => ({ value: s.id, label: s.name })),
          ]}
          onChange={(string) => change({ string })}
        />
        <Choice
          label={historyBoard.person}
          value={view.person}
          options={[
            { value: '', label: historyBoard.everybody },
            ...initial.people.map((p) => ({ value: p.id, label: p.name })),
          ]}
          onChange={(person) => change({ person })}
        />
        <ButtonLink
          className="min-h-[44px]"
          href={withQuery(paths.api.asBuiltHistoryCsv(site.id), view)}
          download
        >
          CSV
        </ButtonLink>
      </div>
      <NotRead
        error={error}
        title={historyBoard.theHistoryCouldNot}
        kind="failed"
        onRetry={() => refetch()}
        className="mb-5"
      />
      {stays.length > 0 && <Life stays={stays} page={initial} />}
      <Sheet
        id="changes"
        title={historyBoard.changes}
        aside={historyBoard.newestFirstTimesIn(site.timeZone.replaceAll('_', ' '))}
      >
        {items.length === 0 ? (
          <Notice
            kind="empty"
            title={filtered ? historyBoard.noChangeFits : historyBoard.nothingHasBeenChanged}
            action={
              filtered ? (
                <Button onClick={() => change(HISTORY_DEFAULTS)}>{historyBoard.showEverything}</Button>
              ) : undefined
            }
          />
        ) : (
          <ol>
            {items.map((item) => (
              <Entry key={item.id} item={item} page={initial} />
            ))}
          </ol>
        )}
        {hasNextPage && (
          <Button className="mt-4" onClick={() => void fetchNextPage()} disabled={isFetchingNextPage}>
            {isFetchingNextPage ? historyBoard.reading : historyBoard.olderChanges}
          </Button>
        )}
      </Sheet>
    </>
  );
}

function Entry({ item, page }: { item: HistoryItem; page: HistoryPage }) {
  const fields = changedFields(item);
  const how = sourceWords(item.source);
  return (
    <li className="grid gap-x-5 border-b border-rule-faint py-2.5 last:border-b-0 sm:grid-cols-[150px_minmax(0,1fr)]">
      <div className="text-sm text-ink-2">
        <SiteTime at={item.at} now={page.at} timeZone={page.site.timeZone} />
        <span className="block">{changedBy(item.person)}</span>
      </div>
      <div className="min-w-0">
        <p className="font-medium">
          {historyTitle(item)}
          {how && <span className="font-normal text-ink-2">, {how}</span>}
        </p>
        {item.reason && <p className="text-ink-2">“{item.reason}”</p>}
        {fields.length > 0 && (
          <details className="mt-1" open={fields.length <= 3}>
            <summary className="cursor-pointer py-1 text-sm text-ink-2">
              {historyBoard.countedFieldsField(fields.length)}
            </summary>
            <dl className="text-sm">
              {fields.map((f) => (
                <div key={f.label} className="flex flex-wrap gap-x-2">
                  <dt className="text-ink-2">{f.label}</dt>
                  <dd className="min-w-0">
                    {f.before !== null && <span className="text-ink-2">{f.before} → </span>}
                    {f.after}
                  </dd>
                </div>
              ))}
            </dl>
          </details>
        )}
      </div>
    </li>
  );
}

/** A unit over its slots, oldest first. */
function Life({ stays, page }: { stays: readonly Stay[]; page: HistoryPage }) {
  const [first] = stays;
  const last = stays.at(-1);
  if (!first || !last) return null;
  return (
    <Sheet
      id="life"
      className="mb-5"
      title={historyBoard.serialToNullSits(first.serial, last.to, last.string, last.position)}
      aside={first.unitType}
    >
      <ol>
        {stays.map((stay) => (
          <li
            key={stay.from}
            className="flex flex-wrap gap-x-5 border-b border-rule-faint py-2 last:border-b-0"
          >
            <span className="font-medium">
              <a
                className="text-petrol hover:underline"
                href={`${paths.asBuilt(stay.siteId)}?string=${stay.stringId}`}
              >
                {historyBoard.whichPosition(stay.string, stay.position)}
              </a>
            </span>
            {stay.siteId !== page.site.id && <span>{stay.site}</span>}
            <span className="text-ink-2">
              {historyBoard.from}
              <SiteTime at={stay.from} now={page.at} timeZone={page.site.timeZone} />
              {stay.to === null ? (
                historyBoard.stillThere
              ) : (
                <>
                  {historyBoard.to}
                  <SiteTime at={stay.to} now={page.at} timeZone={page.site.timeZone} />
                </>
              )}
            </span>
          </li>
        ))}
      </ol>
    </Sheet>
  );
}

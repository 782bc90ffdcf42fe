import { useMutation, useQuery } from '@tanstack/react-query';
import { Button, ButtonLink } from '../../components/ui/Button';
import { Choice } from '../../components/ui/Choice';
import { Heading } from '../../components/ui/Heading';
import { LiveMark } from '../../components/ui/Live';
import { Notice } from '../../components/ui/Notice';
import { SearchInput } from '../../components/ui/SearchInput';
import { Segmented } from '../../components/ui/Segmented';
import { Sheet } from '../../components/ui/Sheet';
import { KINDS } from '../../domain/notices/kinds';
import { api, withQuery, type ApiError } from '../../lib/api';
import { useLive } from '../../lib/live-hook';
import { queryClient } from '../../lib/query-client';
import { useViewInUrl } from '../../lib/view-in-url';
import type { NoticeItem, NoticesPage, NoticesView } from '../../schemas/api/notices';
import { paths } from '../../schemas/paths';
import { NoticeList } from './NoticeList';
import { inOrder, NOTICES_DEFAULTS, noticesFinding, type NoticesList } from '../../words/notices-sentences';
import { noticesWords } from '../../words/notices';

interface Props {
  initial: NoticesPage;
  view: NoticesView;
}
type Marking = { ids: string[]; read: boolean } | { upTo: number };

/** One's own notices, the newest first; live. */
export function Notices({ initial, view: { before, ...first } }: Props) {
  const client = queryClient();
  const [view, setView] = useViewInUrl<NoticesList>(first, NOTICES_DEFAULTS);
  const isFirst = JSON.stringify(view) === JSON.stringify(first);
  const query = {
    ...view,
    kind: view.kind === 'all' ? '' : view.kind,
    show: view.show === 'all' ? '' : view.show,
  };
  const key = ['notices', view, isFirst ? (before ?? null) : null];
  const { data, error, isFetching } = useQuery(
    {
      queryKey: key,
      queryFn: ({ signal }) =>
        api<NoticesPage>(paths.api.notices(), { signal, query: { ...query, ...(isFirst && { before }) } }),
      ...(isFirst ? { initialData: initial } : {}),
      placeholderData: (previous: NoticesPage | undefined) => previous,
    },
    client,
  );
  const page = data ?? initial;
  const again = () => client.invalidateQueries({ queryKey: ['notices'] });
  const status = useLive('notices', (_, kind) => {
    if (kind === 'delta') void again();
  });
  const marking = useMutation<void, ApiError, Marking>(
    {
      mutationFn: (body) => api(paths.api.noticesRead(), { method: 'POST', body, keepalive: true }),
      onSettled: again,
    },
    client,
  );
  const words = noticesFinding(page);
  const newest = page.items[0];
  const filtered = view.q !== '' || view.show !== 'all' || view.kind !== 'all' || view.site !== '';
  const open = (item: NoticeItem) => {
    if (item.readAt === null) marking.mutate({ ids: [item.id], read: true });
  };
  return (
    <>
      <Heading
        finding={words.finding}
        sentence={words.sentence}
        actions={
          <>
            {page.hazards > 0 && view.kind !== 'hazard' && (
              <Button weight="primary" onClick={() => setView({ kind: 'hazard', show: 'unread' })}>
                {noticesWords.showTheseOnly}
              </Button>
            )}
            {page.unread > 0 && newest && (
              <Button disabled={marking.isPending} onClick={() => marking.mutate({ upTo: newest.number })}>
                {noticesWords.markAllAsRead}
              </Button>
            )}
            <ButtonLink href={paths.accountNotices()}>{noticesWords.chooseWhatYouAre}</ButtonLink>
          </>
        }
      />
      {(error ?? marking.error) && (
        <div className="mb-4">
          <Notice kind="failed" title={(error ?? marking.error)?.message ?? ''} />
        </div>
      )}
      <Sheet
        id="notices"
        title={noticesWords.notices}
        aside={
          <LiveMark
            lostSince={!status.live && status.since ? status.since.toISOString() : null}
            timeZone={page.timeZone}
          />
        }
      >
        <form
          className="no-print mb-2 flex flex-wrap items-center gap-x-4 gap-y-2"
          onSubmit={(event) => event.preventDefault()}
        >
          <SearchInput
            label={noticesWords.findANoticeOr}
            value={view.q}
            onChange={(typed) => setView({ q: typed }, 'typed')}
          />
          <Segmented
            label={noticesWords.whichNotices}
            options={[
              { value: 'all', label: noticesWords.all },
              { value: 'unread', label: noticesWords.unread },
            ]}
            value={view.show}
            onChange={(show) => setView({ show })}
          />
          <Choice
            inline
            label={noticesWords.about}
            value={view.kind}
            options={[
              { value: 'all', label: noticesWords.everything },
              ...page.kinds.map((kind) => ({ value: kind, label: KINDS[kind].name })),
            ]}
            onChange={(kind) => setView({ kind: page.kinds.find((k) => k === kind) ?? 'all' })}
          />
          {page.sites.length > 1 && (
            <Choice
              inline
              label={noticesWords.site}
              value={view.site}
              className="min-w-0 [&_select]:max-w-[220px]"
              options={[
                { value: '', label: noticesWords.everySite },
                ...page.sites.map((s) => ({ value: s.id, label: s.name })),
              ]}
              onChange={(site) => setView({ site })}
            />
          )}
          <ButtonLink href={withQuery(paths.api.noticesCsv(), query)} className="sm:ml-auto">
            CSV
          </ButtonLink>
        </form>
        {page.items.length === 0 ? (
          <Notice kind="empty" title={filtered ? noticesWords.noNoticeFitsThese : noticesWords.noNoticesYet}>
            {filtered ? noticesWords.useFewerWordsOr : ''}
          </Notice>
        ) : (
          <NoticeList
            items={inOrder(page.items)}
            at={page.at}
            timeZone={page.timeZone}
            onOpen={open}
            onMark={(item, read) => marking.mutate({ ids: [item.id], read })}
          />
        )}
        {page.next !== null && !isFetching && (
          <ButtonLink href={withQuery(paths.notices(), { ...query, before: page.next })} className="mt-3">
            {noticesWords.older}
          </ButtonLink>
        )}
      </Sheet>
    </>
  );
}

import { useQuery } from '@tanstack/react-query';
import { Suspense, useState } from 'react';
import type { SlotRef } from '../../components/placements/evidence';
import { LiveHeading } from '../../components/ui/LiveHeading';
import { NotRead } from '../../components/ui/NotRead';
import { Notice } from '../../components/ui/Notice';
import { Segmented } from '../../components/ui/Segmented';
import { late } from '../../lib/late';
import { api } from '../../lib/api';
import { useLive } from '../../lib/live-hook';
import { replaced, tells } from '../../lib/patch';
import { queryClient } from '../../lib/query-client';
import { useViewInUrl } from '../../lib/view-in-url';
import type { MembershipPage, MembershipView } from '../../schemas/api/membership';
import { paths } from '../../schemas/paths';
import { IsolationSheet } from './IsolationSheet';
import { isolationKey, isolationQuery } from './query';
import { SuspectsSheet } from './SuspectsSheet';
import { membershipWords, unbroken } from './words';
import { membershipBoard } from '../../words/membership';

const SwapDialog = late(async () => (await import('../../components/placements/SwapDialog')).SwapDialog);

const DEFAULTS: MembershipView = { hours: '6', unit: '' };

interface Props {
  initial: MembershipPage;
  view: MembershipView;
  /** Whether the person may change the as-built and start a watch. */
  mayWrite: boolean;
}

/** Which string's current each unit carries; the decisive way where that can't be told. */
export function MembershipBoard({ initial, view: asked, mayWrite }: Props) {
  const client = queryClient();
  const { id, timeZone } = initial.site;
  const [view, change] = useViewInUrl<MembershipView>(asked, DEFAULTS);
  const key = ['membership', id, view.hours];
  const { data, error, isFetching, refetch } = useQuery(
    {
      queryKey: key,
      queryFn: ({ signal }) =>
        api<MembershipPage>(paths.api.membership(id), { query: { hours: view.hours }, signal }),
      initialData: view.hours === asked.hours ? initial : undefined,
      placeholderData: (old: MembershipPage | undefined) => old,
      refetchInterval: 120_000,
    },
    client,
  );
  const page = data ?? initial;
  const status = useLive(`site:${id}`, (news, how) => {
    client.setQueryData<MembershipPage>(key, (old) =>
      old ? { ...old, strings: replaced(old.strings, news.strings, (s) => s.id) } : old,
    );
    if (how === 'delta' && tells(news, (e) => e.kind === 'roster_changed')) void refetch();
  });
  const [review, setReview] = useState<[SlotRef, SlotRef | null] | null>(null);
  const [string, setString] = useState('');
  const [done, setDone] = useState('');
  const { data: isolation } = useQuery({ ...isolationQuery(id), initialData: initial.isolation }, client);
  const words = membershipWords(page, isolation);
  const onReview = (first: SlotRef, second: SlotRef | null) => setReview([first, second]);
  return (
    <>
      <LiveHeading
        crumbs={[
          { label: membershipBoard.commissioning, href: paths.commissioning() },
          { label: page.site.name, href: paths.commissioningSite(id) },
          { label: membershipBoard.rollCall, href: paths.rollCall(id) },
        ]}
        finding={{
          heading: unbroken(words.heading),
          sentence: (
            <>
              {words.strong && <strong>{words.strong}</strong>} {words.rest}
            </>
          ),
        }}
        status={status}
        timeZone={timeZone}
      />
      <div className="mb-4 grid gap-3 empty:hidden">
        <NotRead error={error} title={membershipBoard.theCurrentsCouldNot} onRetry={() => refetch()} />
        {done && (
          <Notice kind="done" title={done}>
            {membershipBoard.theLoggersGetThe}
            <a href={paths.asBuiltHistory(id)} className="text-petrol hover:underline">
              {membershipBoard.seeTheHistory}
            </a>
          </Notice>
        )}
      </div>
      <div className="mb-3 flex flex-wrap items-center gap-x-3">
        <Segmented
          label={membershipBoard.reportsOf}
          options={[
            { value: '2', label: membershipBoard.last2Hours },
            { value: '6', label: membershipBoard.n6Hours },
            { value: '24', label: membershipBoard.n24Hours },
          ]}
          value={view.hours}
          onChange={(hours) => change({ hours })}
        />
        {isFetching && <span className="text-sm text-ink-2">{membershipBoard.reading}</span>}
      </div>
      <div className="grid gap-5 xl:grid-cols-2">
        <div className="grid min-w-0 content-start gap-5">
          <SuspectsSheet
            page={page}
            mayWrite={mayWrite}
            onReview={onReview}
            onIsolate={(stringId) => {
              setString(stringId);
              document.getElementById('isolation')?.scrollIntoView();
            }}
          />
        </div>
        <div
          className={`grid min-w-0 content-start gap-5 ${isolation.open ? 'order-first xl:order-none' : ''}`}
        >
          <IsolationSheet
            siteId={id}
            timeZone={timeZone}
            data={isolation}
            strings={page.strings}
            mayRun={mayWrite}
            string={string}
            onString={setString}
            onReview={mayWrite ? onReview : null}
          />
        </div>
      </div>
      {review && (
        <Suspense>
          <SwapDialog
            siteId={id}
            strings={page.strings}
            first={review[0]}
            second={review[1]}
            onClose={() => setReview(null)}
            onDone={(body) => {
              setReview(null);
              setDone(body.kind === 'swap' ? membershipBoard.theTwoUnitsAre : membershipBoard.theUnitIsMoved);
              void client.invalidateQueries({ queryKey: ['membership', id] });
              void client.invalidateQueries({ queryKey: isolationKey(id) });
            }}
          />
        </Suspense>
      )}
    </>
  );
}

import { useMutation, useQuery } from '@tanstack/react-query';
import { useState } from 'react';
import { Button } from '../../components/ui/Button';
import { Dialog } from '../../components/ui/Dialog';
import { Notice } from '../../components/ui/Notice';
import { Sheet } from '../../components/ui/Sheet';
import { Tag } from '../../components/ui/Tag';
import { RelativeTime } from '../../components/ui/Time';
import { longDate } from '../../drawings/times';
import { api, type ApiError } from '../../lib/api';
import { queryClient } from '../../lib/query-client';
import type { MadeShareLink, ShareLinkBody, ShareLinkItem, ShareLinks } from '../../schemas/api/share';
import { paths } from '../../schemas/paths';
import { ShareForm } from './ShareForm';
import { sharedPages } from '../../words/sharing';

/** "until 3 December 2026": the last day on which it works, which ends a moment before its instant. */
const untilWords = (link: ShareLinkItem, timeZone: string): string => {
  const last = (at: string) => longDate(Date.parse(at) - 1000, timeZone);
  if (link.endedAt) return sharedPages.endedAt(link.endedAt, timeZone);
  if (!link.expiresAt) return sharedPages.untilSomebodyEndsIt;
  return `${link.state === 'expired' ? sharedPages.ranOutAfter : sharedPages.until} ${last(link.expiresAt)}`;
};

/** For managers, under the owner's page: who may see it without signing in. */
export function SharedPages({
  siteId,
  siteName,
  initial,
}: {
  siteId: string;
  siteName: string;
  initial: ShareLinks;
}) {
  const client = queryClient();
  const key = ['share-links', siteId];
  const { data: page, error } = useQuery(
    {
      queryKey: key,
      queryFn: ({ signal }) => api<ShareLinks>(paths.api.shareLinks(siteId), { signal }),
      initialData: initial,
    },
    client,
  );
  const [making, setMaking] = useState(false);
  const [ending, setEnding] = useState<ShareLinkItem | null>(null);
  const again = () => void client.invalidateQueries({ queryKey: key });
  const make = useMutation<MadeShareLink, ApiError, ShareLinkBody>(
    {
      mutationFn: (body) => api(paths.api.shareLinks(siteId), { method: 'POST', body }),
      onSuccess: again,
    },
    client,
  );
  const end = useMutation<ShareLinkItem, ApiError, string>(
    {
      mutationFn: (link) => api(paths.api.shareLink(link), { method: 'DELETE' }),
      onSuccess: () => setEnding(null),
      onSettled: again,
    },
    client,
  );
  const { timeZone } = page;
  const open = page.links.filter((l) => l.state === 'open');
  const over = page.links.filter((l) => l.state !== 'open');
  const line = (link: ShareLinkItem) => (
    <li key={link.id} className="flex flex-wrap items-center justify-between gap-x-4 gap-y-2 py-2.5">
      <div className="min-w-0">
        <p className="font-medium">
          {link.label} {link.kiosk && <Tag tone="outline">{sharedPages.lobbyScreen}</Tag>}
        </p>
        <p className="text-sm text-ink-2">
          {untilWords(link, timeZone)} · {link.framedBy && sharedPages.inFrameOf(link.framedBy)}
          {sharedPages.madeBy(link.madeBy, link.createdAt, timeZone)}
          {link.lastUsedAt ? (
            <>
              {sharedPages.lastUsed}
              <RelativeTime at={link.lastUsedAt} now={page.at} timeZone={timeZone} />
            </>
          ) : (
            sharedPages.neverUsed
          )}
        </p>
      </div>
      {link.state === 'open' && (
        <Button
          aria-label={sharedPages.endIt2(link.label)}
          onClick={() => {
            end.reset();
            setEnding(link);
          }}
        >
          {sharedPages.endIt}
        </Button>
      )}
    </li>
  );
  return (
    <div className="no-print mt-8">
      <Sheet id="shared-pages" title={sharedPages.sharedPages} aside={sharedPages.onlyManagersSeeThis}>
        <p>{sharedPages.whoeverHasTheLink(siteName)}</p>
        <div className="mt-3">
          <Button
            weight="primary"
            onClick={() => {
              make.reset();
              setMaking(true);
            }}
          >
            {sharedPages.shareThisPage}
          </Button>
        </div>
        {error && (
          <div className="mt-3">
            <Notice kind="failed" title={sharedPages.notReadAnew}>
              {error.message}
            </Notice>
          </div>
        )}
        {open.length > 0 ? (
          <ul className="mt-3 divide-y divide-rule-faint">{open.map(line)}</ul>
        ) : (
          <p className="mt-3 text-ink-2">{sharedPages.nobodySeesItWithout}</p>
        )}
        {over.length > 0 && (
          <details className="mt-2">
            <summary className="target inline-flex cursor-pointer items-center text-petrol">
              {sharedPages.endedAndRunOut(over.length)}
            </summary>
            <ul className="divide-y divide-rule-faint">{over.map(line)}</ul>
          </details>
        )}
      </Sheet>
      <Dialog
        open={making}
        title={make.data ? sharedPages.linkShownOnce : sharedPages.shareThisPage}
        onClose={() => setMaking(false)}
      >
        <ShareForm
          busy={make.isPending}
          fault={make.error}
          made={make.data ?? null}
          onSubmit={(body) => make.mutate(body)}
          onClose={() => setMaking(false)}
        />
      </Dialog>
      <Dialog
        open={ending !== null}
        title={ending ? sharedPages.endEnding(ending.label) : ''}
        onClose={() => setEnding(null)}
      >
        <p>{sharedPages.screensAndPeopleThat}</p>
        {end.error && (
          <p role="alert" className="mt-3 font-medium text-rust-ink">
            {end.error.message}
          </p>
        )}
        <div className="mt-4 flex gap-2">
          <Button
            weight="primary"
            disabled={end.isPending}
            onClick={() => {
              if (ending) end.mutate(ending.id);
            }}
          >
            {sharedPages.endIt}
          </Button>
          <Button onClick={() => setEnding(null)}>{sharedPages.leaveIt}</Button>
        </div>
      </Dialog>
    </div>
  );
}

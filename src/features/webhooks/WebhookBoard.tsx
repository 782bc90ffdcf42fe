import { useMutation, useQuery } from '@tanstack/react-query';
import { useState } from 'react';
import { Button, ButtonLink } from '../../components/ui/Button';
import { Dialog } from '../../components/ui/Dialog';
import { Heading } from '../../components/ui/Heading';
import { Notice } from '../../components/ui/Notice';
import { Segmented } from '../../components/ui/Segmented';
import { Sheet } from '../../components/ui/Sheet';
import { KINDS } from '../../domain/notices/kinds';
import { api, withQuery, type ApiError } from '../../lib/api';
import { queryClient } from '../../lib/query-client';
import { useViewInUrl } from '../../lib/view-in-url';
import type { DeliveriesView, SecretShown, WebhookPage } from '../../schemas/api/webhooks';
import { paths } from '../../schemas/paths';
import { DeliveryList } from './DeliveryList';
import { SecretNotice } from './SecretNotice';
import { WebhookForm } from './WebhookForm';
import { webhookFinding } from '../../words/webhooks-sentences';
import { webhookBoard } from '../../words/webhooks';

type Act =
  | { do: 'change'; body: Record<string, unknown>; said: string }
  | { do: 'test' }
  | { do: 'resend'; delivery: string }
  | { do: 'remove' };
const DEFAULTS = { show: 'all' } as const;
const WAITING_LOOK_MS = 1500;

interface Props {
  initial: WebhookPage;
  view: DeliveriesView;
  timeZone: string;
}

/** One webhook: its calls and what came back, and what a manager can do with it. */
export function WebhookBoard({ initial, view: { before, ...first }, timeZone }: Props) {
  const client = queryClient();
  const { id } = initial.webhook;
  const [view, setView] = useViewInUrl<Omit<DeliveriesView, 'before'>>(first, DEFAULTS);
  const [open, setOpen] = useState<'change' | 'secret' | 'remove' | null>(null);
  const isFirst = view.show === first.show;
  const { data, error } = useQuery(
    {
      queryKey: ['webhook', id, view, isFirst ? (before ?? null) : null],
      queryFn: ({ signal }) =>
        api<WebhookPage>(paths.api.webhookDeliveries(id), {
          signal,
          query: { ...view, ...(isFirst && { before }) },
        }),
      ...(isFirst ? { initialData: initial } : {}),
      placeholderData: (previous: WebhookPage | undefined) => previous,
      // a call that is on its way comes back within seconds
      refetchInterval: ({ state }) =>
        state.data?.deliveries.some((d) => d.state === 'waits' && d.attempts.length === 0)
          ? WAITING_LOOK_MS
          : false,
    },
    client,
  );
  const page = data ?? initial;
  const hook = page.webhook;
  const acting = useMutation<SecretShown | undefined, ApiError, Act>(
    {
      mutationFn: (act) => {
        switch (act.do) {
          case 'change':
            return api(paths.api.webhook(id), { method: 'PATCH', body: act.body });
          case 'test':
            return api(paths.api.webhookTest(id), { method: 'POST' });
          case 'resend':
            return api(paths.api.webhookResend(act.delivery), { method: 'POST' });
          case 'remove':
            return api(paths.api.webhook(id), { method: 'DELETE' });
        }
      },
      onSuccess: (_, act) => {
        if (act.do === 'remove') window.location.assign(paths.webhooks());
        setOpen(null);
        void client.invalidateQueries({ queryKey: ['webhook', id] });
      },
    },
    client,
  );
  const begin = (what: typeof open) => {
    acting.reset();
    setOpen(what);
  };
  const words = webhookFinding(hook);
  const secret = acting.data?.secret;
  const said = acting.isSuccess && acting.variables.do === 'change' && !secret ? acting.variables.said : '';
  return (
    <>
      <Heading
        crumbs={[{ label: webhookBoard.webhooks, href: paths.webhooks() }, { label: hook.name }]}
        finding={words.finding}
        sentence={words.sentence}
        actions={
          <>
            <Button
              weight="primary"
              disabled={acting.isPending}
              onClick={() => acting.mutate({ do: 'test' })}
            >
              {webhookBoard.makeATestCall}
            </Button>
            <Button
              disabled={acting.isPending}
              onClick={() =>
                acting.mutate({
                  do: 'change',
                  body: { active: !hook.active },
                  said: hook.active ? webhookBoard.itIsSwitchedOff : webhookBoard.itIsSwitchedOn,
                })
              }
            >
              {hook.active ? webhookBoard.switchItOff : webhookBoard.switchItOn}
            </Button>
            <Button onClick={() => begin('change')}>{webhookBoard.change}</Button>
          </>
        }
      />
      <div role="status" className="mb-4 empty:hidden">
        {said && <Notice kind="done" title={said} />}
      </div>
      {secret && (
        <div className="mb-4">
          <SecretNotice secret={secret} />
        </div>
      )}
      {(error ?? (open ? null : acting.error)) && (
        <div className="mb-4">
          <Notice kind="failed" title={(error ?? acting.error)?.message ?? ''} />
        </div>
      )}
      <div className="grid gap-5 lg:grid-cols-[minmax(0,1fr)_320px]">
        <Sheet id="calls" title={webhookBoard.calls}>
          <div className="no-print mb-2 flex flex-wrap items-center gap-x-4 gap-y-2">
            <Segmented
              label={webhookBoard.whichCalls}
              options={[
                { value: 'all', label: webhookBoard.all },
                { value: 'failed', label: webhookBoard.failed },
                { value: 'waiting', label: webhookBoard.waiting },
              ]}
              value={view.show}
              onChange={(show) => setView({ show })}
            />
            <ButtonLink
              href={withQuery(paths.api.webhookDeliveriesCsv(id), { show: view.show })}
              className="ml-auto"
            >
              CSV
            </ButtonLink>
          </div>
          {page.deliveries.length === 0 ? (
            <Notice
              kind="empty"
              title={view.show === 'all' ? webhookBoard.noCallYet : webhookBoard.noneOfThese}
            />
          ) : (
            <DeliveryList
              deliveries={page.deliveries}
              at={page.at}
              timeZone={timeZone}
              busy={acting.isPending}
              onResend={(d) => acting.mutate({ do: 'resend', delivery: d.id })}
            />
          )}
          {page.next !== null && (
            <ButtonLink
              href={withQuery(paths.webhook(id), { show: view.show, before: page.next })}
              className="mt-3"
            >
              {webhookBoard.older}
            </ButtonLink>
          )}
        </Sheet>
        <Sheet id="facts" title={webhookBoard.itCalls}>
          <p className="break-all">{hook.url}</p>
          <p className="mt-3 text-sm text-ink-2">{webhookBoard.toldOf}</p>
          <ul>
            {hook.kinds.map((kind) => (
              <li key={kind}>{KINDS[kind].name}</li>
            ))}
          </ul>
          <p className="mt-3 text-sm text-ink-2">{webhookBoard.addedBy(hook.createdBy)}</p>
          <div className="mt-4 flex flex-wrap gap-2">
            <Button onClick={() => begin('secret')}>{webhookBoard.newSecret}</Button>
            <Button onClick={() => begin('remove')}>{webhookBoard.removeIt}</Button>
          </div>
        </Sheet>
      </div>
      <Dialog
        open={open === 'change'}
        title={webhookBoard.changeHook(hook.name)}
        onClose={() => setOpen(null)}
      >
        <WebhookForm
          draft={hook}
          within={page.within}
          submit={webhookBoard.save}
          busy={acting.isPending}
          fault={acting.error}
          onSubmit={({ name, url, kinds }) =>
            acting.mutate({
              do: 'change',
              body: { name, url, kinds },
              said: webhookBoard.theWebhookIsChanged,
            })
          }
        />
      </Dialog>
      <Dialog open={open === 'secret'} title={webhookBoard.makeANewSecret} onClose={() => setOpen(null)}>
        <p>{webhookBoard.callsAreSignedWith}</p>
        <div className="mt-4 flex gap-2">
          <Button
            weight="primary"
            disabled={acting.isPending}
            onClick={() => acting.mutate({ do: 'change', body: { newSecret: true }, said: '' })}
          >
            {webhookBoard.makeANewSecret2}
          </Button>
          <Button onClick={() => setOpen(null)}>{webhookBoard.leaveIt}</Button>
        </div>
      </Dialog>
      <Dialog
        open={open === 'remove'}
        title={webhookBoard.removeHook(hook.name)}
        onClose={() => setOpen(null)}
      >
        <p>{webhookBoard.itIsNotCalled}</p>
        <div className="mt-4 flex gap-2">
          <Button
            weight="primary"
            disabled={acting.isPending}
            onClick={() => acting.mutate({ do: 'remove' })}
          >
            {webhookBoard.removeIt}
          </Button>
          <Button onClick={() => setOpen(null)}>{webhookBoard.leaveIt}</Button>
        </div>
      </Dialog>
    </>
  );
}

import { useMutation, useQuery } from '@tanstack/react-query';
import { useState } from 'react';
import { Button } from '../../components/ui/Button';
import { Dialog } from '../../components/ui/Dialog';
import { Heading } from '../../components/ui/Heading';
import { Notice } from '../../components/ui/Notice';
import { Sheet } from '../../components/ui/Sheet';
import { Table, type Column } from '../../components/ui/Table';
import { Tag } from '../../components/ui/Tag';
import { RelativeTime } from '../../components/ui/Time';
import { KINDS } from '../../domain/notices/kinds';
import { api, type ApiError } from '../../lib/api';
import { queryClient } from '../../lib/query-client';
import type { SecretShown, WebhookItem, WebhooksPage } from '../../schemas/api/webhooks';
import { paths } from '../../schemas/paths';
import { SecretNotice } from './SecretNotice';
import { VerifySheet } from './VerifySheet';
import { WebhookForm, type WebhookDraft } from './WebhookForm';
import { webhooksFinding } from '../../words/webhooks-sentences';
import { webhooksWords } from '../../words/webhooks';

const KEY = ['webhooks'];
const NEW: WebhookDraft = { name: '', url: '', kinds: ['hazard'] };

export function StateTag({ hook }: { hook: WebhookItem }) {
  if (!hook.active) return <Tag tone="slate">{webhooksWords.switchedOff}</Tag>;
  if (hook.failingSince) return <Tag tone="rust">{webhooksWords.fails}</Tag>;
  return <Tag tone="petrol">{webhooksWords.on}</Tag>;
}

/** The organisation's webhooks. */
export function Webhooks({ initial, timeZone }: { initial: WebhooksPage; timeZone: string }) {
  const client = queryClient();
  const { data: page, error } = useQuery(
    {
      queryKey: KEY,
      queryFn: ({ signal }) => api<WebhooksPage>(paths.api.webhooks(), { signal }),
      initialData: initial,
    },
    client,
  );
  const [open, setOpen] = useState(false);
  const making = useMutation<SecretShown, ApiError, WebhookDraft>(
    {
      mutationFn: (body) => api<SecretShown>(paths.api.webhooks(), { method: 'POST', body }),
      onSuccess: () => {
        setOpen(false);
        void client.invalidateQueries({ queryKey: KEY });
      },
    },
    client,
  );
  const words = webhooksFinding(page);
  const columns: Column<WebhookItem>[] = [
    {
      key: 'name',
      label: webhooksWords.webhook,
      cell: (w) => (
        <>
          <a
            href={paths.webhook(w.id)}
            className="target inline-flex items-center font-medium hover:underline"
          >
            {w.name}
          </a>
          <span className="block break-all text-sm text-ink-2">{w.url}</span>
        </>
      ),
    },
    {
      key: 'kinds',
      label: webhooksWords.toldOf,
      from: 'md',
      cell: (w) => w.kinds.map((kind) => KINDS[kind].name).join(', '),
    },
    {
      key: 'last',
      label: webhooksWords.lastTaken,
      from: 'sm',
      cell: (w) =>
        w.lastDeliveredAt ? (
          <RelativeTime at={w.lastDeliveredAt} now={page.at} timeZone={timeZone} />
        ) : (
          'never'
        ),
    },
    { key: 'waiting', label: webhooksWords.waiting, numeric: true, cell: (w) => w.waiting },
    { key: 'state', label: webhooksWords.state, cell: (w) => <StateTag hook={w} /> },
  ];
  return (
    <>
      <Heading
        finding={words.finding}
        sentence={words.sentence}
        actions={
          <Button
            weight="primary"
            onClick={() => {
              making.reset();
              setOpen(true);
            }}
          >
            {webhooksWords.addAWebhook}
          </Button>
        }
      />
      {error && (
        <div className="mb-4">
          <Notice kind="failed" title={error.message} />
        </div>
      )}
      {making.data && (
        <div className="mb-4">
          <SecretNotice secret={making.data.secret} />
        </div>
      )}
      <div className="grid gap-5">
        <Sheet id="webhooks" title={webhooksWords.webhooks} flush>
          <Table
            caption={webhooksWords.webhooksOfTheOrganisation}
            columns={columns}
            rows={page.webhooks}
            rowKey={(w) => w.id}
            empty={<Notice kind="empty" title={webhooksWords.noneYet} />}
          />
        </Sheet>
        <VerifySheet />
      </div>
      <Dialog open={open} title={webhooksWords.addAWebhook} onClose={() => setOpen(false)}>
        <WebhookForm
          draft={NEW}
          within={page.within}
          submit={webhooksWords.addItAndShow}
          busy={making.isPending}
          fault={making.error}
          onSubmit={(draft) => making.mutate(draft)}
        />
      </Dialog>
    </>
  );
}

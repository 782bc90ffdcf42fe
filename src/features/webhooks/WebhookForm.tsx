import { useState } from 'react';
import { Button } from '../../components/ui/Button';
import { Field } from '../../components/ui/Field';
import { KINDS, NOTICE_KINDS, type NoticeKind } from '../../domain/notices/kinds';
import type { ApiError } from '../../lib/api';
import type { WebhooksPage } from '../../schemas/api/webhooks';
import { webhookForm } from '../../words/webhooks';

export interface WebhookDraft {
  name: string;
  url: string;
  kinds: NoticeKind[];
}
interface Props {
  draft: WebhookDraft;
  within: WebhooksPage['within'];
  submit: string;
  busy: boolean;
  fault: ApiError | null;
  onSubmit: (draft: WebhookDraft) => void;
}
const CALLABLE = NOTICE_KINDS.filter((kind) => KINDS[kind].callable);
const WITHIN = {
  nothing: webhookForm.beginsWithHttpsAnd,
  loopback: webhookForm.beginsWithHttpsOr,
  everything: webhookForm.addressesInsideYourNetwork,
} as const;

export function WebhookForm({ draft: first, within, submit, busy, fault, onSubmit }: Props) {
  const [draft, setDraft] = useState(first);
  const fields = ['name', 'url', 'kinds'];
  return (
    <form
      className="grid gap-4"
      noValidate
      onSubmit={(event) => {
        event.preventDefault();
        onSubmit(draft);
      }}
    >
      {fault && !fields.some((f) => fault.fault(f)) && (
        <p role="alert" className="font-medium text-rust-ink">
          {fault.message}
        </p>
      )}
      <Field
        label={webhookForm.name}
        value={draft.name}
        hint={webhookForm.whatIsCalledSo}
        error={fault?.fault('name')}
        onChange={(event) => setDraft({ ...draft, name: event.target.value })}
      />
      <Field
        label={webhookForm.address}
        type="url"
        inputMode="url"
        autoComplete="off"
        value={draft.url}
        hint={WITHIN[within]}
        error={fault?.fault('url')}
        onChange={(event) => setDraft({ ...draft, url: event.target.value })}
      />
      <fieldset>
        <legend className="mb-1 font-medium">{webhookForm.itIsToldOf}</legend>
        {fault?.fault('kinds') && (
          <p role="alert" className="text-sm font-medium text-rust-ink">
            {fault.fault('kinds')}
          </p>
        )}
        <div className="grid sm:grid-cols-2">
          {CALLABLE.map((kind) => (
            <label key={kind} className="flex min-h-[44px] items-center gap-2">
              <input
                type="checkbox"
                checked={draft.kinds.includes(kind)}
                onChange={(event) =>
                  setDraft({
                    ...draft,
                    kinds: event.target.checked
                      ? [...draft.kinds, kind]
                      : draft.kinds.filter((k) => k !== kind),
                  })
                }
                className="h-5 w-5 shrink-0 accent-petrol"
              />
              {KINDS[kind].name}
            </label>
          ))}
        </div>
      </fieldset>
      <div>
        <Button type="submit" weight="primary" disabled={busy}>
          {submit}
        </Button>
      </div>
    </form>
  );
}

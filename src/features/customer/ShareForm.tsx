import { useState } from 'react';
import { Button, ButtonLink } from '../../components/ui/Button';
import { Field } from '../../components/ui/Field';
import type { ApiError } from '../../lib/api';
import type { MadeShareLink, ShareLinkBody } from '../../schemas/api/share';
import { shareForm } from '../../words/sharing';

interface Props {
  busy: boolean;
  fault: ApiError | null;
  made: MadeShareLink | null;
  onSubmit: (body: ShareLinkBody) => void;
  onClose: () => void;
}
const FORMS = [
  { kiosk: false, words: shareForm.ordinaryPage },
  { kiosk: true, words: shareForm.aLobbyScreenLarge },
] as const;

/** What is shared and until when; afterwards the link, this once. */
export function ShareForm({ busy, fault, made, onSubmit, onClose }: Props) {
  const [typed, setTyped] = useState<{ label: string; kiosk: boolean; endsOn: string; framedBy: string }>({
    label: '',
    kiosk: false,
    endsOn: '',
    framedBy: '',
  });
  const [copied, setCopied] = useState<'yes' | 'no' | null>(null);
  if (made) {
    const copy = () =>
      navigator.clipboard.writeText(made.address).then(
        () => setCopied('yes'),
        () => setCopied('no'),
      );
    return (
      <>
        <Field
          label={shareForm.linkOf(made.link.label)}
          readOnly
          value={made.address}
          onFocus={(event) => event.target.select()}
          hint={shareForm.keepItNowOnly}
        />
        <p role="status" className="mt-2 min-h-[20px] text-sm text-ink-2">
          {copied === 'yes' && shareForm.copied}
          {copied === 'no' && shareForm.copyByHand}
        </p>
        <div className="mt-2 flex flex-wrap gap-2">
          {typeof navigator !== 'undefined' && 'clipboard' in navigator && (
            <Button weight="primary" onClick={() => void copy()}>
              {shareForm.copyTheLink}
            </Button>
          )}
          <ButtonLink href={made.address} target="_blank" rel="noopener noreferrer">
            {shareForm.openIt}
          </ButtonLink>
          <Button onClick={onClose}>{shareForm.done}</Button>
        </div>
      </>
    );
  }
  const faultOf = (field: string) => fault?.fault(field) ?? null;
  const elsewhere = fault && !['label', 'endsOn', 'framedBy'].some(faultOf);
  return (
    <form
      className="grid gap-4"
      noValidate
      onSubmit={(event) => {
        event.preventDefault();
        onSubmit({
          label: typed.label,
          kiosk: typed.kiosk,
          endsOn: typed.endsOn || null,
          framedBy: (typed.kiosk && typed.framedBy.trim()) || null,
        });
      }}
    >
      {elsewhere && (
        <p role="alert" className="font-medium text-rust-ink">
          {fault.message}
        </p>
      )}
      <Field
        label={shareForm.label}
        name="label"
        value={typed.label}
        maxLength={80}
        autoComplete="off"
        hint={shareForm.whereOrForWhom}
        error={faultOf('label')}
        onChange={(event) => setTyped({ ...typed, label: event.target.value })}
      />
      <fieldset>
        <legend className="mb-1 font-medium">{shareForm.form}</legend>
        {FORMS.map(({ kiosk, words }) => (
          <label key={words} className="target flex items-center gap-2.5">
            <input
              type="radio"
              name="kiosk"
              checked={typed.kiosk === kiosk}
              onChange={() => setTyped({ ...typed, kiosk })}
              className="h-5 w-5 flex-none accent-[var(--petrol)]"
            />
            {words}
          </label>
        ))}
      </fieldset>
      <Field
        label={shareForm.endsOn}
        name="endsOn"
        type="date"
        value={typed.endsOn}
        hint={shareForm.lastDayHint}
        error={faultOf('endsOn')}
        onChange={(event) => setTyped({ ...typed, endsOn: event.target.value })}
      />
      {typed.kiosk && (
        <Field
          label={shareForm.framedBy}
          name="framedBy"
          inputMode="url"
          autoComplete="off"
          value={typed.framedBy}
          maxLength={200}
          hint={shareForm.forALobbyScreen}
          error={faultOf('framedBy')}
          onChange={(event) => setTyped({ ...typed, framedBy: event.target.value })}
        />
      )}
      <div>
        <Button type="submit" weight="primary" disabled={busy}>
          {shareForm.makeTheLink}
        </Button>
      </div>
    </form>
  );
}

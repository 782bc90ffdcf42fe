import { useId, type ReactNode } from 'react';
import { Button } from '../ui/Button';
import { Notice } from '../ui/Notice';
import { ApiError } from '../../lib/api';
import { confirm } from '../../words/placements';

export interface Confirmed {
  seen: string;
  reason: string;
  checked: boolean;
}
export const UNCONFIRMED: Confirmed = { seen: '', reason: '', checked: false };
export type ConfirmFaults = Partial<Record<keyof Confirmed, string>>;

/** What is still missing before a change may be written. */
export function confirmFaults(value: Confirmed): ConfirmFaults {
  return {
    ...(value.seen.trim().length < 3 ? { seen: confirm.sayWhatYouRead } : {}),
    ...(value.reason.trim().length < 3 ? { reason: confirm.sayWhyThisChanges } : {}),
    ...(value.checked ? {} : { checked: confirm.confirmThatTheLabels }),
  };
}

interface AreaProps {
  label: string;
  hint?: string;
  value: string;
  onChange: (value: string) => void;
  error?: string | undefined;
}
function Area({ label, hint, value, onChange, error }: AreaProps) {
  const id = useId();
  return (
    <div>
      <label htmlFor={id} className="mb-1 block font-medium">
        {label}
      </label>
      <textarea
        id={id}
        rows={2}
        maxLength={500}
        value={value}
        onChange={(e) => onChange(e.target.value)}
        aria-invalid={error ? true : undefined}
        aria-describedby={`${id}-more`}
        className={`w-full rounded border bg-sheet px-3 py-2 text-[16px] leading-6 text-ink ${error ? 'border-rust' : 'border-rule'}`}
      />
      <p
        id={`${id}-more`}
        role={error ? 'alert' : undefined}
        className={error ? 'text-sm font-medium text-rust-ink' : 'text-sm text-ink-2'}
      >
        {error ?? hint}
      </p>
    </div>
  );
}

interface Props {
  value: Confirmed;
  onChange: (value: Confirmed) => void;
  faults: ConfirmFaults;
  /** What the person confirms to have read. */
  check: ReactNode;
  submit: string;
  pending: boolean;
  error: Error | null;
  onCancel: () => void;
}

/** The end of a form that changes the as-built: what was seen, why, the physical check, the button. */
export function Confirm({ value, onChange, faults, check, submit, pending, error, onCancel }: Props) {
  return (
    <>
      <Area
        label={confirm.whatYouReadOn}
        hint={confirm.theLabelAsIt}
        value={value.seen}
        onChange={(seen) => onChange({ ...value, seen })}
        error={faults.seen}
      />
      <Area
        label={confirm.why}
        hint={confirm.itStaysInThe}
        value={value.reason}
        onChange={(reason) => onChange({ ...value, reason })}
        error={faults.reason}
      />
      <div>
        <label className="flex min-h-[44px] items-center gap-3">
          <input
            type="checkbox"
            checked={value.checked}
            onChange={(e) => onChange({ ...value, checked: e.target.checked })}
            aria-invalid={faults.checked ? true : undefined}
            className="h-5 w-5 flex-none accent-petrol"
          />
          <span>{check}</span>
        </label>
        {faults.checked && (
          <p role="alert" className="text-sm font-medium text-rust-ink">
            {faults.checked}
          </p>
        )}
      </div>
      {error && (
        <Notice kind="failed" title={error instanceof ApiError ? error.title : confirm.itDidNotWork}>
          {error.message}
        </Notice>
      )}
      <div className="flex flex-wrap gap-2">
        <Button type="submit" weight="primary" disabled={pending} className="flex-1">
          {pending ? confirm.writing : submit}
        </Button>
        <Button onClick={onCancel}>{confirm.cancel}</Button>
      </div>
    </>
  );
}

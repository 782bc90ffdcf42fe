import { useId, type ReactNode } from 'react';

interface Props {
  label: string;
  value: string;
  options: readonly { value: string; label: string }[];
  onChange: (value: string) => void;
  hint?: ReactNode;
  /** What was wrong and what to do. */
  error?: string | null;
  /** The label is there for screen readers only: a table's head says it already. */
  quiet?: boolean;
  disabled?: boolean;
  className?: string;
}

/** A labelled choice of one from a list too long to lie open. */
export function Choice({
  label,
  value,
  options,
  onChange,
  hint,
  error,
  quiet = false,
  disabled = false,
  className = '',
}: Props) {
  const id = useId();
  const described = [hint ? `${id}-hint` : '', error ? `${id}-error` : ''].filter(Boolean).join(' ');
  return (
    <div className={className}>
      <label htmlFor={id} className={quiet ? 'sr-only' : 'mb-1 block font-medium'}>
        {label}
      </label>
      <select
        id={id}
        value={value}
        disabled={disabled}
        onChange={(event) => onChange(event.target.value)}
        aria-describedby={described || undefined}
        aria-invalid={error ? true : undefined}
        className={`min-h-[44px] w-full rounded border bg-sheet px-3 text-[16px] text-ink ${error ? 'border-rust' : 'border-rule'}`}
      >
        {options.map((option) => (
          <option key={option.value} value={option.value}>
            {option.label}
          </option>
        ))}
      </select>
      {hint && (
        <p id={`${id}-hint`} className="mt-1 text-sm text-ink-2">
          {hint}
        </p>
      )}
      {error && (
        <p id={`${id}-error`} role="alert" className="mt-1 text-sm font-medium text-rust-ink">
          {error}
        </p>
      )}
    </div>
  );
}

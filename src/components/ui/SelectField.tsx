import { useId, type ReactNode, type SelectHTMLAttributes } from 'react';

interface Props extends SelectHTMLAttributes<HTMLSelectElement> {
  label: string;
  options: readonly { value: string; label: string }[];
  hint?: ReactNode;
  /** What was wrong and what to do. */
  error?: string | null;
}

/** A labelled choice of one from many, with its hint and its error. */
export function SelectField({ label, options, hint, error, id, className = '', ...rest }: Props) {
  const made = useId();
  const selectId = id ?? made;
  const described = [hint ? `${selectId}-hint` : '', error ? `${selectId}-error` : '']
    .filter(Boolean)
    .join(' ');
  return (
    <div className={className}>
      <label htmlFor={selectId} className="mb-1 block font-medium">
        {label}
      </label>
      <select
        id={selectId}
        aria-describedby={described || undefined}
        aria-invalid={error ? true : undefined}
        className={`min-h-[44px] w-full rounded border bg-sheet px-3 text-[16px] text-ink ${error ? 'border-rust' : 'border-rule'}`}
        {...rest}
      >
        {options.map((o) => (
          <option key={o.value} value={o.value}>
            {o.label}
          </option>
        ))}
      </select>
      {hint && (
        <p id={`${selectId}-hint`} className="mt-1 text-sm text-ink-2">
          {hint}
        </p>
      )}
      {error && (
        <p id={`${selectId}-error`} role="alert" className="mt-1 text-sm font-medium text-rust-ink">
          {error}
        </p>
      )}
    </div>
  );
}

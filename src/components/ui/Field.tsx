import { useId, type InputHTMLAttributes, type ReactNode } from 'react';

interface Props extends InputHTMLAttributes<HTMLInputElement> {
  label: string;
  hint?: ReactNode;
  /** What was wrong and what to do; what was typed stays. */
  error?: string | null;
  unit?: string;
}

/** A labelled input with its hint and its error. */
export function Field({ label, hint, error, unit, id, className = '', ...rest }: Props) {
  const made = useId();
  const inputId = id ?? made;
  const described = [hint ? `${inputId}-hint` : '', error ? `${inputId}-error` : '']
    .filter(Boolean)
    .join(' ');
  return (
    <div className={className}>
      <label htmlFor={inputId} className="mb-1 block font-medium">
        {label}
      </label>
      <div className="flex items-center gap-2">
        <input
          id={inputId}
          aria-describedby={described || undefined}
          aria-invalid={error ? true : undefined}
          className={`min-h-[44px] w-full rounded border bg-sheet px-3 text-[16px] text-ink placeholder:text-ink-3 ${error ? 'border-rust' : 'border-rule'}`}
          {...rest}
        />
        {unit && <span className="text-ink-2">{unit}</span>}
      </div>
      {hint && (
        <p id={`${inputId}-hint`} className="mt-1 text-sm text-ink-2">
          {hint}
        </p>
      )}
      {error && (
        <p id={`${inputId}-error`} role="alert" className="mt-1 text-sm font-medium text-rust-ink">
          {error}
        </p>
      )}
    </div>
  );
}

import { useId, type ReactNode, type SelectHTMLAttributes } from 'react';

interface Props extends Omit<SelectHTMLAttributes<HTMLSelectElement>, 'onChange'> {
  label: string;
  options: readonly { value: string; label: string }[];
  /** Left out where a plain form sends the choice. */
  onChange?: (value: string) => void;
  hint?: ReactNode;
  /** What was wrong and what to do. */
  error?: string | null;
  /** The label is there for screen readers only: a table's head says it already. */
  quiet?: boolean;
  /** In a row of filters: the label stands before it, small. */
  inline?: boolean;
}

/** A labelled choice of one from a list too long to lie open, with its hint and its error. */
export function Choice({
  label,
  options,
  onChange,
  hint,
  error,
  quiet = false,
  inline = false,
  id,
  className = '',
  ...rest
}: Props) {
  const made = useId();
  const selectId = id ?? made;
  const described = [hint ? `${selectId}-hint` : '', error ? `${selectId}-error` : '']
    .filter(Boolean)
    .join(' ');
  const shape = inline ? 'target px-2.5 text-[15px]' : 'min-h-[44px] w-full px-3 text-[16px]';
  return (
    <div className={`${inline ? 'flex items-center gap-2 text-sm text-ink-2' : ''} ${className}`}>
      <label htmlFor={selectId} className={quiet ? 'sr-only' : inline ? undefined : 'mb-1 block font-medium'}>
        {label}
      </label>
      <select
        id={selectId}
        onChange={onChange && ((event) => onChange(event.target.value))}
        aria-describedby={described || undefined}
        aria-invalid={error ? true : undefined}
        className={`${shape} rounded border bg-sheet text-ink ${error ? 'border-rust' : 'border-rule'}`}
        {...rest}
      >
        {options.map((option) => (
          <option key={option.value} value={option.value}>
            {option.label}
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

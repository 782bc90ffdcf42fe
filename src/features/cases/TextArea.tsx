import { useId, type ReactNode, type Ref, type TextareaHTMLAttributes } from 'react';

interface Props extends Omit<TextareaHTMLAttributes<HTMLTextAreaElement>, 'onChange'> {
  label: string;
  onChange: (typed: string) => void;
  hint?: ReactNode;
  error?: string | null;
  ref?: Ref<HTMLTextAreaElement>;
}

/** A labelled field of several lines with its hint and its error. */
export function TextArea({ label, onChange, hint, error, id, className = '', ref, ...rest }: Props) {
  const made = useId();
  const areaId = id ?? made;
  const described = [hint ? `${areaId}-hint` : '', error ? `${areaId}-error` : ''].filter(Boolean).join(' ');
  return (
    <div className={className}>
      <label htmlFor={areaId} className="mb-1 block font-medium">
        {label}
      </label>
      <textarea
        ref={ref}
        id={areaId}
        aria-describedby={described || undefined}
        aria-invalid={error ? true : undefined}
        onChange={(event) => onChange(event.target.value)}
        className={`min-h-[88px] w-full rounded border bg-sheet px-3 py-2 text-[16px] leading-6 text-ink placeholder:text-ink-3 ${error ? 'border-rust' : 'border-rule'}`}
        {...rest}
      />
      {hint && (
        <p id={`${areaId}-hint`} className="mt-1 text-sm text-ink-2">
          {hint}
        </p>
      )}
      {error && (
        <p id={`${areaId}-error`} role="alert" className="mt-1 text-sm font-medium text-rust-ink">
          {error}
        </p>
      )}
    </div>
  );
}

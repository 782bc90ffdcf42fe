import type { InputHTMLAttributes } from 'react';

interface Props extends Omit<InputHTMLAttributes<HTMLInputElement>, 'type' | 'onChange'> {
  /** What it finds by, for those who do not see it; also the placeholder unless there is a shorter one. */
  label: string;
  /** Left out where a plain form sends what was typed. */
  onChange?: (typed: string) => void;
}

/** The search of a list in a row of filters. Where a label should stand over it: Field with type search. */
export function SearchInput({
  label,
  placeholder = label,
  onChange,
  className = 'sm:w-[220px]',
  ...rest
}: Props) {
  return (
    <input
      type="search"
      aria-label={label}
      placeholder={placeholder}
      autoComplete="off"
      onChange={onChange && ((event) => onChange(event.target.value))}
      className={`target w-full rounded border border-rule bg-sheet px-2.5 text-[15px] text-ink placeholder:text-ink-3 ${className}`}
      {...rest}
    />
  );
}

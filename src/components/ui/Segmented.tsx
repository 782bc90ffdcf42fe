interface Option<T extends string> {
  value: T;
  label: string;
}
interface Props<T extends string> {
  label: string;
  options: readonly Option<T>[];
  value: T;
  onChange: (value: T) => void;
  /** Field that a form sends where no script runs; otherwise the label keeps the group together. */
  name?: string;
  /** quiet: words in a row, for a chart's head. bold: boxes, for a form on a roof. */
  look?: 'quiet' | 'bold';
}

/** One of a few, all in sight. Arrow keys move, as in any group of radio buttons. */
export function Segmented<T extends string>({
  label,
  options,
  value,
  onChange,
  name = label,
  look = 'quiet',
}: Props<T>) {
  return (
    <fieldset className="flex flex-wrap gap-1">
      <legend className="sr-only">{label}</legend>
      {options.map((option) => {
        const chosen = option.value === value;
        const quiet = chosen ? 'font-semibold text-ink' : 'text-ink-2 hover:text-ink';
        const bold = chosen ? 'border-ink bg-ink text-sheet' : 'border-rule bg-sheet text-ink';
        return (
          <label
            key={option.value}
            className={`target inline-flex cursor-pointer items-center rounded focus-within:outline focus-within:outline-2 focus-within:outline-petrol ${look === 'quiet' ? `px-1.5 text-sm ${quiet}` : `border px-4 text-[15px] ${bold}`}`}
          >
            <input
              type="radio"
              name={name}
              value={option.value}
              checked={chosen}
              onChange={() => onChange(option.value)}
              className="sr-only"
            />
            {option.label}
          </label>
        );
      })}
    </fieldset>
  );
}

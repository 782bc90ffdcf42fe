interface Props {
  /** What the figures are of, and their unit. */
  title: string;
  unit: string;
  /** What a reader hears of the table that scrolls. */
  label: string;
  height: number;
  /** Over each column; the first is that of the times. */
  heads: readonly [string, ...string[]];
  rows: readonly { key: number; time: string; cells: readonly string[] }[];
  /** Many narrow columns. */
  dense?: boolean;
  /** The last column says what was expected, and stands back. */
  lastQuiet?: boolean;
}

/** Figures over time as a table that scrolls by keyboard, its heads staying in sight. */
export function FiguresTable({
  title,
  unit,
  label,
  height,
  heads,
  rows,
  dense = false,
  lastQuiet = false,
}: Props) {
  const [ofTimes, ...others] = heads;
  const pad = dense ? 'px-2' : 'pl-3';
  return (
    <div
      className="overflow-auto"
      style={{ maxHeight: height }}
      tabIndex={0}
      role="region"
      aria-label={label}
    >
      <table className={`border-collapse text-right ${dense ? 'text-sm' : 'w-full'}`}>
        <caption className="sr-only">
          {title}, {unit}
        </caption>
        <thead className="sticky top-0 bg-sheet text-sm text-ink-2">
          <tr className="border-b border-rule">
            <th scope="col" className="py-1.5 pr-4 text-left font-medium">
              {ofTimes}
            </th>
            {others.map((head) => (
              <th key={head} scope="col" className={`py-1.5 font-medium ${pad}`}>
                {head}
              </th>
            ))}
          </tr>
        </thead>
        <tbody>
          {rows.map(({ key, time, cells }) => (
            <tr key={key} className="border-b border-rule-faint">
              <th scope="row" className="py-1 pr-4 text-left font-normal">
                {time}
              </th>
              {cells.map((cell, i) => (
                <td
                  key={i}
                  className={`py-1 ${pad} ${lastQuiet && i === cells.length - 1 ? 'text-ink-2' : ''}`}
                >
                  {cell}
                </td>
              ))}
            </tr>
          ))}
        </tbody>
      </table>
    </div>
  );
}

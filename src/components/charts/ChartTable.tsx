import { number } from '../../drawings/numbers';
import { valueAt, type ChartModel } from './model';
import { momentWords } from './options';
import { chartTable } from '../../words/charts';

/** The same figures as a table. */
export function ChartTable({ model, height }: { model: ChartModel; height: number }) {
  const times = [...new Set(model.lines.flatMap((l) => l.at.filter((_, i) => l.values[i] !== null)))].sort(
    (a, b) => a - b,
  );
  if (times.length === 0) return <p className="py-6 text-ink-2">{chartTable.nothingWasReportedIn}</p>;
  return (
    <div
      className="overflow-auto"
      style={{ maxHeight: height }}
      tabIndex={0}
      role="region"
      aria-label={chartTable.modelFigures(model.title)}
    >
      <table className="w-full border-collapse text-right">
        <caption className="sr-only">
          {model.title}, {model.unit}
        </caption>
        <thead className="sticky top-0 bg-sheet text-sm text-ink-2">
          <tr className="border-b border-rule">
            <th scope="col" className="py-1.5 pr-4 text-left font-medium">
              {chartTable.time}
            </th>
            {model.lines.map((line) => (
              <th key={line.name} scope="col" className="py-1.5 pl-3 font-medium">
                {line.name}, {model.unit}
              </th>
            ))}
            {model.band && (
              <th scope="col" className="py-1.5 pl-3 font-medium">
                {model.band.name}, {model.unit}
              </th>
            )}
          </tr>
        </thead>
        <tbody>
          {times.map((at) => {
            const low = model.band ? valueAt({ at: model.band.at, values: model.band.low }, at) : null;
            const high = model.band ? valueAt({ at: model.band.at, values: model.band.high }, at) : null;
            return (
              <tr key={at} className="border-b border-rule-faint">
                <th scope="row" className="py-1 pr-4 text-left font-normal">
                  {momentWords(at, model)}
                </th>
                {model.lines.map((line) => (
                  <td key={line.name} className="py-1 pl-3">
                    {number(valueAt(line, at, 0), model.digits)}
                  </td>
                ))}
                {model.band && (
                  <td className="py-1 pl-3 text-ink-2">
                    {low === null || high === null ? '–' : chartTable.lowToDigits(low, model.digits, high)}
                  </td>
                )}
              </tr>
            );
          })}
        </tbody>
      </table>
    </div>
  );
}

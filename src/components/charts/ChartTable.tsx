import { number, UNKNOWN } from '../../drawings/numbers';
import { FiguresTable } from './FiguresTable';
import { valueAt, type ChartModel } from './model';
import { momentWords } from './options';
import { chartTable } from '../../words/charts';

/** The same figures as a table. */
export function ChartTable({ model, height }: { model: ChartModel; height: number }) {
  const { lines, band } = model;
  const times = [...new Set(lines.flatMap((l) => l.at.filter((_, i) => l.values[i] !== null)))].sort(
    (a, b) => a - b,
  );
  if (times.length === 0) return <p className="py-6 text-ink-2">{chartTable.nothingWasReportedIn}</p>;
  const named = [...lines.map((l) => l.name), ...(band ? [band.name] : [])];
  const bandAt = (at: number): string[] => {
    if (!band) return [];
    const low = valueAt({ at: band.at, values: band.low }, at);
    const high = valueAt({ at: band.at, values: band.high }, at);
    return [low === null || high === null ? UNKNOWN : chartTable.lowToDigits(low, model.digits, high)];
  };
  return (
    <FiguresTable
      title={model.title}
      unit={model.unit}
      label={chartTable.modelFigures(model.title)}
      height={height}
      heads={[chartTable.time, ...named.map((name) => `${name}, ${model.unit}`)]}
      rows={times.map((at) => ({
        key: at,
        time: momentWords(at, model),
        cells: [...lines.map((line) => number(valueAt(line, at, 0), model.digits)), ...bandAt(at)],
      }))}
      lastQuiet={band !== undefined}
    />
  );
}

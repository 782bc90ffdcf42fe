import { harmlessCell } from '../../schemas/csv-cell';
import { chartCsvHeads } from '../../words/charts';
import { valueAt, type ChartModel } from './model';

const NEEDS_QUOTES = /[",\r\n]|^\s|\s$/;
const field = (text: string): string => {
  const harmless = harmlessCell(text);
  return NEEDS_QUOTES.test(harmless) ? `"${harmless.replaceAll('"', '""')}"` : harmless;
};
const figure = (value: number | null): string => (value === null ? '' : String(Number(value.toFixed(4))));

/** What is drawn as CSV (RFC 4180, UTC): a column a line, the band as two; a gap is an empty cell. */
export function chartCsv(model: ChartModel): string {
  const times = [...new Set(model.lines.flatMap((l) => l.at.filter((_, i) => l.values[i] !== null)))].sort(
    (a, b) => a - b,
  );
  const head = [
    chartCsvHeads.time,
    ...model.lines.map((l) => chartCsvHeads.line(l.name, model.unit)),
    ...(model.band
      ? [
          chartCsvHeads.bandFrom(model.band.name, model.unit),
          chartCsvHeads.bandTo(model.band.name, model.unit),
        ]
      : []),
  ];
  const rows = times.map((at) => [
    new Date(at * 1000).toISOString(),
    ...model.lines.map((l) => figure(valueAt(l, at, 0))),
    ...(model.band
      ? [model.band.low, model.band.high].map((values) =>
          figure(valueAt({ at: model.band?.at ?? [], values }, at)),
        )
      : []),
  ]);
  return `\uFEFF${[head.map(field), ...rows].map((cells) => `${cells.join(',')}\r\n`).join('')}`;
}

/** Hands the CSV to the browser as a download. */
export function saveCsv(model: ChartModel, fileName: string): void {
  const url = URL.createObjectURL(new Blob([chartCsv(model)], { type: 'text/csv;charset=utf-8' }));
  const link = document.createElement('a');
  link.href = url;
  link.download = `${fileName}.csv`;
  link.click();
  setTimeout(() => URL.revokeObjectURL(url), 10_000);
}

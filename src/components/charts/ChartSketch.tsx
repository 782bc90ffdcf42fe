import { gappedLine } from '../../drawings/gapped-line';
import { strokeOf, type ChartModel } from './model';

/** The curve before the chart library is there: the same data, drawn on the server, without axes. */
export function ChartSketch({ model, height }: { model: ChartModel; height: number }) {
  const values = [
    ...model.lines.flatMap((l) => l.values),
    ...(model.band ? model.band.high : []),
    ...(model.band && !model.fromZero ? model.band.low : []),
  ].filter((v): v is number => v !== null);
  const peak = Math.max(1e-6, ...values);
  const low = model.fromZero ? 0 : Math.min(...values, peak);
  const x = (at: number) => ((at - model.from) / (model.to - model.from)) * 1000;
  const y = (v: number) => 96 - ((v - low) / (peak - low || 1)) * 92;
  const path = (at: readonly number[], of: readonly (number | null)[]) =>
    gappedLine(
      at.map((t, i) => {
        const v = of[i] ?? null;
        return [x(t), v === null ? null : y(v)];
      }),
    );
  return (
    <svg
      aria-hidden="true"
      viewBox="0 0 1000 100"
      preserveAspectRatio="none"
      style={{ display: 'block', width: '100%', height, padding: '30px 16px 62px 54px' }}
    >
      {model.nights.map(([from, to]) => (
        <rect
          key={from}
          x={x(from).toFixed(1)}
          y="0"
          width={(x(to) - x(from)).toFixed(1)}
          height="100"
          fill="var(--slate-wash)"
          opacity="0.55"
        />
      ))}
      {model.band && (
        <path
          d={path(model.band.at, model.band.high)}
          fill="none"
          stroke="var(--petrol)"
          opacity="0.3"
          vectorEffect="non-scaling-stroke"
        />
      )}
      {model.lines.map((line) => (
        <path
          key={line.name}
          d={path(line.at, line.values)}
          fill="none"
          stroke={`var(--${line.tone})`}
          strokeWidth={strokeOf(line).width}
          strokeDasharray={strokeOf(line).dash?.join(' ')}
          opacity={line.quiet ? 0.45 : 1}
          vectorEffect="non-scaling-stroke"
        />
      ))}
    </svg>
  );
}

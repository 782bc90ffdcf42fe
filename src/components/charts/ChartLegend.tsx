import { strokeOf, type ChartLine } from './model';
import { chartLegend } from '../../words/charts';

/** Which line is which, where there is more than one; more than these are told by the crosshair. */
const MOST = 14;

export function ChartLegend({ lines }: { lines: readonly ChartLine[] }) {
  if (lines.length < 2 || lines.length > MOST) return null;
  return (
    <ul className="mt-1 flex flex-wrap gap-x-4 gap-y-0.5 text-sm text-ink-2" aria-label={chartLegend.lines}>
      {lines.map((line) => (
        <li key={line.name} className="inline-flex items-center gap-1.5">
          <svg width="34" height="8" aria-hidden="true">
            <path
              d="M0 4H34"
              stroke={`var(--${line.tone})`}
              strokeWidth={strokeOf(line).width + 0.2}
              strokeDasharray={strokeOf(line).dash?.join(' ')}
              opacity={line.quiet ? 0.7 : 1}
            />
          </svg>
          {line.name}
        </li>
      ))}
    </ul>
  );
}

import type { ChartLine } from './model';

/** Which line is which, where there is more than one; more than these are told by the crosshair. */
const MOST = 14;

export function ChartLegend({ lines }: { lines: readonly ChartLine[] }) {
  if (lines.length < 2 || lines.length > MOST) return null;
  return (
    <ul className="mt-1 flex flex-wrap gap-x-4 gap-y-0.5 text-sm text-ink-2" aria-label="Lines">
      {lines.map((line) => (
        <li key={line.name} className="inline-flex items-center gap-1.5">
          <svg width="22" height="8" aria-hidden="true">
            <path
              d="M0 4H22"
              stroke={`var(--${line.tone})`}
              strokeWidth={line.quiet ? 1.2 : 2.2}
              strokeDasharray={line.dashed ? '5 4' : undefined}
              opacity={line.quiet ? 0.7 : 1}
            />
          </svg>
          {line.name}
        </li>
      ))}
    </ul>
  );
}

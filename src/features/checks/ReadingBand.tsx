import type { ReadingFinding } from '../../schemas/api/readings';
import type { Outcome } from './readings-rows';

interface Props {
  voltage: number;
  finding: ReadingFinding | null;
  outcome: Outcome;
  width?: number;
}
const TICK: Record<Outcome, string> = {
  as_expected: 'var(--ink)',
  finding: 'var(--rust)',
  cant_tell: 'var(--rust)',
  proves_nothing: 'var(--slate)',
  unread: 'var(--slate)',
};

/** A reading on a small ruler from nought: the expected band behind it, other explanations as thin marks. */
export function ReadingBand({ voltage, finding, outcome, width = 168 }: Props) {
  const low = finding?.expectedLowV ?? null;
  const high = finding?.expectedHighV ?? null;
  const others = (finding?.likely ?? [])
    .slice(0, 4)
    .flatMap((h) => (h.expectedV === null ? [] : [h.expectedV]))
    .filter((v) => low === null || high === null || v < low || v > high);
  const ends = [0, voltage, low ?? 0, high ?? 0, ...others];
  const from = Math.min(...ends);
  const to = Math.max(...ends, from + 1);
  const pad = (to - from) * 0.05;
  const x = (v: number): number => ((v - from + pad) / (to - from + 2 * pad)) * width;
  return (
    <svg
      width={width}
      height="26"
      viewBox={`0 0 ${width} 26`}
      aria-hidden="true"
      className="block max-w-full"
    >
      {low !== null && high !== null && (
        <rect
          x={x(low)}
          y="4"
          width={Math.max(2, x(high) - x(low))}
          height="16"
          fill="var(--petrol-wash)"
          stroke="var(--petrol)"
          strokeWidth="0.5"
        />
      )}
      {others.map((v, i) => (
        <path key={i} d={`M${x(v)} 12v8`} stroke="var(--ink-3)" strokeWidth="1.5" strokeDasharray="2 1.5" />
      ))}
      <path d={`M0 20.5H${width}`} stroke="var(--ink)" strokeWidth="1" />
      <path d={`M${x(0)} 20v4`} stroke="var(--ink)" strokeWidth="1" />
      <path d={`M${x(voltage)} 1v20`} stroke={TICK[outcome]} strokeWidth="3" />
    </svg>
  );
}

import type { Mark } from './rows';

const BOX: Record<Mark, { fill: string; stroke: string; dash?: string }> = {
  pass: { fill: 'var(--petrol)', stroke: 'var(--petrol)' },
  told: { fill: 'var(--petrol-wash)', stroke: 'var(--petrol)' },
  fail: { fill: 'var(--rust)', stroke: 'var(--rust)' },
  contradicted: { fill: 'var(--rust-wash)', stroke: 'var(--rust)' },
  not_applicable: { fill: 'var(--sheet)', stroke: 'var(--rule)' },
  missing: { fill: 'none', stroke: 'var(--ink-3)', dash: '2.5 2.5' },
};

/** How one check stands, as shape and sign besides its colour. */
export function CellMark({ mark, size = 22 }: { mark: Mark; size?: number }) {
  const { fill, stroke, dash } = BOX[mark];
  return (
    <svg width={size} height={size} viewBox="0 0 22 22" aria-hidden="true" className="block flex-none">
      <rect x="1" y="1" width="20" height="20" rx="2" fill={fill} stroke={stroke} strokeDasharray={dash} />
      {mark === 'pass' && <path d="m6 11.4 3.4 3.4L16 8" fill="none" stroke="var(--sheet)" strokeWidth="2" />}
      {mark === 'told' && (
        <path d="m6 11.4 3.4 3.4L16 8" fill="none" stroke="var(--petrol)" strokeWidth="2" />
      )}
      {mark === 'fail' && <path d="m6.5 6.5 9 9m0-9-9 9" fill="none" stroke="var(--sheet)" strokeWidth="2" />}
      {mark === 'contradicted' && (
        <path d="M11 5.5v7m0 2.4v2" fill="none" stroke="var(--rust-ink)" strokeWidth="2.4" />
      )}
      {mark === 'not_applicable' && <path d="M6.5 11h9" stroke="var(--ink-2)" strokeWidth="2" />}
    </svg>
  );
}

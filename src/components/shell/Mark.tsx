/** Our mark: a staircase, and the tread that does not rise. */
export function Mark({ size = 24 }: { size?: number }) {
  return (
    <svg width={size} height={size} viewBox="0 0 24 24" aria-hidden="true" focusable="false">
      <path d="M1.5 21.5H7v-6h5V11h4.5V6H20V2" fill="none" stroke="var(--ink)" strokeWidth="2.5" />
      <rect x="12.5" y="16.5" width="6.5" height="5" fill="var(--rust)" />
    </svg>
  );
}

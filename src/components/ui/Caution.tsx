import type { ReactNode } from 'react';
import { caution } from '../../words/ui';

/** A safety caution: ink ground and yellow triangle belong to nothing else. */
export function Caution({ strong, children }: { strong: string; children?: ReactNode }) {
  return (
    <div
      role="note"
      aria-label={caution.safetyCaution(strong)}
      className="rounded border border-caution-ground bg-caution-ground px-4 py-3 text-[15px] leading-[22px] text-caution-text"
    >
      <p>
        <svg
          width="18"
          height="16"
          viewBox="0 0 18 16"
          aria-hidden="true"
          className="mr-2 inline-block align-[-2px]"
        >
          <path
            d="M9 1.5 16.8 14.7H1.2Z"
            fill="none"
            stroke="var(--caution-mark)"
            strokeWidth="1.8"
            strokeLinejoin="round"
          />
          <path d="M9 6v4" stroke="var(--caution-mark)" strokeWidth="1.8" />
          <circle cx="9" cy="12.2" r="1.1" fill="var(--caution-mark)" />
        </svg>
        <strong className="font-semibold text-[#fff]">{strong}</strong> {children}
      </p>
    </div>
  );
}

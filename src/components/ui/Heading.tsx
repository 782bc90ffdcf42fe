import type { ReactNode } from 'react';
import { heading } from '../../words/ui';

interface Crumb {
  label: string;
  href?: string;
}
interface Props {
  crumbs?: readonly Crumb[];
  /** The finding, as the page's heading. */
  finding: ReactNode;
  /** What follows from it and what to do. */
  sentence?: ReactNode;
  /** Buttons. */
  actions?: ReactNode;
}

/** The head of a page: what is found, and one sentence on what follows. */
export function Heading({ crumbs, finding, sentence, actions }: Props) {
  return (
    <header className="mb-6 flex flex-wrap items-end justify-between gap-x-8 gap-y-4">
      <div className="min-w-0 max-w-[860px]">
        {crumbs && crumbs.length > 0 && (
          <nav aria-label={heading.whereThisPageIs} className="mb-1 text-sm text-ink-2">
            <ol className="flex flex-wrap gap-x-1">
              {crumbs.map((crumb, i) => (
                <li key={`${i} ${crumb.label}`} className="flex gap-1">
                  {i > 0 && <span aria-hidden="true">/</span>}
                  {crumb.href ? (
                    <a href={crumb.href} className="-my-[13px] py-[13px] text-petrol hover:underline">
                      {crumb.label}
                    </a>
                  ) : (
                    <span>{crumb.label}</span>
                  )}
                </li>
              ))}
            </ol>
          </nav>
        )}
        <h1 className="text-[26px] leading-8 tracking-[-0.03em] sm:text-[32px] sm:leading-[38px]">
          {finding}
        </h1>
        {sentence && (
          <p className="mt-1 max-w-[820px] text-[17px] leading-6 tracking-[-0.01em] text-ink-2 [&_strong]:font-semibold [&_strong]:text-ink sm:text-lg">
            {sentence}
          </p>
        )}
      </div>
      {actions && <div className="no-print flex flex-wrap gap-2">{actions}</div>}
    </header>
  );
}

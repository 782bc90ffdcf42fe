import type { ReactNode } from 'react';
import { fold } from '../../words/ui';

interface Props {
  /** What is inside, or what it says at present. */
  title: ReactNode;
  /** What opening it is for, in words that stand on the right until it is open. */
  opens: string;
  /** At first. */
  open?: boolean;
  children: ReactNode;
  className?: string;
}

/** What seldom matters, folded away under one line. Works without scripts. */
export function Fold({ title, opens, open = false, children, className = '' }: Props) {
  return (
    <details className={`group border-b border-t border-rule ${className}`} open={open}>
      <summary className="flex min-h-[44px] cursor-pointer list-none items-center justify-between gap-3 py-1.5">
        <span className="min-w-0 font-medium">{title}</span>
        <span className="shrink-0 text-sm text-petrol underline underline-offset-[3px]">
          <span className="group-open:hidden">{opens}</span>
          <span className="hidden group-open:inline">{fold.fold}</span>
        </span>
      </summary>
      {children}
    </details>
  );
}

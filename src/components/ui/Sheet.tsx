import type { ReactNode } from 'react';

interface Props {
  title?: ReactNode;
  /** Right of the title: when, how, how many. */
  aside?: ReactNode;
  id?: string;
  /** 2 under the page's heading; 3 inside a group that has a heading of its own. */
  level?: 2 | 3;
  /** Wide content (a table, a drawing) reaches the sheet's edges on a phone. */
  flush?: boolean;
  className?: string;
  children?: ReactNode;
}

/** A drawing sheet: hung from a heavy rule, closed by a thin one. */
export function Sheet({ title, aside, id, level = 2, flush = false, className = '', children }: Props) {
  const Title = level === 2 ? 'h2' : 'h3';
  return (
    <section
      id={id}
      aria-labelledby={title && id ? `${id}-title` : undefined}
      className={`min-w-0 border-b border-t-2 border-b-rule border-t-ink bg-sheet py-4 ${flush ? 'px-3 sm:px-[18px]' : 'px-[18px]'} ${className}`}
    >
      {(title || aside) && (
        <div className="mb-3 flex flex-wrap items-baseline justify-between gap-x-4 gap-y-1">
          {title && (
            <Title id={id ? `${id}-title` : undefined} className="text-[15px] leading-5 tracking-[-0.01em]">
              {title}
            </Title>
          )}
          {aside && <div className="text-sm text-ink-2">{aside}</div>}
        </div>
      )}
      {children}
    </section>
  );
}

import type { ReactNode } from 'react';

interface Props {
  /** empty: there is nothing, and that is right. failed: it could not be fetched. stale: shown, but old. */
  kind: 'empty' | 'failed' | 'stale' | 'done';
  title: ReactNode;
  children?: ReactNode;
  action?: ReactNode;
}
const MARK = { empty: '○', failed: '×', stale: '◔', done: '✓' } as const;

/** Says in place that a list is empty, could not be fetched, is old, or that something is done. */
export function Notice({ kind, title, children, action }: Props) {
  return (
    <div
      role={kind === 'failed' ? 'alert' : kind === 'empty' ? undefined : 'status'}
      className={`flex flex-wrap items-start gap-x-3 gap-y-2 border border-dashed p-4 ${kind === 'failed' ? 'border-rust bg-rust-wash text-rust-ink' : 'border-rule text-ink-2'}`}
    >
      <span aria-hidden="true" className="text-lg leading-5">
        {MARK[kind]}
      </span>
      <div className="min-w-0 flex-1">
        <p className={`font-medium ${kind === 'failed' ? '' : 'text-ink'}`}>{title}</p>
        {children && <div className="mt-1">{children}</div>}
      </div>
      {action}
    </div>
  );
}

import type { ReactNode } from 'react';
import { Button } from './Button';
import { Notice } from './Notice';
import { notRead } from '../../words/ui';

interface Props {
  /** Null while all is well: then nothing is shown. */
  error: Error | null;
  title: string;
  /** stale: what is shown still serves. failed: it must not be relied on, or there is nothing. */
  kind?: 'stale' | 'failed';
  /** Reads at once; left out where the next reading follows by itself. */
  onRetry?: () => unknown;
  /** What follows for the reader, behind the error's own words. */
  children?: ReactNode;
  className?: string;
}

/** Says in place that what a page shows could not be read or read again. */
export function NotRead({ error, title, kind = 'stale', onRetry, children, className }: Props) {
  if (!error) return null;
  return (
    <div className={className}>
      <Notice
        kind={kind}
        title={title}
        action={onRetry && <Button onClick={() => void onRetry()}>{notRead.tryAgain}</Button>}
      >
        {error.message}
        {children && <> {children}</>}
      </Notice>
    </div>
  );
}

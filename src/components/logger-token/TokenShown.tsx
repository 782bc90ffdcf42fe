import { useState } from 'react';
import { paths } from '../../schemas/paths';
import { Button } from '../ui/Button';
import { tokenShown } from '../../words/logger-token';

/** A logger's token, shown this once: only its hash is kept. */
export function TokenShown({ token, onDone }: { token: string; onDone: () => void }) {
  const [copied, setCopied] = useState(false);
  const copy = async () => {
    await navigator.clipboard.writeText(token);
    setCopied(true);
  };
  const here = typeof window === 'undefined' ? null : window.location;
  const box = 'block break-all rounded border border-rule bg-film px-3 py-3 text-[15px]';
  return (
    <>
      <p className="mb-3">
        <strong className="font-semibold">{tokenShown.shownOnce}</strong>
        {tokenShown.putItIntoThe}
      </p>
      <p className="mb-1 text-sm text-ink-2">{tokenShown.token}</p>
      <code className={`${box} select-all`}>{token}</code>
      <p className="mb-1 mt-4 text-sm text-ink-2">{tokenShown.reportsTo}</p>
      <code className={box}>
        {here
          ? `${here.protocol === 'https:' ? 'wss' : 'ws'}://${here.host}${paths.ingest()}`
          : paths.ingest()}
      </code>
      <p className="mb-1 mt-4 text-sm text-ink-2">{tokenShown.orByHttps}</p>
      <code className={box}>{`${here?.origin ?? ''}${paths.api.v1Ingest()}`}</code>
      <div className="mt-4 flex flex-wrap gap-2">
        {typeof navigator !== 'undefined' && 'clipboard' in navigator && (
          <Button weight="primary" onClick={() => void copy()}>
            {copied ? tokenShown.copied : tokenShown.copyTheToken}
          </Button>
        )}
        <Button onClick={onDone}>{tokenShown.iHaveIt}</Button>
      </div>
    </>
  );
}

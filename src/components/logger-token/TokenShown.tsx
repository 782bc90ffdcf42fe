import { useState } from 'react';
import { paths } from '../../schemas/paths';
import { Button } from '../ui/Button';

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
        <strong className="font-semibold">It is shown this once.</strong> Put it into the logger now, or keep
        it where secrets are kept. If it is lost, make a new one.
      </p>
      <p className="mb-1 text-sm text-ink-2">Token</p>
      <code className={`${box} select-all`}>{token}</code>
      <p className="mb-1 mt-4 text-sm text-ink-2">The logger reports to</p>
      <code className={box}>
        {here
          ? `${here.protocol === 'https:' ? 'wss' : 'ws'}://${here.host}${paths.ingest()}`
          : paths.ingest()}
      </code>
      <p className="mb-1 mt-4 text-sm text-ink-2">or, where it has no WebSocket, in batches to</p>
      <code className={box}>{`${here?.origin ?? ''}${paths.api.v1Ingest()}`}</code>
      <div className="mt-4 flex flex-wrap gap-2">
        {typeof navigator !== 'undefined' && 'clipboard' in navigator && (
          <Button weight="primary" onClick={() => void copy()}>
            {copied ? 'Copied' : 'Copy the token'}
          </Button>
        )}
        <Button onClick={onDone}>I have it</Button>
      </div>
    </>
  );
}

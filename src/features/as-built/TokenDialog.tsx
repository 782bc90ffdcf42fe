import { useMutation } from '@tanstack/react-query';
import { useState } from 'react';
import { Button } from '../../components/ui/Button';
import { Dialog } from '../../components/ui/Dialog';
import { Field } from '../../components/ui/Field';
import { Notice } from '../../components/ui/Notice';
import { ApiError } from '../../lib/api';
import { queryClient } from '../../lib/query-client';
import { paths } from '../../schemas/paths';
import { asBuiltKey, makeToken } from './queries';

interface Props {
  site: string;
  logger: { id: string; serial: string; hasToken: boolean };
  operating: boolean;
  /** Made already, with the logger. */
  token: string | null;
  onClose: () => void;
}

/** A logger's token, shown this once: only its hash is kept. */
export function TokenDialog({ site, logger, operating, token: given, onClose }: Props) {
  const client = queryClient();
  const [reason, setReason] = useState('');
  const [copied, setCopied] = useState(false);
  const make = useMutation(
    {
      mutationFn: () => makeToken(site, logger.id, reason),
      onSuccess: () => client.invalidateQueries({ queryKey: asBuiltKey(site) }),
    },
    client,
  );
  const token = given ?? make.data?.token ?? null;
  const copy = async (text: string) => {
    await navigator.clipboard.writeText(text);
    setCopied(true);
  };
  return (
    <Dialog open title={`Token of logger ${logger.serial}`} onClose={onClose}>
      {token === null ? (
        <>
          <p className="mb-3">
            {logger.hasToken
              ? 'A new token ends the one in force at once: the logger is refused until it has the new one. What it has not sent yet stays in it.'
              : 'With its token the logger may report here.'}
          </p>
          {operating && logger.hasToken && (
            <Field
              label="Why"
              name="reason"
              value={reason}
              onChange={(e) => setReason(e.target.value)}
              error={make.error instanceof ApiError ? (make.error.fault('reason') ?? null) : null}
              hint="A few words; they stay in the history."
            />
          )}
          {make.error && (
            <div className="mt-3">
              <Notice kind="failed" title="No token was made">
                {make.error.message}
              </Notice>
            </div>
          )}
          <Button weight="primary" className="mt-4" onClick={() => make.mutate()} disabled={make.isPending}>
            {make.isPending ? 'Making …' : 'Make the token'}
          </Button>
        </>
      ) : (
        <>
          <p className="mb-3">
            <strong className="font-semibold">It is shown this once.</strong> Put it into the logger now, or
            keep it where secrets are kept. If it is lost, make a new one.
          </p>
          <p className="mb-1 text-sm text-ink-2">Token</p>
          <code className="block select-all break-all rounded border border-rule bg-film px-3 py-3 text-[15px]">
            {token}
          </code>
          <p className="mb-1 mt-4 text-sm text-ink-2">The logger reports to</p>
          <code className="block break-all rounded border border-rule bg-film px-3 py-3 text-[15px]">
            {typeof window === 'undefined'
              ? paths.ingest()
              : `${window.location.protocol === 'https:' ? 'wss' : 'ws'}://${window.location.host}${paths.ingest()}`}
          </code>
          <div className="mt-4 flex flex-wrap gap-2">
            {typeof navigator !== 'undefined' && 'clipboard' in navigator && (
              <Button weight="primary" onClick={() => void copy(token)}>
                {copied ? 'Copied' : 'Copy the token'}
              </Button>
            )}
            <Button onClick={onClose}>I have it</Button>
          </div>
        </>
      )}
    </Dialog>
  );
}

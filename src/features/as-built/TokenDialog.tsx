import { useMutation } from '@tanstack/react-query';
import { useState } from 'react';
import { TokenShown } from '../../components/logger-token/TokenShown';
import { Button } from '../../components/ui/Button';
import { Dialog } from '../../components/ui/Dialog';
import { Field } from '../../components/ui/Field';
import { Notice } from '../../components/ui/Notice';
import { ApiError } from '../../lib/api';
import { queryClient } from '../../lib/query-client';
import { asBuiltKey, makeToken } from './queries';
import { tokenDialog } from '../../words/as-built';

interface Props {
  site: string;
  logger: { id: string; serial: string; hasToken: boolean };
  operating: boolean;
  /** Made already, with the logger. */
  token: string | null;
  onClose: () => void;
}

/** Makes a logger's token, or shows one that was made with the logger. */
export function TokenDialog({ site, logger, operating, token: given, onClose }: Props) {
  const client = queryClient();
  const [reason, setReason] = useState('');
  const make = useMutation(
    {
      mutationFn: () => makeToken(site, logger.id, reason),
      onSuccess: () => client.invalidateQueries({ queryKey: asBuiltKey(site) }),
    },
    client,
  );
  const token = given ?? make.data?.token ?? null;
  return (
    <Dialog open title={tokenDialog.tokenOfLogger(logger.serial)} onClose={onClose}>
      {token === null ? (
        <>
          <p className="mb-3">{logger.hasToken ? tokenDialog.aNewTokenEnds : tokenDialog.withItsTokenThe}</p>
          {operating && logger.hasToken && (
            <Field
              label={tokenDialog.why}
              name="reason"
              value={reason}
              onChange={(e) => setReason(e.target.value)}
              error={make.error instanceof ApiError ? (make.error.fault('reason') ?? null) : null}
              hint={tokenDialog.aFewWordsThey}
            />
          )}
          {make.error && (
            <div className="mt-3">
              <Notice kind="failed" title={tokenDialog.noTokenWasMade}>
                {make.error.message}
              </Notice>
            </div>
          )}
          <Button weight="primary" className="mt-4" onClick={() => make.mutate()} disabled={make.isPending}>
            {make.isPending ? tokenDialog.making : tokenDialog.makeTheToken}
          </Button>
        </>
      ) : (
        <TokenShown token={token} onDone={onClose} />
      )}
    </Dialog>
  );
}

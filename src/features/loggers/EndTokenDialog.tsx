import { useMutation } from '@tanstack/react-query';
import { useState } from 'react';
import { Button } from '../../components/ui/Button';
import { Dialog } from '../../components/ui/Dialog';
import { Field } from '../../components/ui/Field';
import { Notice } from '../../components/ui/Notice';
import { ApiError } from '../../lib/api';
import { queryClient } from '../../lib/query-client';
import type { LoggerTokenView, LoggerView } from '../../schemas/api/loggers';
import { endToken, loggersKey } from './queries';
import { endTokenDialog } from '../../words/loggers';

interface Props {
  site: string;
  logger: LoggerView;
  token: LoggerTokenView;
  operating: boolean;
  onClose: () => void;
}

export function EndTokenDialog({ site, logger, token, operating, onClose }: Props) {
  const client = queryClient();
  const [reason, setReason] = useState('');
  const end = useMutation(
    {
      mutationFn: () => endToken(site, logger.id, token.id, reason),
      onSuccess: async () => {
        await client.invalidateQueries({ queryKey: loggersKey(site) });
        onClose();
      },
    },
    client,
  );
  const others = logger.tokens.filter((t) => t.state !== 'ended' && t.id !== token.id).length;
  return (
    <Dialog open title={endTokenDialog.title(token.name)} onClose={onClose}>
      <form
        className="grid gap-4"
        onSubmit={(event) => {
          event.preventDefault();
          end.mutate();
        }}
      >
        <p>{endTokenDialog.means(others, logger.serial)}</p>
        {operating && (
          <Field
            label={endTokenDialog.why}
            name="reason"
            value={reason}
            onChange={(event) => setReason(event.target.value)}
            error={end.error instanceof ApiError ? (end.error.fault('reason') ?? null) : null}
            hint={endTokenDialog.aFewWordsThey}
          />
        )}
        {end.error && (
          <Notice kind="failed" title={endTokenDialog.notEnded}>
            {end.error.message}
          </Notice>
        )}
        <div className="flex flex-wrap gap-2">
          <Button weight="primary" type="submit" disabled={end.isPending}>
            {end.isPending ? endTokenDialog.ending : endTokenDialog.endItNow}
          </Button>
          <Button onClick={onClose}>{endTokenDialog.keepIt}</Button>
        </div>
      </form>
    </Dialog>
  );
}

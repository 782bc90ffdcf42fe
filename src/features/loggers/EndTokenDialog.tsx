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
    <Dialog open title={`End ${token.name ? `“${token.name}”` : 'this token'} now`} onClose={onClose}>
      <form
        className="grid gap-4"
        onSubmit={(event) => {
          event.preventDefault();
          end.mutate();
        }}
      >
        <p>
          Whoever speaks with it is cut off at once.{' '}
          {others === 0
            ? `Logger ${logger.serial} has no other token: it is refused until it gets a new one, and nothing of its units is heard. What it has not sent yet stays in it.`
            : 'Another token of this logger stays in force.'}
        </p>
        {operating && (
          <Field
            label="Why"
            name="reason"
            value={reason}
            onChange={(event) => setReason(event.target.value)}
            error={end.error instanceof ApiError ? (end.error.fault('reason') ?? null) : null}
            hint="A few words; they stay in the history."
          />
        )}
        {end.error && (
          <Notice kind="failed" title="The token was not ended">
            {end.error.message}
          </Notice>
        )}
        <div className="flex flex-wrap gap-2">
          <Button weight="primary" type="submit" disabled={end.isPending}>
            {end.isPending ? 'Ending …' : 'End it now'}
          </Button>
          <Button onClick={onClose}>Keep it</Button>
        </div>
      </form>
    </Dialog>
  );
}

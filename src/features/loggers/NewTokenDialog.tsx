import { useMutation } from '@tanstack/react-query';
import { useState } from 'react';
import { TokenShown } from '../../components/logger-token/TokenShown';
import { Button } from '../../components/ui/Button';
import { Choice } from '../../components/ui/Choice';
import { Dialog } from '../../components/ui/Dialog';
import { Field } from '../../components/ui/Field';
import { Notice } from '../../components/ui/Notice';
import { counted } from '../../drawings/numbers';
import { ApiError } from '../../lib/api';
import { queryClient } from '../../lib/query-client';
import { OVERLAP_HOURS, type LoggerView } from '../../schemas/api/loggers';
import { loggersKey, makeToken } from './queries';
import { OVERLAP_WORDS } from './words';

interface Props {
  site: string;
  logger: LoggerView;
  operating: boolean;
  onClose: () => void;
}

/** A new token beside the old one for a while, or in its place at once. */
export function NewTokenDialog({ site, logger, operating, onClose }: Props) {
  const client = queryClient();
  const before = logger.tokens.filter((t) => t.state !== 'ended').length;
  const [name, setName] = useState('');
  const [overlapHours, setOverlapHours] = useState<number>(before > 0 ? 24 : 0);
  const [reason, setReason] = useState('');
  const make = useMutation(
    {
      mutationFn: () => makeToken(site, logger.id, { name, overlapHours, reason }),
      onSuccess: () => client.invalidateQueries({ queryKey: loggersKey(site) }),
    },
    client,
  );
  const fault = (field: string) =>
    make.error instanceof ApiError ? (make.error.fault(field) ?? null) : null;
  return (
    <Dialog open title={`A token for logger ${logger.serial}`} onClose={onClose}>
      {make.data ? (
        <TokenShown token={make.data.token} onDone={onClose} />
      ) : (
        <form
          className="grid gap-4"
          onSubmit={(event) => {
            event.preventDefault();
            make.mutate();
          }}
        >
          <Field
            label="Name"
            name="name"
            value={name}
            maxLength={80}
            onChange={(event) => setName(event.target.value)}
            error={fault('name')}
            hint="So that you know it again: where it was put, by whom."
          />
          {before > 0 && (
            <Choice
              label={before === 1 ? 'The one before ends' : `The ${counted(before, 'token')} before end`}
              value={String(overlapHours)}
              options={OVERLAP_HOURS.map((h) => ({ value: String(h), label: OVERLAP_WORDS[h] ?? `${h} h` }))}
              onChange={(value) => setOverlapHours(Number(value))}
              error={fault('overlapHours')}
              hint={
                overlapHours === 0
                  ? 'Its connection is closed at once; the logger is refused until it has the new one. What it has not sent yet stays in it.'
                  : 'Until then both let the logger in: there is time to put the new one into it.'
              }
            />
          )}
          {operating && before > 0 && (
            <Field
              label="Why"
              name="reason"
              value={reason}
              onChange={(event) => setReason(event.target.value)}
              error={fault('reason')}
              hint="A few words; they stay in the history."
            />
          )}
          {make.error && (
            <Notice kind="failed" title="No token was made">
              {make.error.message}
            </Notice>
          )}
          <Button weight="primary" type="submit" disabled={make.isPending} className="justify-self-start">
            {make.isPending ? 'Making …' : 'Make the token'}
          </Button>
        </form>
      )}
    </Dialog>
  );
}

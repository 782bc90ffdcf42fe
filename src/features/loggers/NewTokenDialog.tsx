import { useMutation } from '@tanstack/react-query';
import { useState } from 'react';
import { TokenShown } from '../../components/logger-token/TokenShown';
import { Button } from '../../components/ui/Button';
import { Choice } from '../../components/ui/Choice';
import { Dialog } from '../../components/ui/Dialog';
import { Field } from '../../components/ui/Field';
import { Notice } from '../../components/ui/Notice';
import { ApiError } from '../../lib/api';
import { queryClient } from '../../lib/query-client';
import type { LoggerView } from '../../schemas/api/loggers';
import { OVERLAP_HOURS } from '../../schemas/lists-and-limits';
import { loggersKey, makeToken } from './queries';
import { OVERLAP_WORDS } from '../../words/loggers-sentences';
import { newTokenDialog } from '../../words/loggers';

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
    <Dialog open title={newTokenDialog.tokenForLogger(logger.serial)} onClose={onClose}>
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
            label={newTokenDialog.name}
            name="name"
            value={name}
            maxLength={80}
            onChange={(event) => setName(event.target.value)}
            error={fault('name')}
            hint={newTokenDialog.soThatYouKnow}
          />
          {before > 0 && (
            <Choice
              label={before === 1 ? newTokenDialog.theOneBeforeEnds : newTokenDialog.theBeforeEnd(before)}
              value={String(overlapHours)}
              options={OVERLAP_HOURS.map((h) => ({ value: String(h), label: OVERLAP_WORDS[h] ?? `${h} h` }))}
              onChange={(value) => setOverlapHours(Number(value))}
              error={fault('overlapHours')}
              hint={
                overlapHours === 0 ? newTokenDialog.itsConnectionIsClosed : newTokenDialog.untilThenBothLet
              }
            />
          )}
          {operating && before > 0 && (
            <Field
              label={newTokenDialog.why}
              name="reason"
              value={reason}
              onChange={(event) => setReason(event.target.value)}
              error={fault('reason')}
              hint={newTokenDialog.aFewWordsThey}
            />
          )}
          {make.error && (
            <Notice kind="failed" title={newTokenDialog.noTokenWasMade}>
              {make.error.message}
            </Notice>
          )}
          <Button weight="primary" type="submit" disabled={make.isPending} className="justify-self-start">
            {make.isPending ? newTokenDialog.making : newTokenDialog.makeTheToken}
          </Button>
        </form>
      )}
    </Dialog>
  );
}

import { useMutation } from '@tanstack/react-query';
import { useState, type FormEvent } from 'react';
import { Button } from '../../components/ui/Button';
import { Dialog } from '../../components/ui/Dialog';
import { Field } from '../../components/ui/Field';
import { ApiError, api } from '../../lib/api';
import { queryClient } from '../../lib/query-client';
import { paths } from '../../schemas/paths';
import type { TestInHand } from './use-test';
import { guidedTest } from '../../words/shutdown-test';

/** Ends a test without a signature, with the reason why. */
export function EndTest({ test }: { test: TestInHand }) {
  const [open, setOpen] = useState(false);
  const [reason, setReason] = useState('');
  const end = useMutation(
    {
      mutationFn: () =>
        api<void>(paths.api.shutdownTestEnd(test.page.id), { method: 'POST', body: { reason } }),
      onSuccess: () => window.location.assign(paths.shutdownTests(test.page.site.id)),
    },
    queryClient(),
  );
  const submit = (event: FormEvent) => {
    event.preventDefault();
    end.mutate();
  };
  const fault = end.error instanceof ApiError ? (end.error.fault('reason') ?? end.error.message) : undefined;
  return (
    <>
      <button
        type="button"
        className="target mt-2 text-sm text-petrol underline underline-offset-2"
        onClick={() => setOpen(true)}
      >
        {guidedTest.endWithoutSigning}
      </button>
      <Dialog open={open} title={guidedTest.endThisTestWithout} onClose={() => setOpen(false)}>
        <form onSubmit={submit} noValidate>
          <p className="mb-3">{guidedTest.whatWasWrittenStays}</p>
          <Field
            label={guidedTest.why}
            maxLength={2000}
            value={reason}
            error={fault}
            onChange={(e) => setReason(e.target.value)}
          />
          <Button type="submit" weight="primary" className="mt-3" disabled={end.isPending}>
            {guidedTest.endTheTest}
          </Button>
        </form>
      </Dialog>
    </>
  );
}

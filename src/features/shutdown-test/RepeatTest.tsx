import { useMutation } from '@tanstack/react-query';
import { Button, ButtonLink } from '../../components/ui/Button';
import { ApiError, api } from '../../lib/api';
import { queryClient } from '../../lib/query-client';
import { paths } from '../../schemas/paths';
import type { StartTest } from '../../schemas/api/shutdown-test';
import { repeatTest } from '../../words/shutdown-test';

interface Props {
  siteId: string;
  zone: string;
  /** A signed test whose open strings are tested again. */
  follows?: string;
  label: string;
  weight?: 'primary' | 'plain';
}

/** Starts a test of a zone and goes to it; says who is at one already. */
export function RepeatTest({ siteId, zone, follows, label, weight = 'primary' }: Props) {
  const start = useMutation(
    {
      mutationFn: (body: StartTest) =>
        api<{ id: string }>(paths.api.shutdownTests(siteId), { method: 'POST', body }),
      onSuccess: ({ id }) => window.location.assign(paths.shutdownTest(siteId, id)),
    },
    queryClient(),
  );
  const open = start.error instanceof ApiError ? start.error.fault('open') : undefined;
  return (
    <div>
      <Button
        weight={weight}
        disabled={start.isPending}
        onClick={() => start.mutate({ zone, ...(follows ? { follows } : {}) })}
      >
        {start.isPending ? repeatTest.starting : label}
      </Button>
      {start.error && (
        <div role="alert" className="mt-2 max-w-[420px] text-sm text-rust-ink">
          <p>{start.error.message}</p>
          {open && (
            <ButtonLink className="mt-2" href={paths.shutdownTest(siteId, open)}>
              {repeatTest.goToThatTest}
            </ButtonLink>
          )}
        </div>
      )}
    </div>
  );
}

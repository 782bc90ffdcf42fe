import { useMutation, useQuery } from '@tanstack/react-query';
import { useState } from 'react';
import { useLive } from '../../lib/live-hook';
import { api, ApiError } from '../../lib/api';
import { tells } from '../../lib/patch';
import { queryClient } from '../../lib/query-client';
import type { CaseChangeBody, CaseEntry, CasePage, CasesPage, CasesView } from '../../schemas/api/cases';
import { paths } from '../../schemas/paths';

const EVERY_MS = 60_000;

export function useCases(initial: CasesPage, show: CasesView['show'], shownAtFirst: CasesView['show']) {
  return useQuery(
    {
      queryKey: ['cases', show],
      queryFn: ({ signal }) => api<CasesPage>(paths.api.cases(), { query: { show }, signal }),
      initialData: show === shownAtFirst ? initial : undefined,
      placeholderData: (before: CasesPage | undefined) => before,
      refetchInterval: EVERY_MS,
    },
    queryClient(),
  );
}

const caseKey = (id: string) => ['case', id];

/** What somebody else did while this person typed. */
export interface Meanwhile {
  message: string;
  since: CaseEntry[];
  /** Sends the own change over what stands now. */
  again: () => void;
}

interface Sent {
  body: CaseChangeBody;
  done?: () => void;
}

const isMeanwhile = (value: unknown): value is { page: CasePage; since: CaseEntry[] } =>
  typeof value === 'object' && value !== null && 'page' in value && 'since' in value;

/** The change as it would be sent over a newer state of the case. */
function rebased(body: CaseChangeBody, page: CasePage): CaseChangeBody {
  if (body.act !== 'check') return { ...body, version: page.case.version };
  return { ...body, seen: page.case.checklist.find((m) => m.key === body.key)?.at ?? null };
}

/** A case that changes in place: what the page shows, and the one way to change it. */
export function useCase(initial: CasePage) {
  const client = queryClient();
  const { id, siteId } = initial.case;
  const [meanwhile, setMeanwhile] = useState<Meanwhile | null>(null);
  const query = useQuery(
    {
      queryKey: caseKey(id),
      queryFn: ({ signal }) => api<CasePage>(paths.api.caseFile(id), { signal }),
      initialData: initial,
      refetchInterval: EVERY_MS,
    },
    client,
  );
  const take = (page: CasePage) => client.setQueryData(caseKey(id), page);
  const status = useLive(`site:${siteId}`, (change, how) => {
    if (how === 'delta' && tells(change, (e) => e.kind.startsWith('case_')))
      void client.invalidateQueries({ queryKey: caseKey(id) });
  });
  const send = useMutation<CasePage, ApiError, Sent>(
    {
      mutationFn: ({ body }) => api<CasePage>(paths.api.caseFile(id), { method: 'PATCH', body }),
      onSuccess: (page, { done }) => {
        setMeanwhile(null);
        take(page);
        done?.();
      },
      onError: (error, { body, done }) => {
        if (error.status !== 409 || !isMeanwhile(error.current)) return;
        const { page, since } = error.current;
        take(page);
        setMeanwhile({
          message: error.message,
          since,
          again: () => send.mutate({ body: rebased(body, page), done }),
        });
      },
    },
    client,
  );
  return {
    page: query.data,
    error: query.error,
    refetch: query.refetch,
    status,
    take,
    send,
    /** Sends a change; `done` runs once it is written, also when it had to be sent again. */
    change: (body: CaseChangeBody, done?: () => void) => send.mutate({ body, done }),
    meanwhile,
    forget: () => {
      setMeanwhile(null);
      send.reset();
    },
  };
}
export type CaseInHand = ReturnType<typeof useCase>;

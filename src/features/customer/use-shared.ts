import { useQuery } from '@tanstack/react-query';
import { ApiError, api } from '../../lib/api';
import { queryClient } from '../../lib/query-client';
import type { SharedSite } from '../../schemas/api/share';
import { paths } from '../../schemas/paths';

/** How often a shared page reads itself again. */
const EVERY_MS = 60_000;

export interface Shared {
  site: SharedSite;
  /** The link was ended or has run out while the page stood open. */
  ended: boolean;
  /** The newest try failed; what is shown is older than it should be. */
  late: boolean;
}

const isEnded = (error: unknown): boolean => error instanceof ApiError && error.status === 404;

/** The page behind a link, kept fresh also on a screen that nobody touches. */
export function useShared(token: string, initial: SharedSite): Shared {
  const { data, error } = useQuery(
    {
      queryKey: ['shared', token],
      queryFn: ({ signal }) => api<SharedSite>(paths.api.shared(token), { signal }),
      initialData: initial,
      refetchInterval: (query) => (isEnded(query.state.error) ? false : EVERY_MS),
      refetchIntervalInBackground: true,
      refetchOnWindowFocus: true,
    },
    queryClient(),
  );
  return { site: data, ended: isEnded(error), late: error !== null };
}

import { notifyManager, QueryClient } from '@tanstack/react-query';
import { ApiError } from './api';

/** Worth another try by itself: no answer, or a server that says so. A refusal stays a refusal. */
export const worthRetrying = (error: unknown): boolean =>
  error instanceof ApiError && (error.status === 0 || error.status === 503 || error.status === 502);

export function makeQueryClient(): QueryClient {
  return new QueryClient({
    defaultOptions: {
      queries: {
        // /live keeps what is on screen fresh; a refetch is for what it does not cover
        staleTime: 60_000,
        refetchOnWindowFocus: false,
        retry: (failures, error) => failures < 3 && worthRetrying(error),
        retryDelay: (attempt) => Math.min(10_000, 500 * 2 ** attempt),
      },
      mutations: { retry: false },
    },
  });
}

/** Reads again what could not be read: what stood in the way is over. */
export const readFailedAgain = (client: QueryClient): void =>
  void client.refetchQueries({ predicate: ({ state }) => state.status === 'error' });

/** What changes in one go is told in one go: so ten changes of a page's data draw it once, not ten times. */
let untold: (() => void)[] = [];
notifyManager.setScheduler((tell) => {
  untold.push(tell);
  if (untold.length > 1) return;
  setTimeout(() => {
    const now = untold;
    untold = [];
    for (const one of now) one();
  });
});

let ofThisPage: QueryClient | undefined;

/** The one query client that all islands of a page share; on the server a new one each time. */
export function queryClient(): QueryClient {
  if (typeof window === 'undefined') return makeQueryClient();
  if (ofThisPage) return ofThisPage;
  const client = makeQueryClient();
  // of the network, and of /live (lib/live.ts)
  window.addEventListener('online', () => readFailedAgain(client));
  return (ofThisPage = client);
}

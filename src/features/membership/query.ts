import { api } from '../../lib/api';
import type { IsolationPage } from '../../schemas/api/isolation';
import { paths } from '../../schemas/paths';

export const isolationKey = (site: string): string[] => ['isolation', site];

/** The watches of a site: read again as reports come while one runs, now and then for one that somebody else began. */
export const isolationQuery = (site: string) => ({
  queryKey: isolationKey(site),
  queryFn: ({ signal }: { signal: AbortSignal }) => api<IsolationPage>(paths.api.isolation(site), { signal }),
  refetchInterval: (query: { state: { data?: IsolationPage | undefined } }): number => {
    const page = query.state.data;
    return page?.open ? Math.min(10_000, Math.max(2000, page.reportIntervalS * 400)) : 15_000;
  },
});

import { api } from '../../lib/api';
import type { LoggersPage, NewToken, NewTokenReply } from '../../schemas/api/loggers';
import { paths } from '../../schemas/paths';

export const loggersKey = (site: string) => ['loggers', site] as const;

export const loggersQuery = (initial: LoggersPage) => ({
  queryKey: loggersKey(initial.site.id),
  queryFn: () => api<LoggersPage>(paths.api.loggers(initial.site.id)),
  initialData: initial,
  refetchInterval: 20_000,
});

export const makeToken = (site: string, logger: string, body: NewToken): Promise<NewTokenReply> =>
  api(paths.api.loggerTokens(site, logger), { method: 'POST', body });

export const endToken = (site: string, logger: string, token: string, reason: string): Promise<void> =>
  api(paths.api.loggerTokenEnd(site, logger, token), { method: 'POST', body: { reason } });

import type { LoggerTokenView, LoggerView } from '../../../../schemas/api/loggers';
import { siteParams } from '../../../../schemas/api/site';
import { endpoint } from '../../../../server/http/endpoint';
import { csvResponse } from '../../../../server/reports/csv';
import { loggersPage } from '../../../../server/services/logger-token';
import { stateWords } from '../../../../words/loggers-sentences';

interface Row {
  l: LoggerView;
  t: LoggerTokenView | null;
}
const time = (at: string | null | undefined): Date | null => (at ? new Date(at) : null);

/** A row a token, and one for a logger without any. */
export const GET = endpoint({ permission: 'logger.read', params: siteParams }, async ({ tx, params }) => {
  const now = new Date();
  const { loggers } = await loggersPage(tx, params.site, now);
  const rows = loggers.flatMap((l): Row[] =>
    l.tokens.length === 0 ? [{ l, t: null }] : l.tokens.map((t) => ({ l, t })),
  );
  return csvResponse(
    'loggers',
    [
      { header: 'logger', value: ({ l }) => l.serial },
      { header: 'connected', value: ({ l }) => l.connected },
      { header: 'last spoke (UTC)', value: ({ l }) => time(l.lastSpokeAt) },
      { header: 'from', value: ({ l }) => l.lastAddress },
      { header: 'firmware', value: ({ l }) => l.firmware },
      { header: 'messages refused', value: ({ l }) => l.refused },
      { header: 'refused last (UTC)', value: ({ l }) => time(l.refusals[0]?.lastAt) },
      {
        header: 'refused last, why',
        value: ({
          l: {
            refusals: [r],
          },
        }) => r && `${r.field}: ${r.reason}`,
      },
      { header: 'token', value: ({ t }) => t?.name },
      { header: 'token is', value: ({ t }) => t && stateWords(t, now).words },
      { header: 'token made (UTC)', value: ({ t }) => time(t?.madeAt) },
      { header: 'token made by', value: ({ t }) => t?.madeBy },
      { header: 'token last used (UTC)', value: ({ t }) => time(t?.lastUsedAt) },
      { header: 'token ends (UTC)', value: ({ t }) => time(t?.endsAt) },
    ],
    rows,
  );
});

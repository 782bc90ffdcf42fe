import type { LoggerTokenView, LoggerView } from '../../../../schemas/api/loggers';
import { siteParams } from '../../../../schemas/api/site';
import { endpoint } from '../../../../server/http/endpoint';
import { csvResponse, timeCell } from '../../../../server/reports/csv';
import { loggersPage } from '../../../../server/services/logger-token';
import { stateWords } from '../../../../words/loggers-sentences';
import { loggerHeads } from '../../../../words/csv-heads-site';

interface Row {
  l: LoggerView;
  t: LoggerTokenView | null;
}
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
      { header: loggerHeads.logger, value: ({ l }) => l.serial },
      { header: loggerHeads.connected, value: ({ l }) => l.connected },
      { header: loggerHeads.lastSpokeUtc, value: ({ l }) => timeCell(l.lastSpokeAt) },
      { header: loggerHeads.from, value: ({ l }) => l.lastAddress },
      { header: loggerHeads.firmware, value: ({ l }) => l.firmware },
      { header: loggerHeads.messagesRefused, value: ({ l }) => l.refused },
      { header: loggerHeads.refusedLastUtc, value: ({ l }) => timeCell(l.refusals[0]?.lastAt) },
      {
        header: loggerHeads.refusedLastWhy,
        value: ({
          l: {
            refusals: [r],
          },
        }) => r && `${r.field}: ${r.reason}`,
      },
      { header: loggerHeads.token, value: ({ t }) => t?.name },
      { header: loggerHeads.tokenIs, value: ({ t }) => t && stateWords(t, now).words },
      { header: loggerHeads.tokenMadeUtc, value: ({ t }) => timeCell(t?.madeAt) },
      { header: loggerHeads.tokenMadeBy, value: ({ t }) => t?.madeBy },
      { header: loggerHeads.tokenLastUsedUtc, value: ({ t }) => timeCell(t?.lastUsedAt) },
      { header: loggerHeads.tokenEndsUtc, value: ({ t }) => timeCell(t?.endsAt) },
    ],
    rows,
  );
});

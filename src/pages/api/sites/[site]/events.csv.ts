import { eventWords } from '../../../../domain/verdicts/event-words';
import { eventsView, siteParams } from '../../../../schemas/api/site';
import { endpoint } from '../../../../server/http/endpoint';
import { csvPages, ROWS_A_PAGE } from '../../../../server/reports/csv-pages';
import { readEvents } from '../../../../server/services/site-page';
import { eventHeads } from '../../../../words/csv-heads-site';

export const GET = endpoint({ permission: 'site.read', params: siteParams, query: eventsView }, (call) => {
  const { kind } = call.query;
  return csvPages(
    call,
    'events',
    async (tx, before: string | undefined) => {
      const page = await readEvents(tx, call.params.site, {
        limit: ROWS_A_PAGE,
        ...(before !== undefined && { before }),
        ...(kind !== 'all' && { kind }),
      });
      return { rows: page.events, next: page.before };
    },
    [
      { header: eventHeads.atUtc, value: (e) => new Date(e.at) },
      { header: eventHeads.reportedUtc, value: (e) => new Date(e.recordedAt) },
      { header: eventHeads.site, value: (e) => e.siteName },
      { header: eventHeads.string, value: (e) => e.stringName },
      { header: eventHeads.kind, value: (e) => e.kind },
      { header: eventHeads.whatHappened, value: (e) => eventWords(e.kind, e.detail).words },
    ],
  );
});

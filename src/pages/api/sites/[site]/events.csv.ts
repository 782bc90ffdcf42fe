import { eventWords } from '../../../../domain/verdicts/event-words';
import { eventsView, siteParams } from '../../../../schemas/api/site';
import { endpoint } from '../../../../server/http/endpoint';
import { csvResponse } from '../../../../server/reports/csv';
import { readEvents } from '../../../../server/services/site-page';

const MOST_ROWS = 20_000;

export const GET = endpoint(
  { permission: 'site.read', params: siteParams, query: eventsView },
  async ({ tx, params, query: { kind } }) =>
    csvResponse(
      'events',
      [
        { header: 'at (UTC)', value: (e) => new Date(e.at) },
        { header: 'reported (UTC)', value: (e) => new Date(e.recordedAt) },
        { header: 'site', value: (e) => e.siteName },
        { header: 'string', value: (e) => e.stringName },
        { header: 'kind', value: (e) => e.kind },
        { header: 'what happened', value: (e) => eventWords(e.kind, e.detail).words },
      ],
      (await readEvents(tx, params.site, { limit: MOST_ROWS, ...(kind !== 'all' && { kind }) })).events,
    ),
);

import { KINDS } from '../../domain/notices/kinds';
import { noticesView } from '../../schemas/api/notices';
import { endpoint } from '../../server/http/endpoint';
import { noticesOf } from '../../server/queries/notices';
import { csvResponse } from '../../server/reports/csv';

const MOST_ROWS = 20_000;
const time = (at: string | null): Date | null => (at === null ? null : new Date(at));

export const GET = endpoint({ permission: 'notice.read', query: noticesView }, async ({ tx, actor, query }) =>
  csvResponse(
    'notices',
    [
      { header: 'at (UTC)', value: (n) => time(n.at) },
      { header: 'kind', value: (n) => KINDS[n.kind].name },
      { header: 'site', value: (n) => n.site?.name },
      { header: 'notice', value: (n) => n.headline },
      { header: 'what follows', value: (n) => n.body },
      { header: 'came back', value: (n) => n.came },
      { header: 'over since (UTC)', value: (n) => time(n.overAt) },
      { header: 'read (UTC)', value: (n) => time(n.readAt) },
    ],
    await noticesOf(tx, actor.personId, query, MOST_ROWS),
  ),
);

import { KINDS } from '../../domain/notices/kinds';
import { noticesView } from '../../schemas/api/notices';
import { endpoint } from '../../server/http/endpoint';
import { noticesOf } from '../../server/queries/notices';
import { timeCell } from '../../server/reports/csv';
import { csvPages, pageBy, ROWS_A_PAGE } from '../../server/reports/csv-pages';
import { noticeHeads } from '../../words/csv-heads';

export const GET = endpoint({ permission: 'notice.read', query: noticesView }, (call) =>
  csvPages(
    call,
    'notices',
    async (tx, before: number | undefined = call.query.before) =>
      pageBy(
        await noticesOf(tx, call.actor.personId, { ...call.query, before }, ROWS_A_PAGE + 1),
        (last) => last.number,
      ),
    [
      { header: noticeHeads.atUtc, value: (n) => timeCell(n.at) },
      { header: noticeHeads.kind, value: (n) => KINDS[n.kind].name },
      { header: noticeHeads.site, value: (n) => n.site?.name },
      { header: noticeHeads.notice, value: (n) => n.headline },
      { header: noticeHeads.whatFollows, value: (n) => n.body },
      { header: noticeHeads.cameBack, value: (n) => n.came },
      { header: noticeHeads.overSinceUtc, value: (n) => timeCell(n.overAt) },
      { header: noticeHeads.readUtc, value: (n) => timeCell(n.readAt) },
    ],
  ),
);

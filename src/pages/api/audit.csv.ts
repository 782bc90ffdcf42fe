import { auditView } from '../../schemas/api/audit';
import { endpoint } from '../../server/http/endpoint';
import { auditEntries } from '../../server/queries/audit';
import { csvPages, pageBy, ROWS_A_PAGE } from '../../server/reports/csv-pages';
import { auditHeads } from '../../words/csv-heads';

export const GET = endpoint({ permission: 'audit.read', query: auditView }, (call) =>
  csvPages(
    call,
    'who-did-what',
    async (tx, before: number | undefined = call.query.before) =>
      pageBy(await auditEntries(tx, { ...call.query, before }, ROWS_A_PAGE + 1), (last) => last.id),
    [
      { header: auditHeads.atUtc, value: (e) => new Date(e.at) },
      { header: auditHeads.person, value: (e) => e.person },
      { header: auditHeads.from, value: (e) => e.address },
      { header: auditHeads.action, value: (e) => e.action },
      { header: auditHeads.subject, value: (e) => e.subject },
      { header: auditHeads.site, value: (e) => e.site?.name },
      { header: auditHeads.reason, value: (e) => e.reason },
      { header: auditHeads.before, value: (e) => (e.before === null ? null : JSON.stringify(e.before)) },
      { header: auditHeads.after, value: (e) => (e.after === null ? null : JSON.stringify(e.after)) },
    ],
  ),
);

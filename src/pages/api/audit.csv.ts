import { auditView } from '../../schemas/api/audit';
import { endpoint } from '../../server/http/endpoint';
import { auditEntries } from '../../server/queries/audit';
import { csvResponse } from '../../server/reports/csv';

const MOST_ROWS = 20_000;

export const GET = endpoint({ permission: 'audit.read', query: auditView }, async ({ tx, query }) =>
  csvResponse(
    'who-did-what',
    [
      { header: 'at (UTC)', value: (e) => new Date(e.at) },
      { header: 'person', value: (e) => e.person },
      { header: 'from', value: (e) => e.address },
      { header: 'action', value: (e) => e.action },
      { header: 'subject', value: (e) => e.subject },
      { header: 'site', value: (e) => e.site?.name },
      { header: 'reason', value: (e) => e.reason },
      { header: 'before', value: (e) => (e.before === null ? null : JSON.stringify(e.before)) },
      { header: 'after', value: (e) => (e.after === null ? null : JSON.stringify(e.after)) },
    ],
    await auditEntries(tx, query, MOST_ROWS),
  ),
);

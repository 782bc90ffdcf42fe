import { lowOutputView } from '../../schemas/api/low-output';
import { endpoint } from '../../server/http/endpoint';
import { lowOutputCsv } from '../../server/reports/low-output-csv';
import { readLowOutput } from '../../server/services/low-output';

export const GET = endpoint({ permission: 'cause.read', mayLag: true }, async ({ tx, context }) =>
  lowOutputCsv(
    await readLowOutput(tx, new Date()),
    lowOutputView.parse(Object.fromEntries(context.url.searchParams)),
  ),
);

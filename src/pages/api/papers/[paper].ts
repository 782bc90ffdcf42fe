import { paperParams, paperQuery } from '../../../schemas/api/handover';
import { endpoint } from '../../../server/http/endpoint';
import { paperResponse } from '../../../server/reports/handover/paper-response';

export const GET = endpoint(
  { permission: 'papers.read', params: paperParams, query: paperQuery },
  ({ tx, params, query }) => paperResponse(tx, params.paper, query.form),
);

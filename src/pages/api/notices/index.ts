import { noticesView } from '../../../schemas/api/notices';
import { endpoint } from '../../../server/http/endpoint';
import { noticesPage } from '../../../server/services/notices';

export const GET = endpoint({ permission: 'notice.read', query: noticesView }, ({ tx, actor, query }) =>
  noticesPage(tx, actor, query, new Date()),
);

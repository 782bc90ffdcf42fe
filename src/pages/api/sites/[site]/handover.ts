import { makeHandover as makeHandoverBody } from '../../../../schemas/api/handover';
import { siteParams } from '../../../../schemas/api/site';
import { endpoint } from '../../../../server/http/endpoint';
import { handoverPage } from '../../../../server/services/handover-page';
import { makeHandover } from '../../../../server/services/make-handover';

export const GET = endpoint({ permission: 'handover.read', params: siteParams }, ({ tx, params }) =>
  handoverPage(tx, params.site, new Date()),
);

export const POST = endpoint(
  { permission: 'handover.make', params: siteParams, body: makeHandoverBody },
  ({ tx, actor, params, body, context }) =>
    makeHandover(tx, actor, params.site, body, new Date(), context.clientAddress),
);

import { annotationsQuery, newAnnotation } from '../../../../../schemas/api/annotations';
import { siteParams } from '../../../../../schemas/api/site';
import { endpoint } from '../../../../../server/http/endpoint';
import { pinAnnotation, readAnnotations } from '../../../../../server/services/annotations';

export const GET = endpoint(
  { permission: 'annotation.read', params: siteParams, query: annotationsQuery },
  ({ tx, params, query }) => readAnnotations(tx, params.site, query),
);

export const POST = endpoint(
  { permission: 'annotation.write', params: siteParams, body: newAnnotation },
  ({ tx, actor, params, body, context }) =>
    pinAnnotation(tx, actor, params.site, body, { at: new Date(), address: context.clientAddress }),
);

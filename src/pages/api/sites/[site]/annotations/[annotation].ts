import { annotationParams } from '../../../../../schemas/api/annotations';
import { endpoint } from '../../../../../server/http/endpoint';
import { setRemoved } from '../../../../../server/services/annotations';

export const DELETE = endpoint(
  { permission: 'annotation.write', params: annotationParams },
  ({ tx, actor, params, context }) =>
    setRemoved(tx, actor, params, true, { at: new Date(), address: context.clientAddress }),
);

/** Puts a note back that was taken away. */
export const PUT = endpoint(
  { permission: 'annotation.write', params: annotationParams },
  ({ tx, actor, params, context }) =>
    setRemoved(tx, actor, params, false, { at: new Date(), address: context.clientAddress }),
);

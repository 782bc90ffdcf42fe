import { IMPORT_BODY_MAX_BYTES, importBody } from '../../../../../schemas/api/import';
import { siteParams } from '../../../../../schemas/api/site';
import { found } from '../../../../../server/errors';
import { endpoint } from '../../../../../server/http/endpoint';
import { visibleSite } from '../../../../../server/queries/visible-site';
import { answerImport } from '../../../../../server/services/import-as-built-stream';

export const POST = endpoint(
  {
    permission: 'as_built.write',
    params: siteParams,
    body: importBody,
    bodyMaxBytes: IMPORT_BODY_MAX_BYTES,
  },
  async ({ tx, actor, params, body, context }) => {
    found(await visibleSite(tx, params.site), 'site');
    return answerImport(
      actor,
      {
        siteRef: params.site,
        order: body,
        address: context.clientAddress,
        requestId: context.locals.requestId,
        accept: context.request.headers.get('accept') ?? '',
      },
      new Date(),
    );
  },
);

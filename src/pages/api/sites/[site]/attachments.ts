import { attachmentQuery } from '../../../../schemas/api/attachments';
import { siteParams } from '../../../../schemas/api/site';
import { found } from '../../../../server/errors';
import { endpoint } from '../../../../server/http/endpoint';
import { recordedReply } from '../../../../server/http/recorded-reply';
import { attachmentOut, attachmentsOfSite } from '../../../../server/queries/attachments';
import { visibleSite } from '../../../../server/queries/visible-site';
import { receiveFile, storeAttachment } from '../../../../server/services/store-attachment';

export const GET = endpoint({ permission: 'attachment.read', params: siteParams }, async ({ tx, params }) => {
  const site = found(await visibleSite(tx, params.site), 'site');
  return { files: (await attachmentsOfSite(tx, site.id)).map(attachmentOut) };
});

export const POST = endpoint(
  {
    permission: 'checks.write',
    params: siteParams,
    query: attachmentQuery,
    receive: ({ actor, params, query, context }) => receiveFile(actor, params.site, context.request, query),
  },
  async ({ tx, actor, params, query, received }) =>
    recordedReply(await storeAttachment(tx, actor, params.site, query, received, new Date())),
);

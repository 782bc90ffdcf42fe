import { attachmentParams, attachmentView } from '../../../schemas/api/attachments';
import { found } from '../../../server/errors';
import { fileReply } from '../../../server/files/file-reply';
import { endpoint } from '../../../server/http/endpoint';
import { attachmentBytes } from '../../../server/queries/attachments';

export const GET = endpoint(
  { permission: 'attachment.read', params: attachmentParams, query: attachmentView },
  async ({ tx, params, query, context }) => {
    const file = found(await attachmentBytes(tx, params.attachment, query.variant), 'file');
    return fileReply(context.request, file, `"${params.attachment}.${query.variant}"`);
  },
);

import { signOffInput } from '../../../../schemas/api/checks';
import { stringParams } from '../../../../schemas/api/string';
import { endpoint } from '../../../../server/http/endpoint';
import { recordedReply } from '../../../../server/http/recorded-reply';
import { signOffString } from '../../../../server/services/sign-off';

export const POST = endpoint(
  { permission: 'checks.write', params: stringParams, body: signOffInput },
  async ({ tx, actor, params, body, context }) =>
    recordedReply(
      await signOffString(tx, actor, params.string, body, {
        address: context.clientAddress,
        now: new Date(),
      }),
    ),
);

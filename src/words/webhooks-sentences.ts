import { counted } from '../drawings/numbers';
import type { DeliveryItem, WebhookItem, WebhooksPage } from '../schemas/api/webhooks';

export interface Words {
  finding: string;
  sentence: string;
}

export function webhooksFinding({ webhooks }: Pick<WebhooksPage, 'webhooks'>): Words {
  const off = webhooks.filter((w) => w.disabledAt !== null && !w.active);
  const failing = webhooks.filter((w) => w.active && w.failingSince !== null);
  const sentence = 'Each call is signed; the receiver can prove that it is Wakeline’s.';
  if (webhooks.length === 0)
    return {
      finding: 'No other system is told of anything',
      sentence: 'A webhook calls an address of yours when something happens. Each call is signed.',
    };
  if (off.length > 0)
    return {
      finding: `${counted(off.length, 'webhook is', 'webhooks are')} switched off after days of failing`,
      sentence: 'Look at what the last calls came to, mend the target, then switch it on again.',
    };
  if (failing.length > 0)
    return {
      finding: `Calls of ${counted(failing.length, 'webhook')} fail`,
      sentence:
        'They are tried again, later each time. After five days without one success it is switched off.',
    };
  return { finding: `${counted(webhooks.length, 'webhook')}, none failing`, sentence };
}

export function webhookFinding(hook: WebhookItem): Words {
  if (!hook.active)
    return hook.disabledAt
      ? {
          finding: `${hook.name} is switched off: every call failed for days`,
          sentence:
            'Mend the target, make a test call, then switch it on again. What happened meanwhile is not sent.',
        }
      : { finding: `${hook.name} is switched off`, sentence: 'What happens is not told to it.' };
  if (hook.failingSince)
    return {
      finding: `Calls of ${hook.name} fail`,
      sentence: `${counted(hook.waiting, 'call waits', 'calls wait')} for another try. The tries below say what came back.`,
    };
  return {
    finding: hook.lastDeliveredAt ? `${hook.name} takes its calls` : `${hook.name} has not been called yet`,
    sentence: hook.lastDeliveredAt
      ? 'Every call is below with what came back.'
      : 'Make a test call to see whether it answers.',
  };
}

/** The state of a call in words. */
export function stateWords({ state, attempts }: Pick<DeliveryItem, 'state' | 'attempts'>): string {
  if (state === 'delivered') return 'taken';
  if (state === 'given_up') return 'given up';
  return attempts.length === 0 ? 'on its way' : `waits, ${counted(attempts.length, 'try', 'tries')}`;
}

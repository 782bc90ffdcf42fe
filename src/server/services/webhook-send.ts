import { setTimeout as sleep } from 'node:timers/promises';
import { decide } from '../../domain/notices/decide';
import { KINDS } from '../../domain/notices/kinds';
import { paths } from '../../schemas/paths';
import { config, publicUrl } from '../config';
import { asIngest, type Tx } from '../db/transaction';
import { callOut, type CallLimits } from '../http/call-out';
import { log } from '../log';
import { letter } from '../mail/letter';
import { recipients } from '../queries/notices-tell';
import { addNotice, tellNoticed } from '../queries/notices-write';
import { addMessage } from '../queries/outbox';
import {
  claimCalls,
  disableWebhook,
  noteAttempt,
  type CallOutcome,
  type DueCall,
} from '../queries/webhooks-send';
import { choicesLine, greetingOf, wayOutOf } from './notice-letters';
import { recipientOf } from './notice-people';
import { signedHeaders } from './webhook-signature';
import { webhookLetters } from '../../words/refusals-people';

/** Makes the calls that are due. Each is made at least once; its identifier is the same at every try. */

const TIMEOUT_MS = 10_000;
const CLAIM_MS = 60_000;
const MINUTE_MS = 60_000;
/** After the first, second … failed try. */
const WAITS_MIN = [1, 5, 30, 120, 360, 720, 1440, 1440, 1440];
/** Failing without a break for so long, a webhook is switched off. */
export const DISABLED_AFTER_DAYS = 5;
const LOOK_AGAIN_MS = 500;
/** A run ends by then and leaves the rest to the next. */
const RUN_MS = 50_000;

/** Which addresses of ours calls may reach: in the demo this machine, elsewhere none unless a setting says so. */
export function callsWithin(settings = config()): CallLimits['within'] {
  if (settings.WEBHOOKS_PRIVATE) return 'everything';
  return settings.LOCAL_MAIL_FOLDER === undefined ? 'nothing' : 'loopback';
}

/** Minutes until the next try after so many failed ones; null: it is given up. */
export const waitMinutes = (failed: number): number | null => WAITS_MIN[failed - 1] ?? null;

interface Count {
  delivered: number;
  failed: number;
}

/**
 * Webhooks are called side by side, one call each at a time: a target that hangs is cut off and holds up none but its
 * own. One that fails is left alone until its next try is due.
 */
export async function sendCalls(
  now: () => Date,
  limits: CallLimits = { within: callsWithin(), timeoutMs: TIMEOUT_MS },
): Promise<Count> {
  const count: Count = { delivered: 0, failed: 0 };
  const inFlight = new Map<number, Promise<void>>();
  const failedHooks = new Set<number>();
  const endBy = Date.now() + RUN_MS;
  for (;;) {
    const busy = [...inFlight.keys(), ...failedHooks];
    const at = now();
    const calls =
      Date.now() < endBy
        ? await asIngest((tx) => claimCalls(tx, at, new Date(at.getTime() + CLAIM_MS), busy))
        : [];
    for (const call of calls)
      inFlight.set(
        call.webhookId,
        makeCall(call, now, limits)
          .then((delivered) => {
            count[delivered ? 'delivered' : 'failed']++;
            if (!delivered) failedHooks.add(call.webhookId);
          })
          .catch((error: unknown) => {
            failedHooks.add(call.webhookId);
            log.error({ error }, 'a call could not be written down; it is made again');
          })
          .finally(() => inFlight.delete(call.webhookId)),
      );
    if (inFlight.size === 0) return count;
    await Promise.race([...inFlight.values(), sleep(LOOK_AGAIN_MS)]);
  }
}

async function makeCall(call: DueCall, now: () => Date, limits: CallLimits): Promise<boolean> {
  const began = now();
  const headers = signedHeaders(call.secret, call, began);
  const answer = await callOut({ url: call.url, headers, body: call.body }, limits);
  const delivered = answer.status !== null && answer.status >= 200 && answer.status < 300 && !answer.error;
  const wait = waitMinutes(call.attempts + 1);
  const at = now();
  const outcome: CallOutcome = {
    at,
    delivered,
    status: answer.status,
    latencyMs: answer.latencyMs,
    excerpt: answer.excerpt,
    error:
      answer.error ??
      (delivered
        ? null
        : answer.status !== null && answer.status >= 300 && answer.status < 400
          ? webhookLetters.redirected
          : webhookLetters.answered(answer.status ?? 0)),
    // a test is made once: somebody looks at it
    notBefore: wait === null || call.kind === 'test' ? null : new Date(at.getTime() + wait * MINUTE_MS),
  };
  await asIngest(async (tx) => {
    const since = await noteAttempt(tx, call, outcome);
    if (since && at.getTime() - since.getTime() >= DISABLED_AFTER_DAYS * 86_400_000)
      await switchOff(tx, call, outcome.error ?? '', at);
  });
  return delivered;
}

/** Says so to the managers: in the product, and by letter as each has chosen. */
async function switchOff(tx: Tx, call: DueCall, why: string, at: Date): Promise<void> {
  const hook = await disableWebhook(tx, call.webhookId, at);
  if (!hook) return;
  const eventKey = `webhook:${hook.ref}:${at.toISOString()}`;
  const headline = webhookLetters.switchedOff(hook.name);
  const body = webhookLetters.failedForDays(DISABLED_AFTER_DAYS, why);
  const matter = { kind: 'webhook', siteId: null, byPerson: null, inProductOnly: false } as const;
  const noticed: number[] = [];
  for (const person of await recipients(tx, { organisationIds: [call.organisationId] })) {
    const decision = decide(matter, recipientOf(person), at);
    if (decision.how === 'nothing') continue;
    const href = paths.webhook(hook.ref);
    noticed.push(person.personId);
    await addNotice(tx, {
      organisationId: call.organisationId,
      personId: person.personId,
      siteId: null,
      eventKey,
      eventId: null,
      kind: 'webhook',
      subject: null,
      headline,
      body,
      href,
      hazard: false,
      createdAt: at,
      letterDue: decision.how === 'gathered' ? decision.at : null,
    });
    if (decision.how !== 'now') continue;
    const { url, wayOut } = wayOutOf(person, 'webhook');
    const { text, html } = letter({
      greeting: greetingOf(person),
      finding: headline,
      paragraphs: [body],
      figures: [[webhookLetters.calledAt, hook.url]],
      action: { words: webhookLetters.seeCalls, href: publicUrl() + href },
      footer: webhookLetters.whyThisLetter(person.organisationName, KINDS.webhook.name, choicesLine()),
      wayOut,
    });
    await addMessage(tx, {
      organisationId: person.organisationId,
      personId: person.personId,
      siteId: null,
      kind: 'webhook',
      eventKey,
      to: { address: person.email, name: person.name },
      subject: headline,
      text,
      html,
      unsubscribeUrl: url,
    });
  }
  await tellNoticed(tx, noticed);
}

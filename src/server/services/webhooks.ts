import { randomUUID } from 'node:crypto';
import type { z } from 'zod';
import type { Actor } from '../../domain/access/permissions';
import { paths } from '../../schemas/paths';
import type {
  DeliveriesView,
  SecretShown,
  webhookBody,
  webhookChange,
  WebhookPage,
  WebhooksPage,
} from '../../schemas/api/webhooks';
import { publicUrl } from '../config';
import type { Tx } from '../db/transaction';
import { AppError, found } from '../errors';
import { faultOfUrl } from '../http/call-out';
import { tellCalled } from '../queries/live-notices';
import { addAuditEntry } from '../queries/people';
import {
  addWebhook,
  changeWebhook,
  deliveriesOf,
  deliveryByRef,
  giveUpWaiting,
  webhookByRef,
  webhooksOf,
} from '../queries/webhooks';
import { addDelivery } from '../queries/webhooks-send';
import type { CallBody } from './webhook-calls';
import { callsWithin } from './webhook-send';
import { newSecret } from './webhook-signature';
import { webhookRefusals } from '../../words/refusals-people';

/** Webhooks as managers keep them. */

const A_PAGE = 50;
const MOST = 20;

export async function webhooksPage(tx: Tx, at: Date): Promise<WebhooksPage> {
  return { at: at.toISOString(), webhooks: await webhooksOf(tx), within: callsWithin() };
}

/** @throws AppError not_found */
export async function webhookPage(tx: Tx, ref: string, view: DeliveriesView, at: Date): Promise<WebhookPage> {
  const { number, ...webhook } = found(await webhookByRef(tx, ref), 'webhook');
  const deliveries = await deliveriesOf(tx, number, view, A_PAGE + 1);
  const shown = deliveries.slice(0, A_PAGE);
  return {
    at: at.toISOString(),
    webhook,
    deliveries: shown,
    next: deliveries.length > A_PAGE ? (shown.at(-1)?.number ?? null) : null,
    within: callsWithin(),
  };
}

function checkUrl(url: string): void {
  const fault = faultOfUrl(url, callsWithin());
  if (fault)
    throw new AppError('invalid', { message: fault, fields: [{ field: 'body.url', message: fault }] });
}

const audit = (
  tx: Tx,
  actor: Actor,
  address: string | null,
  action: string,
  ref: string,
  change: { before?: unknown; after?: unknown },
): Promise<void> =>
  addAuditEntry(tx, {
    organisationId: actor.organisationId,
    personId: actor.personId,
    address,
    action: `webhook.${action}`,
    subject: `webhook ${ref}`,
    ...change,
  });

/** @returns the secret, this once. @throws AppError invalid (field `url`) · conflict */
export async function makeWebhook(
  tx: Tx,
  actor: Actor,
  body: z.output<typeof webhookBody>,
  address: string | null,
): Promise<SecretShown> {
  checkUrl(body.url);
  if ((await webhooksOf(tx)).length >= MOST)
    throw new AppError('conflict', {
      message: webhookRefusals.tooMany(MOST),
    });
  const secret = newSecret();
  const id = await addWebhook(tx, {
    ...body,
    secret,
    organisationId: actor.organisationId,
    createdBy: actor.personId,
  });
  await audit(tx, actor, address, 'made', id, { after: body });
  return { id, secret };
}

/** @returns the new secret where one was asked for. @throws AppError not_found · invalid (field `url`) */
export async function reviseWebhook(
  tx: Tx,
  actor: Actor,
  ref: string,
  { newSecret: wanted, ...change }: z.output<typeof webhookChange>,
  address: string | null,
  at: Date,
): Promise<SecretShown | undefined> {
  const before = found(await webhookByRef(tx, ref), 'webhook');
  if (change.url !== undefined) checkUrl(change.url);
  const secret = wanted ? newSecret() : undefined;
  await changeWebhook(tx, before.number, { ...change, ...(secret && { secret }) });
  if (change.active === false) await giveUpWaiting(tx, before.number, at);
  const { name, url, kinds, active } = before;
  await audit(tx, actor, address, 'changed', ref, {
    before: { name, url, kinds, active },
    after: { ...change, ...(secret && { newSecret: true }) },
  });
  return secret === undefined ? undefined : { id: ref, secret };
}

/** It is never called again; what it was called with stays on record. @throws AppError not_found */
export async function removeWebhook(
  tx: Tx,
  actor: Actor,
  ref: string,
  address: string | null,
  at: Date,
): Promise<void> {
  const { number, name, url } = found(await webhookByRef(tx, ref), 'webhook');
  await changeWebhook(tx, number, { removedAt: at });
  await giveUpWaiting(tx, number, at);
  await audit(tx, actor, address, 'removed', ref, { before: { name, url } });
}

/** Asks for one call that says nothing but that it is a test. @throws AppError not_found */
export async function testWebhook(
  tx: Tx,
  actor: Actor,
  ref: string,
  at: Date,
): Promise<{ delivery: string }> {
  const hook = found(await webhookByRef(tx, ref), 'webhook');
  const delivery = randomUUID();
  const body: CallBody = {
    delivery,
    kind: 'test',
    phase: 'happens',
    event: 'test',
    at: at.toISOString(),
    recordedAt: at.toISOString(),
    site: null,
    string: null,
    headline: webhookRefusals.testCall,
    body: webhookRefusals.testReason,
    detail: {},
    href: `${publicUrl()}${paths.webhook(ref)}`,
  };
  await addDelivery(tx, {
    ref: delivery,
    webhookId: hook.number,
    organisationId: actor.organisationId,
    siteId: null,
    eventKey: `test:${delivery}`,
    kind: 'test',
    body: JSON.stringify(body),
  });
  await tellCalled(tx);
  return { delivery };
}

/**
 * Makes a call again, as a call of its own with the same content: the first stays on record as it went.
 * @throws AppError not_found · conflict while the webhook is switched off
 */
export async function resendCall(
  tx: Tx,
  actor: Actor,
  ref: string,
  address: string | null,
): Promise<{ delivery: string }> {
  const first = found(await deliveryByRef(tx, ref), 'call');
  if (!first.active && first.kind !== 'test')
    throw new AppError('conflict', {
      message: webhookRefusals.switchOnFirst,
    });
  const delivery = randomUUID();
  const body = { ...(JSON.parse(first.body) as CallBody), delivery };
  await addDelivery(tx, {
    ref: delivery,
    webhookId: first.webhookId,
    organisationId: actor.organisationId,
    siteId: first.siteId,
    eventKey: `again:${delivery}`,
    kind: first.kind,
    body: JSON.stringify(body),
  });
  await audit(tx, actor, address, 'sent_again', ref, { after: { delivery } });
  await tellCalled(tx);
  return { delivery };
}

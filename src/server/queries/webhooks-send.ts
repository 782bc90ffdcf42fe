import type { Tx } from '../db/transaction';

/** Calls to other systems as the job makes them. Runs as ingest. */

export async function activeWebhooks(
  tx: Tx,
  organisationIds: readonly number[],
): Promise<{ id: number; organisationId: number; kinds: string[] }[]> {
  const { rows } = await tx.raw<{ rows: { id: number; organisationId: number; kinds: string[] }[] }>(
    `select id, organisation_id as "organisationId", kinds from webhook
     where active and removed_at is null and organisation_id = any (?::int4[]) order by id`,
    [[...organisationIds]],
  );
  return rows;
}

export interface NewDelivery {
  ref: string;
  webhookId: number;
  organisationId: number;
  siteId: number | null;
  eventKey: string;
  kind: string;
  body: string;
}

/** @returns whether it is new: one call a webhook and event */
export async function addDelivery(tx: Tx, delivery: NewDelivery): Promise<boolean> {
  const { rows } = await tx.raw<{ rows: unknown[] }>(
    `insert into webhook_delivery (ref, webhook_id, organisation_id, site_id, event_key, kind, body)
     values (:ref, :webhookId, :organisationId, :siteId, :eventKey, :kind, :body)
     on conflict (webhook_id, event_key) do nothing returning id`,
    { ...delivery },
  );
  return rows.length > 0;
}

export interface DueCall {
  id: number;
  ref: string;
  webhookId: number;
  organisationId: number;
  url: string;
  secret: string;
  kind: string;
  body: string;
  attempts: number;
}

/**
 * The oldest due call of each webhook that is not at one already, claimed until `until`: whoever is killed with it
 * loses the claim then.
 */
export async function claimCalls(
  tx: Tx,
  now: Date,
  until: Date,
  busy: readonly number[],
): Promise<DueCall[]> {
  const { rows } = await tx.raw<{ rows: DueCall[] }>(
    `with due as (
       select d.id from webhook w cross join lateral (
         select id from webhook_delivery where webhook_id = w.id and delivered_at is null and given_up_at is null
           and not_before <= :now and (claimed_until is null or claimed_until < :now)
         order by not_before, id limit 1 for update skip locked) d
       where w.removed_at is null and (w.active or exists (select from webhook_delivery t
           where t.id = d.id and t.kind = 'test')) and not w.id = any (:busy::int4[]))
     update webhook_delivery d set claimed_until = :until
     from due, webhook w where d.id = due.id and w.id = d.webhook_id
     returning d.id, d.ref, d.webhook_id as "webhookId", d.organisation_id as "organisationId", w.url, w.secret, d.kind,
       d.body, d.attempts`,
    { now, until, busy: [...busy] },
  );
  return rows;
}

export interface CallOutcome {
  at: Date;
  delivered: boolean;
  /** HTTP; null: no answer. */
  status: number | null;
  latencyMs: number;
  excerpt: string;
  error: string | null;
  /** The next try; null: none any more. */
  notBefore: Date | null;
}

/** Writes down a try. @returns since when the webhook has been failing, null while it is well */
export async function noteAttempt(tx: Tx, call: DueCall, outcome: CallOutcome): Promise<Date | null> {
  await tx('webhook_attempt').insert({
    delivery_id: call.id,
    organisation_id: call.organisationId,
    at: outcome.at,
    status: outcome.status,
    latency_ms: outcome.latencyMs,
    excerpt: outcome.excerpt.replaceAll('\0', ''),
    error: outcome.error,
  });
  await tx('webhook_delivery')
    .where({ id: call.id })
    .update({
      attempts: tx.raw('attempts + 1'),
      claimed_until: null,
      ...(outcome.delivered
        ? { delivered_at: outcome.at }
        : outcome.notBefore
          ? { not_before: outcome.notBefore }
          : { given_up_at: outcome.at }),
    });
  const { rows } = await tx.raw<{ rows: { since: Date | null }[] }>(
    `update webhook set failing_since = case when :delivered then null else coalesce(failing_since, :at) end
     where id = :id returning failing_since as since`,
    { id: call.webhookId, delivered: outcome.delivered, at: outcome.at },
  );
  return rows[0]?.since ?? null;
}

/** Switches a webhook off and gives up what still waits for it. @returns what it was called, once */
export async function disableWebhook(
  tx: Tx,
  id: number,
  at: Date,
): Promise<{ ref: string; name: string; url: string } | undefined> {
  const { rows } = await tx.raw<{ rows: { ref: string; name: string; url: string }[] }>(
    `with waiting as (
       update webhook_delivery set given_up_at = :at
       where webhook_id = :id and delivered_at is null and given_up_at is null)
     update webhook set active = false, disabled_at = :at where id = :id and active returning ref, name, url`,
    { at, id },
  );
  return rows[0];
}

/** Forgets calls that are over and older than this. */
export async function forgetCallsBefore(tx: Tx, before: Date): Promise<number> {
  const { rows } = await tx.raw<{ rows: { forgotten: number }[] }>(
    `with gone as (delete from webhook_delivery where created_at < ?
       and (delivered_at is not null or given_up_at is not null) returning 1)
     select count(*)::int as forgotten from gone`,
    [before],
  );
  return rows[0]?.forgotten ?? 0;
}

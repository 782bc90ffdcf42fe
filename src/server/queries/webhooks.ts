import type { DeliveriesView, DeliveryItem, WebhookItem } from '../../schemas/api/webhooks';
import type { Tx } from '../db/transaction';

/** Webhooks of the actor's organisation, as managers see them. The secret is never read here. */

type Dated<T, K extends keyof T> = Omit<T, K> & Record<K, Date | null>;
type Row = Dated<WebhookItem, 'createdAt' | 'failingSince' | 'disabledAt' | 'lastDeliveredAt'> & {
  number: number;
};
const iso = (at: Date | null): string | null => at?.toISOString() ?? null;

const WEBHOOK = `select w.ref as id, w.id as number, w.name, w.url, w.kinds, w.active, p.name as "createdBy",
    w.created_at as "createdAt", w.failing_since as "failingSince", w.disabled_at as "disabledAt",
    (select count(*)::int from webhook_delivery d where d.webhook_id = w.id and d.delivered_at is null
       and d.given_up_at is null) as waiting,
    (select max(delivered_at) from webhook_delivery d where d.webhook_id = w.id) as "lastDeliveredAt"
  from webhook w join person p on p.id = w.created_by
  where w.organisation_id = (select actor_organisation()) and w.removed_at is null`;

const toItem = ({
  number: _,
  createdAt,
  failingSince,
  disabledAt,
  lastDeliveredAt,
  ...row
}: Row): WebhookItem => ({
  ...row,
  createdAt: iso(createdAt) ?? '',
  failingSince: iso(failingSince),
  disabledAt: iso(disabledAt),
  lastDeliveredAt: iso(lastDeliveredAt),
});

export async function webhooksOf(tx: Tx): Promise<WebhookItem[]> {
  const { rows } = await tx.raw<{ rows: Row[] }>(`${WEBHOOK} order by lower(w.name), w.id`);
  return rows.map(toItem);
}

export async function webhookByRef(
  tx: Tx,
  ref: string,
): Promise<(WebhookItem & { number: number }) | undefined> {
  const { rows } = await tx.raw<{ rows: Row[] }>(`${WEBHOOK} and w.ref = ?`, [ref]);
  const [row] = rows;
  return row && { ...toItem(row), number: row.number };
}

export async function addWebhook(
  tx: Tx,
  hook: {
    organisationId: number;
    name: string;
    url: string;
    secret: string;
    kinds: string[];
    createdBy: number;
  },
): Promise<string> {
  const { rows } = await tx.raw<{ rows: { ref: string }[] }>(
    `insert into webhook (organisation_id, name, url, secret, kinds, created_by)
     values (:organisationId, :name, :url, :secret, :kinds, :createdBy) returning ref`,
    { ...hook },
  );
  return rows[0]!.ref;
}

export async function changeWebhook(
  tx: Tx,
  number: number,
  change: {
    name?: string;
    url?: string;
    kinds?: string[];
    active?: boolean;
    secret?: string;
    removedAt?: Date;
  },
): Promise<void> {
  const { removedAt, ...rest } = change;
  const columns = {
    ...rest,
    ...(removedAt && { removed_at: removedAt, active: false }),
    // switched on by a person, it begins anew
    ...(change.active && { failing_since: null, disabled_at: null }),
  };
  if (Object.keys(columns).length > 0) await tx('webhook').where({ id: number }).update(columns);
}

/** What still waited is given up: it is switched off, or gone. */
export async function giveUpWaiting(tx: Tx, number: number, at: Date): Promise<void> {
  await tx('webhook_delivery')
    .where({ webhook_id: number })
    .whereNull('delivered_at')
    .whereNull('given_up_at')
    .update({ given_up_at: at });
}

interface DeliveryRow extends Omit<DeliveryItem, 'createdAt' | 'nextAt' | 'state'> {
  createdAt: Date;
  notBefore: Date;
  deliveredAt: Date | null;
  givenUpAt: Date | null;
}

/** The newest calls first, each with its tries. */
export async function deliveriesOf(
  tx: Tx,
  number: number,
  view: DeliveriesView,
  limit: number,
): Promise<DeliveryItem[]> {
  const { rows } = await tx.raw<{ rows: DeliveryRow[] }>(
    `select d.ref as id, d.id as number, d.kind, site.name as site, d.created_at as "createdAt",
            d.not_before as "notBefore", d.delivered_at as "deliveredAt", d.given_up_at as "givenUpAt", d.body,
            coalesce((select json_agg(json_build_object(
                'at', to_char(a.at at time zone 'UTC', 'YYYY-MM-DD"T"HH24:MI:SS.MS"Z"'), 'status', a.status,
                'latencyMs', a.latency_ms, 'excerpt', a.excerpt, 'error', a.error) order by a.id desc)
              from webhook_attempt a where a.delivery_id = d.id), '[]') as attempts
     from webhook_delivery d left join site on site.id = d.site_id
     where d.webhook_id = :number and (:before::int8 is null or d.id < :before)
       and (:show = 'all' or (:show = 'waiting' and d.delivered_at is null and d.given_up_at is null)
            or (:show = 'failed' and d.delivered_at is null and d.attempts > 0))
     order by d.id desc limit :limit`,
    { number, before: view.before ?? null, show: view.show, limit },
  );
  return rows.map(({ createdAt, notBefore, deliveredAt, givenUpAt, ...row }) => {
    const state = deliveredAt ? 'delivered' : givenUpAt ? 'given_up' : 'waits';
    return {
      ...row,
      createdAt: createdAt.toISOString(),
      state,
      nextAt: state === 'waits' ? notBefore.toISOString() : null,
    };
  });
}

/** A call of the actor's organisation with its webhook. */
export async function deliveryByRef(
  tx: Tx,
  ref: string,
): Promise<
  | {
      webhookId: number;
      active: boolean;
      siteId: number | null;
      kind: string;
      body: string;
      eventKey: string;
    }
  | undefined
> {
  const { rows } = await tx.raw<{
    rows: {
      webhookId: number;
      active: boolean;
      siteId: number | null;
      kind: string;
      body: string;
      eventKey: string;
    }[];
  }>(
    `select d.webhook_id as "webhookId", w.active, d.site_id as "siteId", d.kind, d.body, d.event_key as "eventKey"
     from webhook_delivery d join webhook w on w.id = d.webhook_id
     where d.ref = ? and d.organisation_id = (select actor_organisation()) and w.removed_at is null`,
    [ref],
  );
  return rows[0];
}

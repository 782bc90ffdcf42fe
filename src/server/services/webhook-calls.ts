import { randomUUID } from 'node:crypto';
import { toldOf, type Told } from '../../domain/notices/event';
import { KINDS, type NoticeKind } from '../../domain/notices/kinds';
import { noticeWords } from '../../domain/notices/words';
import { publicUrl } from '../config';
import type { Tx } from '../db/transaction';
import type { CauseFacts, TellEvent } from '../queries/notices-tell';
import { activeWebhooks, addDelivery } from '../queries/webhooks-send';
import { hrefOf } from './notice-links';

/** What a call tells another system. Versions add fields and never change one. */
export interface CallBody {
  /** The call: the same at every try. */
  delivery: string;
  kind: NoticeKind | 'test';
  phase: Told['phase'];
  event: string;
  /** When it happened; ISO 8601 in UTC, as every time. */
  at: string;
  recordedAt: string;
  site: { id: string; name: string } | null;
  string: { id: string; name: string } | null;
  headline: string;
  body: string;
  detail: Record<string, string | number | boolean | null>;
  /** The page about it. */
  href: string;
}

/** What of an event's detail may leave: names and public identifiers, never the database's numbers. */
const TOLD_DETAIL = [
  ...['cause', 'kind', 'headline', 'hazard', 'units', 'because', 'lossWh'],
  ...['case', 'number', 'title', 'origin', 'state', 'reason', 'assignee', 'person', 'body'],
  ...['gateway', 'logger', 'personOnSite', 'version', 'startsAt', 'endsAt'],
];

const detailOf = (detail: TellEvent['detail']): CallBody['detail'] =>
  Object.fromEntries(
    TOLD_DETAIL.flatMap((key) => {
      const value = detail[key];
      return typeof value === 'string' || typeof value === 'number' || typeof value === 'boolean'
        ? [[key, value]]
        : [];
    }),
  );

/** Notes the calls that these events make, once each. Every event, also of what flaps: a program counts for itself. */
export async function addCalls(
  tx: Tx,
  events: readonly TellEvent[],
  causes: ReadonlyMap<string, CauseFacts>,
): Promise<number> {
  if (events.length === 0) return 0;
  const hooks = await activeWebhooks(tx, [...new Set(events.map((e) => e.organisationId))]);
  if (hooks.length === 0) return 0;
  let added = 0;
  for (const event of events)
    for (const told of toldOf(event).filter((t) => KINDS[t.kind].callable)) {
      const { cause } = event.detail;
      const words = noticeWords(told, event, causes.get(typeof cause === 'string' ? cause : '') ?? null);
      for (const hook of hooks) {
        if (hook.organisationId !== event.organisationId || !hook.kinds.includes(told.kind)) continue;
        const ref = randomUUID();
        const body: CallBody = {
          delivery: ref,
          kind: told.kind,
          phase: told.phase,
          event: event.kind,
          at: event.at.toISOString(),
          recordedAt: event.recordedAt.toISOString(),
          site: { id: event.site.ref, name: event.site.name },
          string: event.stringRef ? { id: event.stringRef, name: event.stringName ?? '' } : null,
          ...words,
          detail: detailOf(event.detail),
          href: publicUrl() + hrefOf(told, event, 'manager'),
        };
        const isNew = await addDelivery(tx, {
          ref,
          webhookId: hook.id,
          organisationId: event.organisationId,
          siteId: event.siteId,
          eventKey: `event:${event.id}:${told.kind}`,
          kind: told.kind,
          body: JSON.stringify(body),
        });
        if (isNew) added++;
      }
    }
  return added;
}

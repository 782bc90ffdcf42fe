import { queryOptions } from '@tanstack/react-query';
import { api } from '../../lib/api';
import { replaced } from '../../lib/patch';
import { causesAfter, received, type Sent } from '../../schemas/api/causes-on-the-way';
import type { AcknowledgeReply } from '../../schemas/api/fleet';
import type { ShutdownNow } from '../../schemas/api/shutdown';
import type { Change } from '../../schemas/live';
import { paths } from '../../schemas/paths';

export const shutdownKey = ['shutdown'] as const;

export const shutdownQuery = (initial: ShutdownNow) =>
  queryOptions({
    queryKey: shutdownKey,
    queryFn: ({ signal }) => api<Sent<ShutdownNow>>(paths.api.shutdown(), { signal }).then(received),
    initialData: initial,
    refetchInterval: 60_000,
  });

/** After a change of the fleet: sites that have neither a cause nor a command any more leave the page. */
export function changedShutdown(now: ShutdownNow, change: Change, at: string): ShutdownNow {
  const causes = causesAfter(now.causes, change);
  const concerned = new Set(causes.map((c) => c.siteId));
  return {
    ...now,
    at,
    causes,
    sites: replaced(now.sites, change.sites, (s) => s.id).filter(
      (s) => concerned.has(s.id) || s.commands.length > 0,
    ),
  };
}

export const withAcknowledgement = (now: ShutdownNow, reply: AcknowledgeReply): ShutdownNow => ({
  ...now,
  acknowledgements: replaced(now.acknowledgements, [reply.acknowledgement], (a) => a.key),
  contacts: replaced(now.contacts, [reply.contact], (c) => c.siteId),
});

import { queryOptions } from '@tanstack/react-query';
import { api } from '../../lib/api';
import { replaced } from '../../lib/patch';
import { causesAfter, received, type Sent } from '../../schemas/api/causes-on-the-way';
import type { AcknowledgeReply, FleetNow } from '../../schemas/api/fleet';
import type { Change } from '../../schemas/live';
import { paths } from '../../schemas/paths';

export const fleetKey = ['fleet'] as const;

/** The whole fleet as it stands. /live keeps it fresh; the slow refetch is for who has acknowledged what. */
export const fleetQuery = (initial: FleetNow) =>
  queryOptions({
    queryKey: fleetKey,
    queryFn: ({ signal }) => api<Sent<FleetNow>>(paths.api.fleet(), { signal }).then(received),
    initialData: initial,
    refetchInterval: 60_000,
  });

/** The fleet after a change from /live, as of `at`. */
export function changedFleet(fleet: FleetNow, change: Change, at: string): FleetNow {
  return {
    ...fleet,
    at,
    sites: replaced(fleet.sites, change.sites, (s) => s.id),
    causes: causesAfter(fleet.causes, change),
  };
}

/** The fleet after somebody here took a cause on. */
export function withAcknowledgement(fleet: FleetNow, reply: AcknowledgeReply): FleetNow {
  return {
    ...fleet,
    acknowledgements: replaced(fleet.acknowledgements, [reply.acknowledgement], (a) => a.key),
    contacts: replaced(fleet.contacts, [reply.contact], (c) => c.siteId),
  };
}

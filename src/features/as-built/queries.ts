import { queryOptions } from '@tanstack/react-query';
import { api } from '../../lib/api';
import type {
  AsBuilt,
  PartAdd,
  PartAdded,
  PartChange,
  PlacedCounts,
  PlacementsBody,
} from '../../schemas/api/as-built';
import type { PartKind } from '../../domain/commissioning/as-built/parts';
import { paths } from '../../schemas/paths';

export const asBuiltKey = (site: string) => ['as-built', site] as const;

/** The as-built as it stands; read again when somebody comes back to the page. */
export const asBuiltQuery = (initial: AsBuilt) =>
  queryOptions({
    queryKey: asBuiltKey(initial.site.id),
    queryFn: ({ signal }) => api<AsBuilt>(paths.api.asBuilt(initial.site.id), { signal }),
    initialData: initial,
    staleTime: 10_000,
    refetchOnWindowFocus: true,
  });

export const readAsBuilt = (site: string): Promise<AsBuilt> => api<AsBuilt>(paths.api.asBuilt(site));

export const addPart = (site: string, body: PartAdd): Promise<PartAdded> =>
  api<PartAdded>(paths.api.asBuiltParts(site), { method: 'POST', body });

export const changePart = (site: string, part: string, body: PartChange): Promise<void> =>
  api<void>(paths.api.asBuiltPart(site, part), { method: 'PATCH', body });

export const removePart = (
  site: string,
  part: string,
  body: { kind: Exclude<PartKind, 'site'>; reason: string },
): Promise<void> => api<void>(paths.api.asBuiltPart(site, part), { method: 'DELETE', body });

export const makeToken = (site: string, logger: string, reason: string): Promise<{ token: string }> =>
  api<{ token: string }>(paths.api.loggerToken(site, logger), { method: 'POST', body: { reason } });

export const saveSlots = (site: string, body: PlacementsBody): Promise<PlacedCounts> =>
  api<PlacedCounts>(paths.api.placements(site), { method: 'POST', body });

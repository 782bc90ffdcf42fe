import { paths } from '../../schemas/paths';
import { searchQuery, type SearchReply } from '../../schemas/api/search';
import { endpoint } from '../../server/http/endpoint';
import { search, type SearchRow } from '../../server/queries/search';
import { searchHits } from '../../words/shell';

const PER_KIND = 4;
type Result = SearchReply['results'][number];

function hit(row: SearchRow): Result {
  if (row.kind === 'site' || !row.stringRef)
    return { kind: 'site', label: row.siteName, where: row.place, href: paths.site(row.siteRef) };
  const href = paths.string(row.siteRef, row.stringRef);
  if (row.kind === 'string')
    return { kind: 'string', label: searchHits.string(row.stringName), where: row.siteName, href };
  return {
    kind: 'unit',
    label: row.serial ?? '',
    where: searchHits.unitAt(row.siteName, row.stringName, row.position),
    href: `${href}#position-${row.position ?? ''}`,
  };
}

export const GET = endpoint(
  { permission: 'fleet.read', query: searchQuery },
  async ({ tx, query }): Promise<SearchReply> => ({
    results: (await search(tx, query.q, PER_KIND)).map(hit),
  }),
);

import type { Tx } from '../db/transaction';
import { SITE_VISIBLE } from './visible-site';

/** The open case about each of some strings, the newest; by the string's public identifier. */
export async function openCasesByString(
  tx: Tx,
  stringRefs: readonly string[],
): Promise<Map<string, { id: string; number: number }>> {
  const { rows } = await tx.raw<{ rows: { string: string; id: string; number: number }[] }>(
    `select distinct on (s.id) s.ref as string, f.ref as id, f.number
     from string s join site on site.id = s.site_id
     join case_file f on f.site_id = s.site_id and f.closed_at is null and f.string_ids @> array[s.id]
     where s.ref = any (:stringRefs::uuid[]) and ${SITE_VISIBLE} order by s.id, f.opened_at desc`,
    { stringRefs: [...stringRefs] },
  );
  return new Map(rows.map(({ string, ...file }) => [string, file]));
}

import type { Tx } from '../db/transaction';
import { SITE_VISIBLE } from './visible-site';

export interface SearchRow {
  kind: 'site' | 'string' | 'unit';
  siteRef: string;
  siteName: string;
  place: string;
  stringRef: string | null;
  stringName: string | null;
  serial: string | null;
  position: number | null;
}

/** A prefix for `like`, with what `like` would read as a pattern made plain. */
export const likePrefix = (text: string): string => `${text.replace(/[\\%_]/g, '\\$&')}%`;

/** Sorts after whatever a serial or a name may go on with. */
const LAST_CHARACTER = '\u{10ffff}';
/** So many strings that begin so are looked at for the best ones: every site may have an A1. */
const STRINGS_LOOKED_AT = 400;

/** One string after the other by its number: a join of all of them with what is visible would look at every string. */
const STRINGS_NAMED = `(select strings_named(:name, :nameEnd, :looked) as id offset 0) found
      cross join lateral (
        select site.ref as site_ref, site.name as site, site.place, s.ref, s.name
        from string s join site on site.id = s.site_id
        where s.id = found.id and ${SITE_VISIBLE} limit 1) x`;
const STRINGS_AT_SITE = `(
        select site.ref as site_ref, site.name as site, site.place, s.ref, s.name
        from string s join site on site.id = s.site_id
        where ${SITE_VISIBLE} and upper(s.name) like upper(:last) and site.beginnings like '% ' || lower(:site)) x`;

/**
 * Sites by the beginning of any word of their name or place, strings by the beginning of theirs ("B3", or "Kestrel B3"
 * within sites that are found so), units by the beginning of their serial. Serials and names of strings go by index in
 * their order, looked up until there are enough: written as bounds, since behind row-level security `like` may not choose
 * rows (it is not leakproof), and a short beginning would match every unit there is. Strings of a named site are few.
 */
export async function search(tx: Tx, text: string, limit: number): Promise<SearchRow[]> {
  const words = text.split(/\s+/).filter(Boolean);
  const last = words.at(-1) ?? '';
  const withSite = words.slice(0, -1).join(' ');
  const { rows } = await tx.raw<{ rows: SearchRow[] }>(
    `(select 'site' as kind, site.ref as "siteRef", site.name as "siteName", site.place, null::uuid as "stringRef",
             null as "stringName", null as serial, null::int as position
      from site
      where ${SITE_VISIBLE} and site.beginnings like '% ' || lower(:whole)
      order by lower(site.name) not like lower(:whole), site.name limit :limit)
     union all
     (select 'string', x.site_ref, x.site, x.place, x.ref, x.name, null, null
      from ${withSite === '' ? STRINGS_NAMED : STRINGS_AT_SITE}
      order by length(x.name), x.name, x.site limit :limit)
     union all
     (select 'unit', x.ref, x.site, x.place, x."stringRef", x.string, u.serial, x.position
      from (select id, serial from unit
            where organisation_id = (select actor_organisation()) and serial ~>=~ :serial and serial ~<~ :serialEnd
            order by serial using ~<~ offset 0) u
      cross join lateral (
        select site.ref, site.name as site, site.place, s.ref as "stringRef", s.name as string, slot.position
        from placement p join slot on slot.id = p.slot_id join string s on s.id = slot.string_id
          join site on site.id = s.site_id
        where p.unit_id = u.id and p.placed_to is null and ${SITE_VISIBLE} limit 1) x
      order by u.serial using ~<~ limit :limit)`,
    {
      whole: likePrefix(words.join(' ')),
      last: likePrefix(last),
      name: last.toUpperCase(),
      nameEnd: `${last.toUpperCase()}${LAST_CHARACTER}`,
      looked: STRINGS_LOOKED_AT,
      site: likePrefix(withSite),
      serial: text.toUpperCase(),
      serialEnd: `${text.toUpperCase()}${LAST_CHARACTER}`,
      limit,
    },
  );
  return rows;
}

import type { CaseKind, CaseOrigin, CaseState, CheckOutcome } from '../../domain/cases/cases';
import type { Tx } from '../db/transaction';
import { SITE_VISIBLE } from './visible-site';

/** Cases as lists for other programs: from a key on, one row further than asked for. */
export interface CaseRow {
  id: string;
  number: number;
  title: string;
  kind: CaseKind;
  origin: CaseOrigin;
  state: CaseState;
  siteId: string;
  siteName: string;
  strings: { id: string; name: string }[];
  assignee: { id: string; name: string } | null;
  dueOn: string | null;
  openedAt: Date;
  changedAt: Date;
  closedAt: Date | null;
  outcome: CheckOutcome | null;
}

/** By number within the organisation, the newest first. */
export async function casesFrom(
  tx: Tx,
  filter: {
    site?: string | undefined;
    string?: string | undefined;
    state?: string | undefined;
    open?: boolean | undefined;
  },
  after: number | null,
  rows: number,
): Promise<CaseRow[]> {
  const found = await tx.raw<{ rows: CaseRow[] }>(
    `select c.ref as id, c.number, c.title, c.kind, c.origin, c.state, site.ref as "siteId", site.name as "siteName",
            coalesce((select json_agg(json_build_object('id', s.ref, 'name', s.name) order by s.name)
                      from string s where s.id = any (c.string_ids)), '[]') as strings,
            case when a.id is null then null else json_build_object('id', a.ref, 'name', a.name) end as assignee,
            c.due_on::text as "dueOn", c.opened_at as "openedAt", c.changed_at as "changedAt", c.closed_at as "closedAt",
            c.after ->> 'outcome' as outcome
     from case_file c join site on site.id = c.site_id left join person a on a.id = c.assignee_id
     where ${SITE_VISIBLE} and (:site::uuid is null or site.ref = :site) and (:state::text is null or c.state = :state)
       and (:string::uuid is null or exists (select from string s where s.ref = :string and s.id = any (c.string_ids)))
       and (:open::boolean is null or (c.closed_at is null) = :open)
       and (:after::int4 is null or c.number < :after)
     order by c.number desc limit :rows`,
    {
      site: filter.site ?? null,
      string: filter.string ?? null,
      state: filter.state ?? null,
      open: filter.open ?? null,
      after,
      rows,
    },
  );
  return found.rows;
}

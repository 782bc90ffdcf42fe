import type { HistoryItem, Stay } from '../../schemas/api/as-built';
import type { Tx } from '../db/transaction';
import { SITE_VISIBLE } from './visible-site';

/** Who changed what of an as-built, when and why: entries of the audit trail, and where units have been. */

export interface HistoryFilter {
  kind: 'all' | 'units' | 'strings' | 'parts' | 'site';
  /** Text that the entry has: a serial, a name, a reason. */
  find: string;
  /** Public identifiers; empty: everybody, every string. */
  person: string;
  string: string;
  /** Older than this entry; absent: from the newest on. */
  before?: number | undefined;
  limit: number;
}

const KINDS: Record<HistoryFilter['kind'], string> = {
  all: `a.action like 'as\\_built.%'`,
  units: `a.action like 'as\\_built.unit\\_%'`,
  strings: `(a.action like 'as\\_built.string\\_%' or a.action like 'as\\_built.slots\\_%')`,
  site: `a.action like 'as\\_built.site\\_%'`,
  parts: `a.action like 'as\\_built.%' and a.action not like all (array['as\\_built.unit\\_%', 'as\\_built.string\\_%',
    'as\\_built.slots\\_%', 'as\\_built.site\\_%'])`,
};

export async function historyItems(tx: Tx, siteId: number, filter: HistoryFilter): Promise<HistoryItem[]> {
  const { rows } = await tx.raw<{
    rows: {
      id: number;
      at: Date;
      person: string | null;
      action: string;
      subject: string;
      before: Record<string, unknown> | null;
      after: Record<string, unknown> | null;
      reason: string;
    }[];
  }>(
    `select a.id, a.at, p.name as person, a.action, a.subject, a.before, a.after, a.reason
     from audit_entry a left join person p on p.id = a.person_id
     where a.site_id = :siteId and ${KINDS[filter.kind]}
       and (:before::int8 is null or a.id < :before::int8)
       and (:person = '' or p.ref::text = :person)
       and (:string = '' or a.string_id = (select id from string where ref::text = :string) or a.subject = 'string ' || :string)
       and (:find = '' or a.reason ilike :like or a.subject ilike :like or a.before::text ilike :like or a.after::text ilike :like)
     order by a.id desc limit :limit`,
    {
      siteId,
      before: filter.before ?? null,
      person: filter.person,
      string: filter.string,
      find: filter.find,
      like: `%${filter.find.replace(/[\\%_]/g, '\\$&')}%`,
      limit: filter.limit,
    },
  );
  return rows.map(({ id, at, person, action, subject, before, after, reason }) => {
    const { of, source, ...rest } = after ?? {};
    return {
      id,
      at: at.toISOString(),
      person,
      action: action.replace('as_built.', ''),
      of: typeof of === 'string' ? of : subject,
      before: before ?? {},
      after: rest,
      reason,
      source: typeof source === 'string' ? source : null,
    };
  });
}

/** Everybody who has changed something of the as-built of a site. */
export async function historyPeople(tx: Tx, siteId: number): Promise<{ id: string; name: string }[]> {
  const { rows } = await tx.raw<{ rows: { id: string; name: string }[] }>(
    `select p.ref as id, p.name from person p
     where p.id in (select a.person_id from audit_entry a where a.site_id = ? and a.action like 'as\\_built.%')
     order by p.name`,
    [siteId],
  );
  return rows;
}

/** Where a unit has been, oldest first, at all sites that the actor sees. */
export async function staysOf(tx: Tx, organisationId: number, serial: string): Promise<Stay[]> {
  const { rows } = await tx.raw<{ rows: (Omit<Stay, 'from' | 'to'> & { from: Date; to: Date | null })[] }>(
    `select u.serial, t.name as "unitType", site.name as site, site.ref as "siteId", s.name as string, s.ref as "stringId",
            slot.position, p.placed_from as "from", p.placed_to as "to"
     from unit u join unit_type t on t.id = u.unit_type_id
     join placement p on p.unit_id = u.id join slot on slot.id = p.slot_id
     join string s on s.id = slot.string_id join site on site.id = slot.site_id
     where u.organisation_id = :organisationId and u.serial = :serial and ${SITE_VISIBLE}
     order by p.placed_from`,
    { organisationId, serial },
  );
  return rows.map((r) => ({ ...r, from: r.from.toISOString(), to: r.to?.toISOString() ?? null }));
}

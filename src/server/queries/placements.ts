import type { KnownUnit, StandingSlot } from '../../domain/commissioning/as-built/plan-placements';
import { slotKey } from '../../domain/commissioning/as-built/plan-placements';
import type { Tx } from '../db/transaction';
import { SITE_VISIBLE } from './visible-site';

/** Units in slots: what stands, and the few statements that change it, each for any number of slots. */

/**
 * Waits for whoever changes the as-built of these sites, and keeps others waiting until this transaction ends. Always
 * all sites at once, so that two who move units between the same sites never wait for each other.
 */
export async function lockAsBuilt(tx: Tx, siteIds: readonly number[]): Promise<void> {
  await tx.raw('select from site where id = any (?::int4[]) order by id for no key update', [
    [...new Set(siteIds)],
  ]);
}

/** The named slots of a site as they stand, by slotKey. */
export async function standingSlots(
  tx: Tx,
  siteId: number,
  slots: readonly { string: string; position: number }[],
): Promise<Map<string, StandingSlot>> {
  const { rows } = await tx.raw<{
    rows: {
      string: string;
      slotId: number;
      stringId: number;
      stringName: string;
      position: number;
      unitTypeId: number;
      unitTypeName: string;
      placementId: number | null;
      unitId: number | null;
      serial: string | null;
      sinceMs: number;
    }[];
  }>(
    `with wanted as (
       select distinct string, position from unnest(:strings::uuid[], :positions::int4[]) w(string, position))
     select s.ref as string, slot.id as "slotId", s.id as "stringId", s.name as "stringName", slot.position,
            s.unit_type_id as "unitTypeId", t.name as "unitTypeName",
            p.id as "placementId", u.id as "unitId", u.serial,
            coalesce((extract(epoch from greatest(p.placed_from, ended.at)) * 1000)::float8, 0) as "sinceMs"
     from wanted w
     join string s on s.ref = w.string and s.site_id = :siteId
     join slot on slot.string_id = s.id and slot.position = w.position
     join unit_type t on t.id = s.unit_type_id
     left join placement p on p.slot_id = slot.id and p.placed_to is null
     left join unit u on u.id = p.unit_id
     left join (select slot_id, max(placed_to) as at from placement where site_id = :siteId group by slot_id) ended
       on ended.slot_id = slot.id`,
    { siteId, strings: slots.map((s) => s.string), positions: slots.map((s) => s.position) },
  );
  return new Map(
    rows.map((r) => [
      slotKey(r.string, r.position),
      {
        slotId: r.slotId,
        stringId: r.stringId,
        stringName: r.stringName,
        position: r.position,
        unitTypeId: r.unitTypeId,
        unitTypeName: r.unitTypeName,
        unit:
          r.placementId !== null && r.unitId !== null && r.serial !== null
            ? { placementId: r.placementId, unitId: r.unitId, serial: r.serial }
            : null,
        sinceMs: r.sinceMs,
      },
    ]),
  );
}

/** Who last changed what sits in these slots, by slot in words (`B3-9`). */
export async function lastChangers(
  tx: Tx,
  siteId: number,
  slotNames: readonly string[],
): Promise<Map<string, { name: string; at: Date }>> {
  const { rows } = await tx.raw<{ rows: { slot: string; name: string; at: Date }[] }>(
    `select distinct on (a.after ->> 'of') a.after ->> 'of' as slot, p.name, a.at
     from audit_entry a join person p on p.id = a.person_id
     where a.site_id = :siteId and a.action like 'as_built.unit_%' and a.after ->> 'of' = any (:slotNames::text[])
     order by a.after ->> 'of', a.id desc`,
    { siteId, slotNames: [...slotNames] },
  );
  return new Map(rows.map((r) => [r.slot, { name: r.name, at: r.at }]));
}

/** The organisation's units with these serials, and where each sits; a site that the actor may not see is not named. */
export async function knownUnits(
  tx: Tx,
  organisationId: number,
  serials: readonly string[],
): Promise<Map<string, KnownUnit>> {
  if (serials.length === 0) return new Map();
  const { rows } = await tx.raw<{
    rows: {
      unitId: number;
      serial: string;
      unitTypeId: number;
      unitTypeName: string;
      placementId: number | null;
      slotId: number | null;
      siteId: number | null;
      siteName: string | null;
      stringId: number | null;
      stringName: string | null;
      position: number | null;
      sinceMs: number;
    }[];
  }>(
    `select u.id as "unitId", u.serial, u.unit_type_id as "unitTypeId", t.name as "unitTypeName",
            p.id as "placementId", seen.slot_id as "slotId", seen.site_id as "siteId", seen.site as "siteName",
            seen.string_id as "stringId", seen.string as "stringName", seen.position,
            coalesce((extract(epoch from greatest(p.placed_from, ended.at)) * 1000)::float8, 0) as "sinceMs"
     from unit u
     join unit_type t on t.id = u.unit_type_id
     -- unit by unit: thousands that have just been placed are not in the planner's statistics yet
     left join lateral (select p.id, p.slot_id, p.placed_from from placement p
                        where p.unit_id = u.id and p.placed_to is null limit 1) p on true
     left join lateral (select slot.id as slot_id, slot.position, s.id as string_id, s.name as string, site.id as site_id, site.name as site
                        from slot join string s on s.id = slot.string_id join site on site.id = slot.site_id
                        where slot.id = p.slot_id and ${SITE_VISIBLE} limit 1) seen on true
     left join lateral (select max(e.placed_to) as at from placement e where e.unit_id = u.id) ended on true
     where u.organisation_id = :organisationId and u.serial = any (:serials::text[])`,
    { organisationId, serials: [...serials] },
  );
  return new Map(
    rows.map((r) => [
      r.serial,
      {
        unitId: r.unitId,
        serial: r.serial,
        unitTypeId: r.unitTypeId,
        unitTypeName: r.unitTypeName,
        sits:
          r.placementId === null
            ? null
            : {
                placementId: r.placementId,
                slotId: r.slotId,
                siteId: r.siteId,
                siteName: r.siteName,
                stringId: r.stringId,
                stringName: r.stringName,
                position: r.position,
              },
        sinceMs: r.sinceMs,
      },
    ]),
  );
}

export async function retypeUnits(
  tx: Tx,
  units: readonly { unitId: number; unitTypeId: number }[],
): Promise<void> {
  if (units.length === 0) return;
  await tx.raw(
    `update unit set unit_type_id = x.type from unnest(?::int4[], ?::int4[]) x(id, type) where unit.id = x.id`,
    [units.map((u) => u.unitId), units.map((u) => u.unitTypeId)],
  );
}

export async function closePlacements(tx: Tx, placementIds: readonly number[], at: Date): Promise<void> {
  if (placementIds.length === 0) return;
  await tx.raw('update placement set placed_to = ? where id = any (?::int4[]) and placed_to is null', [
    at.toISOString(),
    [...placementIds],
  ]);
}

/** Puts units into slots; serials that the organisation does not have on record become its units. */
export async function openPlacements(
  tx: Tx,
  where: { siteId: number; organisationId: number; at: Date },
  opens: readonly { slotId: number; serial: string; unitTypeId: number }[],
): Promise<void> {
  if (opens.length === 0) return;
  const { siteId, organisationId, at } = where;
  const serials = opens.map((o) => o.serial);
  await tx.raw(
    `insert into unit (organisation_id, unit_type_id, serial)
     select ?, type, serial from unnest(?::int4[], ?::text[]) x(type, serial)
     on conflict (organisation_id, serial) do nothing`,
    [organisationId, opens.map((o) => o.unitTypeId), serials],
  );
  await tx.raw(
    `insert into placement (site_id, unit_id, slot_id, placed_from)
     select ?, u.id, x.slot_id, ? from unnest(?::int4[], ?::text[]) x(slot_id, serial)
     join unit u on u.organisation_id = ? and u.serial = x.serial`,
    [siteId, at.toISOString(), opens.map((o) => o.slotId), serials, organisationId],
  );
}

/** What was heard at a site belongs to the units that now sit there; what has left belongs to none. */
export async function claimHeard(
  tx: Tx,
  where: { siteId: number; organisationId: number },
  serials: { here: readonly string[]; gone: readonly string[] },
): Promise<void> {
  const { siteId, organisationId } = where;
  if (serials.here.length > 0)
    await tx.raw(
      `update heard set unit_id = u.id from unit u
       where heard.site_id = ? and heard.serial = any (?::text[]) and u.organisation_id = ? and u.serial = heard.serial
         and heard.unit_id is distinct from u.id`,
      [siteId, [...serials.here], organisationId],
    );
  if (serials.gone.length > 0)
    await tx.raw(
      `update heard set unit_id = null where site_id = ? and serial = any (?::text[]) and unit_id is not null`,
      [siteId, [...serials.gone]],
    );
}

/** Units and slots of a string, for what concerns all of them. */
export async function unitsInString(
  tx: Tx,
  stringId: number,
): Promise<{ position: number; serial: string; unitId: number }[]> {
  const { rows } = await tx.raw<{ rows: { position: number; serial: string; unitId: number }[] }>(
    `select slot.position, u.serial, u.id as "unitId" from slot
     join placement p on p.slot_id = slot.id and p.placed_to is null join unit u on u.id = p.unit_id
     where slot.string_id = ? order by slot.position`,
    [stringId],
  );
  return rows;
}

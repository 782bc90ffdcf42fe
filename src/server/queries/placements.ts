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

/**
 * The named slots of a site as they stand, by slotKey. In three plain statements that are put together here: a planner
 * without statistics, as after a large import, has no joins to get wrong.
 */
export async function standingSlots(
  tx: Tx,
  siteId: number,
  slots: readonly { string: string; position: number }[],
): Promise<Map<string, StandingSlot>> {
  const wanted = new Set(slots.map((s) => slotKey(s.string, s.position)));
  const { rows: all } = await tx.raw<{
    rows: (Omit<StandingSlot, 'unit' | 'sinceMs'> & { string: string })[];
  }>(
    `select s.ref as string, slot.id as "slotId", s.id as "stringId", s.name as "stringName", slot.position,
            s.unit_type_id as "unitTypeId", t.name as "unitTypeName"
     from string s join slot on slot.string_id = s.id join unit_type t on t.id = s.unit_type_id
     where s.site_id = ? and s.ref = any (?::uuid[])`,
    [siteId, [...new Set(slots.map((s) => s.string))]],
  );
  const rows = all.filter((r) => wanted.has(slotKey(r.string, r.position)));
  const ids = rows.map((r) => r.slotId);
  const { rows: units } = await tx.raw<{
    rows: { slotId: number; placementId: number; unitId: number; serial: string; sinceMs: number }[];
  }>(
    `select p.slot_id as "slotId", p.id as "placementId", u.id as "unitId", u.serial,
            (extract(epoch from p.placed_from) * 1000)::float8 as "sinceMs"
     from placement p join unit u on u.id = p.unit_id where p.slot_id = any (?::int4[]) and p.placed_to is null`,
    [ids],
  );
  const { rows: ended } = await tx.raw<{ rows: { id: number; sinceMs: number }[] }>(
    `select slot_id as id, (extract(epoch from max(placed_to)) * 1000)::float8 as "sinceMs"
     from placement where slot_id = any (?::int4[]) and placed_to is not null group by slot_id`,
    [ids],
  );
  const unitOf = new Map(units.map((u) => [u.slotId, u]));
  const endedOf = new Map(ended.map((e) => [e.id, e.sinceMs]));
  return new Map(
    rows.map(({ string, ...slot }) => {
      const sits = unitOf.get(slot.slotId);
      return [
        slotKey(string, slot.position),
        {
          ...slot,
          unit: sits ? { placementId: sits.placementId, unitId: sits.unitId, serial: sits.serial } : null,
          sinceMs: Math.max(sits?.sinceMs ?? 0, endedOf.get(slot.slotId) ?? 0),
        },
      ];
    }),
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
  const { rows: units } = await tx.raw<{ rows: Omit<KnownUnit, 'sits' | 'sinceMs'>[] }>(
    `select u.id as "unitId", u.serial, u.unit_type_id as "unitTypeId", t.name as "unitTypeName"
     from unit u join unit_type t on t.id = u.unit_type_id
     where u.organisation_id = ? and u.serial = any (?::text[])`,
    [organisationId, [...serials]],
  );
  const ids = units.map((u) => u.unitId);
  const { rows: placed } = await tx.raw<{
    rows: (NonNullable<KnownUnit['sits']> & { unitId: number; sinceMs: number; seen: boolean })[];
  }>(
    `select p.unit_id as "unitId", p.id as "placementId", p.slot_id as "slotId", p.site_id as "siteId",
            site.name as "siteName", s.id as "stringId", s.name as "stringName", slot.position,
            (extract(epoch from p.placed_from) * 1000)::float8 as "sinceMs", coalesce(${SITE_VISIBLE}, false) as seen
     from placement p
     left join slot on slot.id = p.slot_id left join string s on s.id = slot.string_id left join site on site.id = p.site_id
     where p.unit_id = any (?::int4[]) and p.placed_to is null`,
    [ids],
  );
  const { rows: ended } = await tx.raw<{ rows: { id: number; sinceMs: number }[] }>(
    `select unit_id as id, (extract(epoch from max(placed_to)) * 1000)::float8 as "sinceMs"
     from placement where unit_id = any (?::int4[]) and placed_to is not null group by unit_id`,
    [ids],
  );
  const placedOf = new Map(placed.map((p) => [p.unitId, p]));
  const endedOf = new Map(ended.map((e) => [e.id, e.sinceMs]));
  return new Map(
    units.map((unit) => {
      const place = placedOf.get(unit.unitId);
      return [
        unit.serial,
        {
          ...unit,
          sits: place ? sitsOf(place) : null,
          sinceMs: Math.max(place?.sinceMs ?? 0, endedOf.get(unit.unitId) ?? 0),
        },
      ];
    }),
  );
}

function sitsOf(place: NonNullable<KnownUnit['sits']> & { seen: boolean }): NonNullable<KnownUnit['sits']> {
  const { placementId, slotId, siteId, siteName, stringId, stringName, position } = place;
  return place.seen
    ? { placementId, slotId, siteId, siteName, stringId, stringName, position }
    : {
        placementId,
        slotId: null,
        siteId: null,
        siteName: null,
        stringId: null,
        stringName: null,
        position: null,
      };
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
     -- in order: two who enter the same serials at two sites never wait for each other
     select ?, type, serial from unnest(?::int4[], ?::text[]) x(type, serial) order by serial
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

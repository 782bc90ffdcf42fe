import { z } from 'zod';
import type { StandingSlot } from '../../domain/commissioning/import/plan';
import type { KnownNames } from '../../domain/commissioning/import/table';
import { UNIT_KINDS } from '../../domain/equipment/unit-type';
import type { Tx } from '../db/transaction';

/** What a site has under which name, and the public identifiers behind the names. */

const named = z.object({ ref: z.string(), name: z.string() });
const parts = z.object({
  planes: z.array(named),
  zones: z.array(named),
  loggers: z.array(named),
  transmitters: z.array(named),
  inputs: z.array(z.object({ ref: z.string(), inverter: z.string(), number: z.int() })),
  unitTypes: z.array(named.extend({ kind: z.enum(UNIT_KINDS) })),
  moduleTypes: z.array(named),
  strings: z.array(
    z.object({
      ref: z.string(),
      name: z.string(),
      slots: z.int(),
      plane: z.string(),
      inverter: z.string(),
      input: z.int(),
      zone: z.string(),
      unitType: z.string(),
      kind: z.enum(UNIT_KINDS),
      logger: z.string().nullable(),
      transmitters: z.array(z.string()),
      /** The module type that its slots have most of. */
      moduleType: z.string().nullable(),
    }),
  ),
});
export type ImportParts = z.infer<typeof parts>;

/** Types that are archived can be named only where they stand already. */
const PARTS = `
select json_build_object(
  'planes', coalesce((select json_agg(json_build_object('ref', ref, 'name', name) order by name) from plane where site_id = :siteId), '[]'),
  'zones', coalesce((select json_agg(json_build_object('ref', ref, 'name', name) order by name) from zone where site_id = :siteId), '[]'),
  'loggers', coalesce((select json_agg(json_build_object('ref', ref, 'name', serial) order by serial) from logger where site_id = :siteId), '[]'),
  'transmitters', coalesce((select json_agg(json_build_object('ref', ref, 'name', name) order by name) from transmitter where site_id = :siteId), '[]'),
  'inputs', coalesce((select json_agg(json_build_object('ref', i.ref, 'inverter', v.name, 'number', i.number) order by v.name, i.number)
    from input i join inverter v on v.id = i.inverter_id where i.site_id = :siteId), '[]'),
  'unitTypes', coalesce((select json_agg(json_build_object('ref', t.ref, 'name', t.name, 'kind', t.kind) order by t.name)
    from unit_type t where t.organisation_id = :organisationId
      and (t.archived_at is null or exists (select from string s where s.site_id = :siteId and s.unit_type_id = t.id))), '[]'),
  'moduleTypes', coalesce((select json_agg(json_build_object('ref', t.ref, 'name', t.name) order by t.name)
    from module_type t where t.organisation_id = :organisationId
      and (t.archived_at is null or exists (select from slot where slot.site_id = :siteId and slot.module_type_id = t.id))), '[]'),
  'strings', coalesce((select json_agg(json_build_object(
      'ref', s.ref, 'name', s.name, 'slots', s.slots, 'plane', p.name, 'inverter', v.name, 'input', i.number, 'zone', z.name,
      'unitType', t.name, 'kind', s.kind, 'logger', l.serial,
      'transmitters', coalesce((select json_agg(x.name order by x.name) from transmitter_string ts
        join transmitter x on x.id = ts.transmitter_id where ts.string_id = s.id), '[]'),
      'moduleType', (select m.name from slot join module_type m on m.id = slot.module_type_id where slot.string_id = s.id
        group by m.name order by count(*) desc, m.name limit 1)) order by s.name)
    from string s join plane p on p.id = s.plane_id join input i on i.id = s.input_id join inverter v on v.id = i.inverter_id
      join zone z on z.id = s.zone_id join unit_type t on t.id = s.unit_type_id left join logger l on l.id = s.logger_id
    where s.site_id = :siteId), '[]')) as parts`;

export async function importParts(
  tx: Tx,
  site: { id: number; organisationId: number },
): Promise<ImportParts> {
  const { rows } = await tx.raw<{ rows: { parts: unknown }[] }>(PARTS, {
    siteId: site.id,
    organisationId: site.organisationId,
  });
  return parts.parse(rows[0]?.parts);
}

/** The same without identifiers: what a file may name. */
export const namesOf = (p: ImportParts): KnownNames => ({
  strings: p.strings.map(({ ref: _ref, moduleType: _type, ...s }) => s),
  planes: p.planes.map((x) => x.name),
  inputs: p.inputs.map(({ inverter, number }) => ({ inverter, number })),
  zones: p.zones.map((x) => x.name),
  loggers: p.loggers.map((x) => x.name),
  transmitters: p.transmitters.map((x) => x.name),
  unitTypes: p.unitTypes.map(({ name, kind }) => ({ name, kind })),
  moduleTypes: p.moduleTypes.map((x) => x.name),
});

/** The slots of the named strings of a site, with who sits there. */
export async function slotsOfStrings(
  tx: Tx,
  siteId: number,
  strings: readonly string[],
): Promise<StandingSlot[]> {
  const { rows } = await tx.raw<{ rows: StandingSlot[] }>(
    `select s.name as string, slot.position, u.serial, m.name as "moduleType", slot.roof_x as "roofX",
            slot.roof_y as "roofY", slot.roof_place as "roofPlace"
     from string s join slot on slot.string_id = s.id join module_type m on m.id = slot.module_type_id
       left join placement p on p.slot_id = slot.id and p.placed_to is null left join unit u on u.id = p.unit_id
     where s.site_id = ? and s.name = any (?::text[]) order by s.name, slot.position`,
    [siteId, [...strings]],
  );
  return rows;
}

import { z } from 'zod';
import { outlinePoints, roofSlot } from '../../schemas/api/roof';
import type { Tx } from '../db/transaction';

const facts = z.object({
  outline: outlinePoints.nullable().catch(null), // what is no outline is none
  strings: z.array(
    z.object({
      id: z.string(),
      name: z.string(),
      plane: z.string(),
      surfaceTilt: z.number(),
      surfaceAzimuth: z.number(),
      moduleLength: z.number(),
      moduleWidth: z.number(),
      slots: z.array(roofSlot),
    }),
  ),
});
export type RoofFacts = z.infer<typeof facts>;

/** The outline of a site's roof and where its strings lie, in the order of their names. */
export async function roofFacts(tx: Tx, siteId: number): Promise<RoofFacts> {
  const { rows } = await tx.raw<{ rows: { facts: unknown }[] }>(
    `select json_build_object(
       'outline', site.outline,
       'strings', coalesce((select json_agg(json_build_object(
           'id', s.ref, 'name', s.name, 'plane', p.name, 'surfaceTilt', p.surface_tilt, 'surfaceAzimuth', p.surface_azimuth,
           'moduleLength', m.length_m, 'moduleWidth', m.width_m, 'slots', m.slots) order by s.name)
         from string s join plane p on p.id = s.plane_id
         join lateral (
           select mode() within group (order by t.length_m) as length_m, mode() within group (order by t.width_m) as width_m,
             json_agg(json_build_object('position', slot.position, 'roofX', slot.roof_x, 'roofY', slot.roof_y,
               'roofPlace', slot.roof_place) order by slot.position) as slots
           from slot join module_type t on t.id = slot.module_type_id where slot.string_id = s.id having count(*) > 0) m on true
         where s.site_id = site.id), '[]')) as facts
     from site where site.id = ?`,
    [siteId],
  );
  return facts.parse(rows[0]?.facts);
}

export async function setOutline(
  tx: Tx,
  siteId: number,
  points: readonly (readonly [number, number])[],
): Promise<void> {
  await tx.raw('update site set outline = ?::jsonb where id = ?', [
    points.length === 0 ? null : JSON.stringify(points),
    siteId,
  ]);
}

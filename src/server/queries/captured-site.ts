import type { z } from 'zod';
import type { RuleSet } from '../../domain/verdicts/context';
import type { CaptureString, moduleTypeSheet, unitTypeSheet } from '../../schemas/api/capture';
import type { Tx } from '../db/transaction';

/** A site's strings and types as they are needed where checks and readings are recorded. */

export type UnitTypeSheet = z.infer<typeof unitTypeSheet>;
export type ModuleTypeSheet = z.infer<typeof moduleTypeSheet>;

export async function ruleSetOf(tx: Tx, siteId: number): Promise<RuleSet> {
  const { rows } = await tx.raw<{ rows: { ruleSet: RuleSet }[] }>(
    `select rule_set as "ruleSet" from site where id = ?`,
    [siteId],
  );
  return rows[0]?.ruleSet ?? 'none';
}

/** The unit types of a site's strings. */
export async function unitTypesOf(tx: Tx, siteId: number): Promise<UnitTypeSheet[]> {
  const { rows } = await tx.raw<{ rows: UnitTypeSheet[] }>(
    `select t.ref as id, t.name, t.kind, t.out_of_box as "outOfBox", t.released_by as "releasedBy",
            t.on_command_loss as "onCommandLoss", t.command_loss_after_s as "commandLossAfterS",
            json_build_object('nominal', t.shutdown_voltage_nominal, 'min', t.shutdown_voltage_min,
              'max', t.shutdown_voltage_max) as "shutdownVoltage",
            t.bypass_voltage as "bypassVoltage", t.measures, t.voltage_accuracy as "voltageAccuracy",
            t.current_accuracy as "currentAccuracy", t.voltage_in_max as "voltageInMax", t.current_max as "currentMax",
            t.insulation_test_max as "insulationTestMax", t.faces_allowed as "facesAllowed",
            i.ref as "connectorIn", o.ref as "connectorOut"
     from unit_type t
     left join connector_type i on i.id = t.connector_in_id left join connector_type o on o.id = t.connector_out_id
     where t.id in (select unit_type_id from string where site_id = ?) order by t.name`,
    [siteId],
  );
  return rows;
}

/** The module types of a site's slots. */
export async function moduleTypesOf(tx: Tx, siteId: number): Promise<ModuleTypeSheet[]> {
  const { rows } = await tx.raw<{ rows: ModuleTypeSheet[] }>(
    `select m.ref as id, m.name, m.voc_ref as "vocRef", m.isc_ref as "iscRef", m.vmp_ref as "vmpRef",
            m.imp_ref as "impRef", m.beta_voc as "betaVoc", m.alpha_isc as "alphaIsc", m.gamma_pmp as "gammaPmp",
            m.cells_in_series as "cellsInSeries", m.bypass_groups as "bypassGroups", m.noct, c.ref as connector
     from module_type m left join connector_type c on c.id = m.connector_type_id
     where m.id in (select module_type_id from slot where site_id = ?) order by m.name`,
    [siteId],
  );
  return rows;
}

export type StringSheet = Omit<CaptureString, 'checks' | 'readings' | 'signOff' | 'fingerprint'> & {
  dbId: number;
};

/**
 * The strings of a site by name; `heard` counts units that had answered by `at`. What is in force: its zone's last
 * command, then its transmitters'; a string that hears one of two that disagree: unknown. A string without slots has
 * no module type and is left out: there is nothing to check.
 */
export async function stringSheets(tx: Tx, siteId: number, at: Date): Promise<StringSheet[]> {
  const { rows } = await tx.raw<{ rows: StringSheet[] }>(
    `with built as (
       select sl.string_id, mode() within group (order by sl.module_type_id) as module_type_id,
              count(h.serial)::int as heard,
              json_agg(u.serial order by sl.position) as serials, count(*)::int as slots
       from slot sl
       left join placement p on p.slot_id = sl.id and p.placed_to is null
       left join unit u on u.id = p.unit_id
       left join heard h on h.unit_id = p.unit_id and h.site_id = sl.site_id and h.first_heard_at <= :at
       where sl.site_id = :siteId group by sl.string_id
     ), said as (
       select distinct on (zone_id, transmitter_id) zone_id, transmitter_id, in_force
       from command where site_id = :siteId and since <= :at order by zone_id, transmitter_id, since desc
     )
     select s.id as "dbId", s.ref as id, s.name, b.slots as units, b.serials, ut.ref as "unitTypeId",
            m.ref as "moduleTypeId", p.name as plane, z.name as zone, b.heard,
            json_build_object('inverter', v.name, 'number', i.number, 'strings',
              count(*) over (partition by s.input_id)) as input,
            case when zs.in_force <> 'released' then 'shutdown'
                 when ts.off = ts.known and ts.known > 0 then 'shutdown'
                 when ts.off > 0 then 'unknown'
                 when zs.in_force = 'released' or ts.known > 0 then 'released'
                 else 'unknown' end as commanded
     from string s
     join built b on b.string_id = s.id
     join unit_type ut on ut.id = s.unit_type_id
     join module_type m on m.id = b.module_type_id
     join plane p on p.id = s.plane_id
     join zone z on z.id = s.zone_id
     join input i on i.id = s.input_id join inverter v on v.id = i.inverter_id
     left join said zs on zs.zone_id = s.zone_id
     left join lateral (
       select count(*)::int as known, count(*) filter (where said.in_force <> 'released')::int as off
       from transmitter_string t join said on said.transmitter_id = t.transmitter_id where t.string_id = s.id
     ) ts on true
     where s.site_id = :siteId`,
    { siteId, at },
  );
  const order = new Intl.Collator('en', { numeric: true });
  return rows.sort((a, b) => order.compare(a.name, b.name));
}

/** A string of a site that the actor sees, locked so that its records follow one another. */
export async function lockString(
  tx: Tx,
  siteId: number,
  ref: string,
): Promise<{ id: number; name: string } | undefined> {
  const { rows } = await tx.raw<{ rows: { id: number; name: string }[] }>(
    `select id, name from string where ref = :ref and site_id = :siteId for no key update`,
    { ref, siteId },
  );
  return rows[0];
}

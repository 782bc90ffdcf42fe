import type { Knex } from 'knex';
import type { OrganisationPlan } from '../../simulator/plant/plan';
import { namedIds } from './rows';

/** The organisation's catalogue; numbers by name. */
export async function seedEquipment(
  db: Knex,
  organisation: OrganisationPlan,
  organisationId: number,
): Promise<{ moduleTypes: Map<string, number>; unitTypes: Map<string, number> }> {
  const moduleTypes = await namedIds(
    db,
    'module_type',
    {
      organisation_id: 'int4',
      name: 'text',
      voc_ref: 'real',
      isc_ref: 'real',
      vmp_ref: 'real',
      imp_ref: 'real',
      beta_voc: 'real',
      alpha_isc: 'real',
      gamma_pmp: 'real',
      cells_in_series: 'int2',
      bypass_groups: 'int2',
      noct: 'real',
    },
    organisation.moduleTypes.map((t) => ({
      organisation_id: organisationId,
      name: t.name,
      voc_ref: t.vocRef,
      isc_ref: t.iscRef,
      vmp_ref: t.vmpRef,
      imp_ref: t.impRef,
      beta_voc: t.betaVoc,
      alpha_isc: t.alphaIsc,
      gamma_pmp: t.gammaPmp,
      cells_in_series: t.cellsInSeries,
      bypass_groups: t.bypassGroups,
      noct: t.noct,
    })),
  );
  const unitTypes = await namedIds(
    db,
    'unit_type',
    {
      organisation_id: 'int4',
      name: 'text',
      kind: 'text',
      out_of_box: 'text',
      released_by: 'text',
      on_command_loss: 'text',
      command_loss_after_s: 'real',
      shutdown_voltage_nominal: 'real',
      shutdown_voltage_min: 'real',
      shutdown_voltage_max: 'real',
      bypass_voltage: 'real',
      measures: 'text',
      voltage_accuracy: 'real',
      current_accuracy: 'real',
      voltage_in_max: 'real',
      current_max: 'real',
      insulation_test_max: 'real',
      faces_allowed: 'text',
    },
    organisation.unitTypes.map((t) => ({
      organisation_id: organisationId,
      name: t.name,
      kind: t.kind,
      out_of_box: t.outOfBox,
      released_by: t.releasedBy,
      on_command_loss: t.onCommandLoss,
      command_loss_after_s: t.commandLossAfterS,
      shutdown_voltage_nominal: t.shutdownVoltage.nominal,
      shutdown_voltage_min: t.shutdownVoltage.min,
      shutdown_voltage_max: t.shutdownVoltage.max,
      bypass_voltage: t.bypassVoltage,
      measures: t.measures,
      voltage_accuracy: t.voltageAccuracy,
      current_accuracy: t.currentAccuracy,
      voltage_in_max: t.voltageInMax,
      current_max: t.currentMax,
      insulation_test_max: t.insulationTestMax,
      faces_allowed: t.facesAllowed,
    })),
  );
  return { moduleTypes, unitTypes };
}

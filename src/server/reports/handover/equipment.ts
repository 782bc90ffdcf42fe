import { number, quantity } from '../../../drawings/numbers';
import type { Paper } from '../pdf/paper';
import type { PackData } from './data';
import { kindWords } from './sections';
import { papersHandoverEquipment } from '../../../words/papers-handover';

/** Middle of the papers: equipment as the catalogue has it, and how the system is looked after. */

const percentPerK = (perK: number): string => quantity(perK * 100, '%/K', 2);

export function equipment(paper: Paper, data: PackData): void {
  paper.heading(papersHandoverEquipment.n5Equipment, 1);
  paper.text(papersHandoverEquipment.asEnteredInThe, {
    size: 9,
  });
  for (const m of data.moduleTypes) {
    paper.heading(papersHandoverEquipment.moduleName(m.name), 3);
    paper.facts([
      [
        papersHandoverEquipment.openCircuitMaximumPower,
        `${quantity(m.voc_ref, 'V', 1)}, ${quantity(m.vmp_ref, 'V', 1)}`,
      ],
      [
        papersHandoverEquipment.shortCircuitMaximumPower,
        `${quantity(m.isc_ref, 'A', 2)}, ${quantity(m.imp_ref, 'A', 2)}`,
      ],
      [
        papersHandoverEquipment.temperatureCoefficients,
        papersHandoverEquipment.vocPower(percentPerK(m.beta_voc), percentPerK(m.gamma_pmp)),
      ],
      [papersHandoverEquipment.cellsInSeries, number(m.cells_in_series)],
      [papersHandoverEquipment.greatestSystemVoltage, quantity(m.voltage_system_max, 'V')],
    ]);
  }
  for (const t of data.unitTypes) {
    paper.heading(papersHandoverEquipment.unitNameKind(t.name, kindWords(t.kind)), 3);
    paper.facts([
      [
        papersHandoverEquipment.outOfTheBox,
        t.out_of_box === 'passing'
          ? papersHandoverEquipment.passesFullModuleVoltage
          : papersHandoverEquipment.inShutdown,
      ],
      [
        papersHandoverEquipment.releasedBy,
        t.released_by === 'keep_alive'
          ? papersHandoverEquipment.keepAliveOnThe
          : papersHandoverEquipment.theLoggersCommand,
      ],
      [
        papersHandoverEquipment.whenTheCommandStops,
        t.on_command_loss === 'holds'
          ? papersHandoverEquipment.holdsItsState
          : papersHandoverEquipment.shutsDownAfter(t.command_loss_after_s),
      ],
      [
        papersHandoverEquipment.voltageInShutdown,
        papersHandoverEquipment.shutdownVoltageNominalShutdownVoltageMinToShutdownVoltageMax(
          t.shutdown_voltage_nominal,
          t.shutdown_voltage_min,
          t.shutdown_voltage_max,
        ),
      ],
      [
        papersHandoverEquipment.measures,
        t.measures === 'both' ? papersHandoverEquipment.inputAndOutput : t.measures,
      ],
      [
        papersHandoverEquipment.limits,
        papersHandoverEquipment.inputCurrentSystem(t.voltage_in_max, t.current_max, t.voltage_system_max),
      ],
      [
        papersHandoverEquipment.insulationTest,
        t.insulation_test_max === null
          ? papersHandoverEquipment.theMakerAllowsNone
          : papersHandoverEquipment.atMost(t.insulation_test_max),
      ],
    ]);
  }
  for (const t of data.inverterTypes) {
    paper.heading(papersHandoverEquipment.inverterName(t.name), 3);
    paper.facts([
      [papersHandoverEquipment.acPower, quantity(t.ac_power_max / 1000, 'kW', 1)],
      [papersHandoverEquipment.inputs, number(t.inputs)],
      [
        papersHandoverEquipment.voltage,
        papersHandoverEquipment.atMostTrackingTo(t.voltage_max, t.mppt_min, t.mppt_max),
      ],
      [
        papersHandoverEquipment.currentOfAnInput,
        papersHandoverEquipment.shortCircuit(t.current_max, t.isc_max),
      ],
    ]);
  }
  if (data.connectorTypes.length > 0) {
    paper.heading(papersHandoverEquipment.connectors, 3);
    paper.table(
      [
        { header: papersHandoverEquipment.name, share: 2 },
        { header: papersHandoverEquipment.maker, share: 2 },
        { header: papersHandoverEquipment.type, share: 2 },
        { header: papersHandoverEquipment.voltage, share: 1, align: 'right' },
        { header: papersHandoverEquipment.current, share: 1, align: 'right' },
      ],
      data.connectorTypes.map((c) => [
        c.name,
        c.maker,
        c.family,
        quantity(c.voltageMax, 'V'),
        quantity(c.currentMax, 'A'),
      ]),
    );
  }
}

export function operation(paper: Paper, data: PackData): void {
  const { site } = data;
  paper.heading(papersHandoverEquipment.n6OperationAndMaintenance, 1);
  paper.caution(papersHandoverEquipment.shutdownIsNotIsolation, papersHandoverEquipment.eachModuleAndIts);
  const steps = [
    papersHandoverEquipment.inAnEmergencyOperate(site.switchPlace),
    papersHandoverEquipment.afterAShutdownRelease,
    papersHandoverEquipment.wakelineWatchesAndNever,
    papersHandoverEquipment.aUnitThatIs,
    papersHandoverEquipment.exchangeOfAUnit,
    papersHandoverEquipment.repeatTheShutdownTest,
  ];
  for (const step of steps) paper.text(`–  ${step}`, { size: 9.5 });
  paper.text(
    papersHandoverEquipment.whoLooksAfterIt(
      [site.contactName, site.contactPhone].filter(Boolean).join(', '),
      site.organisation.name,
    ),
    { size: 9.5 },
  );
}

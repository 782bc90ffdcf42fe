import { number, quantity } from '../../../drawings/numbers';
import type { Paper } from '../pdf/paper';
import type { PackData } from './data';
import { kindWords } from './sections';

/** Middle of the papers: equipment as the catalogue has it, and how the system is looked after. */

const percentPerK = (perK: number): string => quantity(perK * 100, '%/K', 2);

export function equipment(paper: Paper, data: PackData): void {
  paper.heading('5  Equipment', 1);
  paper.text('As entered in the catalogue from the makers’ sheets; the sheets themselves decide.', {
    size: 9,
  });
  for (const m of data.moduleTypes) {
    paper.heading(`Module ${m.name}`, 3);
    paper.facts([
      ['Open circuit, maximum power', `${quantity(m.voc_ref, 'V', 1)}, ${quantity(m.vmp_ref, 'V', 1)}`],
      ['Short circuit, maximum power', `${quantity(m.isc_ref, 'A', 2)}, ${quantity(m.imp_ref, 'A', 2)}`],
      ['Temperature coefficients', `voc ${percentPerK(m.beta_voc)}, power ${percentPerK(m.gamma_pmp)}`],
      ['Cells in series', number(m.cells_in_series)],
      ['Greatest system voltage', quantity(m.voltage_system_max, 'V')],
    ]);
  }
  for (const t of data.unitTypes) {
    paper.heading(`Unit ${t.name}, ${kindWords(t.kind)}`, 3);
    paper.facts([
      ['Out of the box', t.out_of_box === 'passing' ? 'passes full module voltage' : 'in shutdown'],
      [
        'Released by',
        t.released_by === 'keep_alive' ? 'keep-alive on the DC conductors' : 'the logger’s command',
      ],
      [
        'When the command stops',
        t.on_command_loss === 'holds'
          ? 'holds its state'
          : `shuts down after ${number(t.command_loss_after_s)} s`,
      ],
      [
        'Voltage in shutdown',
        `${quantity(t.shutdown_voltage_nominal, 'V', 2)} (${number(t.shutdown_voltage_min, 2)} to ${number(t.shutdown_voltage_max, 2)} V)`,
      ],
      ['Measures', t.measures === 'both' ? 'input and output' : t.measures],
      [
        'Limits',
        `input ${quantity(t.voltage_in_max, 'V')}, current ${quantity(t.current_max, 'A', 1)}, system ${quantity(t.voltage_system_max, 'V')}`,
      ],
      [
        'Insulation test',
        t.insulation_test_max === null
          ? 'the maker allows none'
          : `at most ${quantity(t.insulation_test_max, 'V')}`,
      ],
    ]);
  }
  for (const t of data.inverterTypes) {
    paper.heading(`Inverter ${t.name}`, 3);
    paper.facts([
      ['AC power', quantity(t.ac_power_max / 1000, 'kW', 1)],
      ['Inputs', number(t.inputs)],
      [
        'Voltage',
        `at most ${quantity(t.voltage_max, 'V')}, tracking ${number(t.mppt_min)} to ${number(t.mppt_max)} V`,
      ],
      [
        'Current of an input',
        `${quantity(t.current_max, 'A', 1)}, short circuit ${quantity(t.isc_max, 'A', 1)}`,
      ],
    ]);
  }
  if (data.connectorTypes.length > 0) {
    paper.heading('Connectors', 3);
    paper.table(
      [
        { header: 'Name', share: 2 },
        { header: 'Maker', share: 2 },
        { header: 'Type', share: 2 },
        { header: 'Voltage', share: 1, align: 'right' },
        { header: 'Current', share: 1, align: 'right' },
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
  paper.heading('6  Operation and maintenance', 1);
  paper.caution(
    'Shutdown is not isolation. DC strings stay dangerous in light: shock, arc, fire.',
    'Each module and its leads to its unit stay at module voltage after shutdown. Never open a connector under load. Isolate, lock out, prove dead with a rated meter. Licensed or qualified people only; local code and the authority having jurisdiction come first.',
  );
  const steps = [
    `In an emergency, operate the initiator${site.switchPlace ? ` (${site.switchPlace})` : ''}. It does not make modules and their leads dead. Tell the fire service what is on the roof.`,
    'After a shutdown, release only when the reason for it is gone. Units that do not come back are listed in Wakeline as stuck.',
    'Wakeline watches and never switches. It is no arc-fault detector and no earth-fault detector.',
    'A unit that is silent may or may not obey the initiator: treat its string as live.',
    'Exchange of a unit or module: shut down, isolate, lock out, prove dead; the same connector type and maker on both halves, or a documented pair; record the new serial at its slot; repeat the roll call and the shutdown test of its zone.',
    'Repeat the shutdown test and the inspection at the intervals that local rules and the makers ask for.',
  ];
  for (const step of steps) paper.text(`–  ${step}`, { size: 9.5 });
  paper.text(
    `Who looks after it: ${[site.contactName, site.contactPhone].filter(Boolean).join(', ') || site.organisation.name}.`,
    { size: 9.5 },
  );
}

import type { CheckKey } from '../domain/commissioning/checks/definition';
import { connectorPairSaid } from './domain-equipment-connectors';

/** The install checks: what holds when one passes, how it is done, and where that stands. */

const PRACTICE = 'common practice';

export interface CheckTexts {
  name: string;
  asks: string;
  how: string;
  source: string;
}

export const checkTexts: Record<CheckKey, CheckTexts> = {
  lead_order: {
    name: 'Order of leads',
    asks: 'Short leads go to the module, long leads to the neighbours; the module was mated first.',
    how: 'Follow each unit’s leads by hand. Short leads to its own module first, long leads to the next unit after.',
    source: PRACTICE,
  },
  orientation: {
    name: 'Orientation',
    asks: 'Leads leave the unit downwards or to a side, never upwards.',
    how: 'Look at every unit before the module goes down: water must not run along a lead into the housing.',
    source: PRACTICE,
  },
  face: {
    name: 'Face to the back sheet',
    asks: 'The unit’s face lies as its type allows.',
    how: 'Compare with the type’s sheet: which face may look at the back sheet.',
    source: PRACTICE,
  },
  mounting: {
    name: 'Mounting',
    asks: 'Each unit sits firmly on the module’s frame, or on the rail where modules have no frame, with its air gap.',
    how: 'Pull at each unit. Between unit and back sheet there must be air; nothing lies on the roof.',
    source: PRACTICE,
  },
  connectors: {
    name: 'Connector pairs',
    asks: 'Both halves of every mated pair are of the identical type and maker, or documented as intermatable.',
    how: 'Read maker and type off both halves and choose them. That halves click together proves nothing.',
    source: connectorPairSaid.clause,
  },
  strain_relief: {
    name: 'Strain relief',
    asks: 'Leads hang clear of the roof and of edges, held without pull on any connector.',
    how: 'Look along the row from below. No loop touches the roof, no clip pinches a lead.',
    source: PRACTICE,
  },
  labels: {
    name: 'Labels',
    asks: 'String and home run are marked at both ends.',
    how: 'Read the marking at the array and at the inverter: the same name, polarity marked.',
    source: PRACTICE,
  },
  serials: {
    name: 'Serials recorded',
    asks: 'Serial and slot of every unit were recorded before its module went down.',
    how: 'Compare the as-built with the labels, position by position from the negative end.',
    source: PRACTICE,
  },
  polarity: {
    name: 'Polarity',
    asks: 'The lead marked + is positive.',
    how: 'String open and isolated, red lead on +, black lead on −: the reading carries no minus sign.',
    source: 'IEC 62446-1, clause 6.2',
  },
  earth_continuity: {
    name: 'Earth continuity',
    asks: 'Frames and rails are joined to the earthing conductor.',
    how: 'Continuity tester from the main earthing terminal to frames and rails, lead resistance taken off.',
    source: 'common practice: no more than 1 Ω; local rules decide',
  },
  voltage_to_earth: {
    name: '+ and − to earth',
    asks: 'The string floats: neither conductor shows a steady voltage to earth.',
    how: 'String open and isolated. Measure + to −, then + to earth and − to earth; wait until each settles.',
    source: PRACTICE,
  },
  insulation: {
    name: 'Insulation resistance',
    asks: 'The array is insulated from earth.',
    how: 'Only with the test voltage that the units’ maker allows. Record whether the units pass or are in shutdown.',
    source: 'IEC 62446-1, clause 6.7',
  },
  string_current: {
    name: 'String current',
    asks: 'The string carries the current of its neighbours.',
    how: 'Clamp meter round one conductor while the inverter runs and the light is steady; strings of one type one after the other.',
    source: 'IEC 62446-1, clause 6.5',
  },
};

/** What is written down at a check: numbers, choices, connector types. */
export const checkFigureTexts = {
  orientation: {
    leads: {
      name: 'Direction of the leads',
      options: { down: 'downwards', side: 'to a side', up: 'upwards' },
    },
  },
  face: {
    face: {
      name: 'Direction of the label',
      options: { label_out: 'away from the back sheet', label_in: 'at the back sheet' },
    },
  },
  mounting: { on: { name: 'Mounted on', options: { frame: 'module frame', rail: 'rail' } } },
  connectors: {
    moduleLead: { name: 'Module lead' },
    unitInput: { name: 'Unit lead towards the module' },
    unitOutput: { name: 'Unit lead at the string’s end' },
    homeRun: { name: 'Home run' },
  },
  polarity: { voltage: { name: '+ to −' } },
  earth_continuity: { resistance: { name: 'Resistance' } },
  voltage_to_earth: {
    between: { name: '+ to −' },
    positive: { name: '+ to earth' },
    negative: { name: '− to earth' },
  },
  insulation: {
    testVoltage: { name: 'Test voltage', options: { '250': '250 V', '500': '500 V', '1000': '1000 V' } },
    resistance: { name: 'Resistance' },
    unitsState: {
      name: 'State of the units',
      options: { passing: 'passing', shutdown: 'in shutdown', bypassed: 'not in the circuit' },
    },
  },
  string_current: {
    current: { name: 'Current' },
    method: {
      name: 'Method',
      options: { operating: 'in operation', short_circuit: 'as short-circuit current' },
    },
    poaGlobal: { name: 'Irradiance in the plane' },
  },
};

/** What is asked of one string in place of the above: by its unit type, its rule set, what its maker allows. */
export const stringCheckSaid = {
  eitherFace: (unitType: string) =>
    `Either face of the unit (${unitType}) may look at the back sheet, according to the type entered; the air gap is kept.`,
  labelOut: (unitType: string) =>
    `The label of the unit (${unitType}) looks away from the back sheet, according to the type entered.`,
  shutdownLabels:
    'String and home run are marked at both ends, and the rapid shutdown label and the initiator’s label are in place.',
  shutdownLabelsSource:
    'NEC 690.12(D), 2023; 690.56(C) in the 2017 and 2020 editions, as label guides quote them',
  noTestVoltage: 'No test voltage is put on this string: the maker of its units allows none.',
  insulationHow: (limit: string, how: string) => `${limit} ${how}`,
  optimizingCurrent:
    'Units of this kind set their own output: strings need not carry like currents. Record what flows; it is not compared.',
};

/** What a string's units allow of an insulation test. */
export const insulationSaid = {
  noneAllowed: (unitType: string) =>
    `The maker of ${unitType} allows no insulation test through the units, according to the type entered. Do not apply a test voltage to this string.`,
  noneAllowedWarning: 'No insulation test here: it can destroy the units.',
  noneAllowedReason: 'The maker of the units allows none.',
  atMost: (allowedV: number, unitType: string, testV: number, systemV: number) =>
    `At most ${allowedV} V through ${unitType}, according to the type entered; the table asks for ${testV} V at a system voltage of ${systemV} V.`,
  stayBelow: (allowedV: number) => `Stay at ${allowedV} V or below: more can destroy the units.`,
  shutdownHides: 'Units in shutdown hide what lies behind them: record their state.',
  tableSource: 'IEC 62446-1, clause 6.7 and Table 2 as quoted by others',
  unitTypeSource: 'unit type as entered',
};

import type { FieldTexts } from '../domain/equipment/fields';
import type { UnitSheet } from '../domain/equipment/unit-type';

/** Fields of one group stand together under its title. */
const groups = {
  type: 'Type',
  limits: 'Limits',
  behaviour: 'Behaviour',
  inShutdown: 'In shutdown',
  measuring: 'What it measures',
  fitting: 'Fitting and testing',
  points: 'Datasheet at STC (1000 W/m², cell 25 °C, AM 1.5)',
  coefficients: 'Temperature coefficients',
  build: 'Build',
  embossed: 'As the connector says',
  acSide: 'AC side and inputs',
  oneInput: 'One input',
};

export const nameFieldTexts: FieldTexts = {
  label: 'Name',
  group: groups.type,
  hint: 'As your people call it. An import finds the entry by it.',
};

export const moduleFieldTexts = {
  vocRef: { label: 'Open-circuit voltage voc', group: groups.points },
  iscRef: { label: 'Short-circuit current isc', group: groups.points },
  vmpRef: {
    label: 'Voltage at maximum power vmp',
    group: groups.points,
    hint: 'Below voc; usually 80 to 86 % of it.',
  },
  impRef: {
    label: 'Current at maximum power imp',
    group: groups.points,
    hint: 'Below isc; usually 93 to 97 % of it.',
  },
  betaVoc: {
    label: 'Coefficient of voc',
    group: groups.coefficients,
    hint: 'In % per K, negative. A sheet that gives V/K or mV/K: divide by voc, times 100.',
  },
  alphaIsc: {
    label: 'Coefficient of isc',
    group: groups.coefficients,
    hint: 'In % per K. A sheet that gives mA/K: divide by isc in mA, times 100.',
  },
  gammaPmp: {
    label: 'Coefficient of maximum power',
    group: groups.coefficients,
    hint: 'In % per K, negative.',
  },
  cellsInSeries: {
    label: 'Cells in series',
    group: groups.build,
    hint: 'Of half-cut cells count those in series: 144 half cells are 72.',
  },
  bypassGroups: {
    label: 'Bypass groups',
    group: groups.build,
    hint: 'Sub-strings with a bypass diode each; usually 3.',
  },
  noct: { label: 'Nominal operating cell temperature', group: groups.build },
  lengthM: { label: 'Length', group: groups.build },
  widthM: { label: 'Width', group: groups.build },
  connector: {
    label: 'Connector of the leads',
    group: groups.build,
    hint: 'What the label on the lead says. Design and install checks hold it against the unit’s.',
  },
  voltageSystemMax: { label: 'Maximum system voltage', group: groups.limits },
  fuseMax: {
    label: 'Maximum series fuse',
    group: groups.limits,
    hint: 'Also called reverse-current rating.',
  },
} satisfies Record<string, FieldTexts>;

export const unitFieldTexts = {
  kind: {
    label: 'Kind',
    group: groups.type,
    hint: 'A preset: in a new type it fills the form with what is usual. Every value can be changed.',
  },
  outOfBox: { label: 'Out of the box', group: groups.behaviour },
  releasedBy: { label: 'Released by', group: groups.behaviour },
  onCommandLoss: { label: 'When its command stops', group: groups.behaviour },
  commandLossAfterS: {
    label: 'Shuts down after',
    group: groups.behaviour,
    hint: 'From the last command or keep-alive.',
  },
  shutdownVoltageNominal: {
    label: 'Shutdown voltage',
    group: groups.inShutdown,
    hint: 'What one unit lets through, open circuit; 0.6 V is common practice.',
  },
  shutdownVoltageMin: { label: 'Shutdown voltage, lowest', group: groups.inShutdown },
  shutdownVoltageMax: { label: 'Shutdown voltage, highest', group: groups.inShutdown },
  bypassVoltage: {
    label: 'Voltage while bypassed',
    group: groups.inShutdown,
    hint: 'Across a unit in shutdown while string current flows; negative.',
  },
  measures: { label: 'Measures', group: groups.measuring },
  voltageAccuracy: { label: 'Accuracy of voltage', group: groups.measuring },
  currentAccuracy: { label: 'Accuracy of current', group: groups.measuring },
  voltageInMax: { label: 'Maximum input voltage', group: groups.limits },
  currentMax: { label: 'Maximum current', group: groups.limits },
  powerMax: { label: 'Maximum module power', group: groups.limits },
  voltageSystemMax: { label: 'Maximum system voltage', group: groups.limits },
  insulationTestMax: {
    label: 'Insulation test up to',
    group: groups.fitting,
    hint: 'What the maker allows through the unit. Empty: the maker allows none.',
    emptyMeans: 'the maker allows none',
  },
  facesAllowed: { label: 'Faces allowed', group: groups.fitting },
  connectorIn: { label: 'Connector towards the module', group: groups.fitting },
  connectorOut: { label: 'Connector towards the neighbours', group: groups.fitting },
} satisfies Record<string, FieldTexts>;

type Choices<K extends keyof UnitSheet> = Record<UnitSheet[K] & string, string>;
/** What can be chosen in the fields of a unit. */
export const unitChoices: {
  kind: Choices<'kind'>;
  outOfBox: Choices<'outOfBox'>;
  releasedBy: Choices<'releasedBy'>;
  onCommandLoss: Choices<'onCommandLoss'>;
  measures: Choices<'measures'>;
  facesAllowed: Choices<'facesAllowed'>;
} = {
  kind: {
    shutdown_only: 'Shutdown only',
    monitored: 'Monitored',
    optimizing: 'Optimizing',
  },
  outOfBox: { shutdown: 'In shutdown', passing: 'Passes full voltage' },
  releasedBy: { keep_alive: 'Keep-alive on the DC conductors', logger: 'Logger, through a gateway' },
  onCommandLoss: { shuts_down: 'Shuts down', holds: 'Holds its state' },
  measures: { none: 'Nothing', input: 'Input side', output: 'Output side', both: 'Both sides' },
  facesAllowed: { either: 'Either face to the back sheet', label_out: 'Label out only' },
};

export const connectorFieldTexts = {
  maker: {
    label: 'Maker',
    group: groups.embossed,
    hint: 'As embossed. Two halves are identical only if maker and type are.',
  },
  family: { label: 'Type', group: groups.embossed, hint: 'The maker’s own designation.' },
  tool: { label: 'Tools', group: groups.embossed, hint: 'What crimps it and what opens it.' },
  voltageMax: { label: 'Maximum voltage', group: groups.limits },
  currentMax: { label: 'Maximum current', group: groups.limits },
  temperatureMax: { label: 'Maximum temperature', group: groups.limits },
} satisfies Record<string, FieldTexts>;

export const inverterFieldTexts = {
  acPowerMax: { label: 'Maximum AC power', group: groups.acSide },
  inputs: {
    label: 'Inputs',
    group: groups.acSide,
    hint: 'Each with a maximum-power tracker of its own.',
  },
  stringsPerInput: { label: 'Strings an input takes', group: groups.acSide },
  voltageMax: { label: 'Maximum DC voltage', group: groups.oneInput },
  mpptMin: { label: 'MPPT window, from', group: groups.oneInput },
  mpptMax: { label: 'MPPT window, to', group: groups.oneInput },
  currentMax: { label: 'Maximum operating current', group: groups.oneInput },
  iscMax: { label: 'Maximum short-circuit current', group: groups.oneInput },
} satisfies Record<string, FieldTexts>;

import { starterNames as names, starterTexts as texts } from '../../words/domain-equipment-starter';
import type { EquipmentFamily } from './families';
import type { Entry } from './fields';
import { entryOfUnit } from './unit-fields';
import { UNIT_PRESETS, type UnitSheet, type UnitType } from './unit-type';

/**
 * What a new organisation's catalogue begins with: names and makers of our own invention, figures of the size that such
 * equipment has. A person replaces them by what stands on the roof. Connectors are named here by name, not by identifier.
 */
export interface StarterEquipment {
  connectors: readonly Entry[];
  /** `connector` etc. carry a connector's name. */
  modules: readonly Entry[];
  units: readonly Entry[];
  inverters: readonly Entry[];
  /** Names of two connectors, and the (invented) document that says that they may be mated. */
  pairs: readonly { first: string; second: string; evidence: string }[];
}

const connector = (
  name: string,
  maker: string,
  family: string,
  voltageMax: number,
  currentMax: number,
  temperatureMax: number,
  tool: string,
): Entry => ({ name, maker, family, voltageMax, currentMax, temperatureMax, tool });

const HALYARD = names.halyard;
const BITTERN = names.bittern;
const OXBOW = names.oxbow;

const CONNECTORS: readonly Entry[] = [
  connector(HALYARD, 'Tarn & Fell', 'Halyard 4', 1500, 35, 105, texts.halyardTool),
  connector(BITTERN, 'Bittern Contact', 'K2', 1500, 30, 90, texts.bitternTool),
  connector(OXBOW, 'Oxbow Electric', 'OX-30', 1000, 30, 85, texts.oxbowTool),
  connector(names.halyardWide, 'Tarn & Fell', 'Halyard 6', 1500, 60, 105, texts.halyardWideTool),
];

/** name, voc, isc, vmp, imp, beta, alpha, gamma (%/K), cells, noct, fuse, length, width, connector, system voltage */
type ModuleLine = readonly [
  string,
  number,
  number,
  number,
  number,
  number,
  number,
  number,
  number,
  number,
  number,
  number,
  number,
  string,
  number,
];
const module_ = ([
  name,
  vocRef,
  iscRef,
  vmpRef,
  impRef,
  beta,
  alpha,
  gamma,
  cellsInSeries,
  noct,
  fuseMax,
  lengthM,
  widthM,
  connectorName,
  voltageSystemMax,
]: ModuleLine): Entry => ({
  name,
  vocRef,
  iscRef,
  vmpRef,
  impRef,
  betaVoc: Number((beta / 100).toPrecision(6)),
  alphaIsc: Number((alpha / 100).toPrecision(6)),
  gammaPmp: Number((gamma / 100).toPrecision(6)),
  cellsInSeries,
  bypassGroups: 3,
  noct,
  fuseMax,
  lengthM,
  widthM,
  connector: connectorName,
  voltageSystemMax,
});

const MODULES: readonly Entry[] = [
  module_([
    names.mono450,
    49.3,
    11.6,
    41.1,
    10.95,
    -0.27,
    0.048,
    -0.34,
    72,
    45,
    20,
    2.094,
    1.038,
    HALYARD,
    1500,
  ]),
  module_([
    names.mono430,
    38.7,
    13.95,
    32.3,
    13.32,
    -0.25,
    0.045,
    -0.3,
    54,
    43,
    25,
    1.722,
    1.134,
    HALYARD,
    1500,
  ]),
  module_([names.poly285, 38.5, 9.45, 31.6, 9.02, -0.31, 0.055, -0.4, 60, 46, 15, 1.65, 0.992, OXBOW, 1000]),
  module_([
    names.mono545,
    49.7,
    13.9,
    41.8,
    13.04,
    -0.26,
    0.046,
    -0.34,
    72,
    45,
    25,
    2.278,
    1.134,
    BITTERN,
    1500,
  ]),
  module_([
    names.mono405,
    37.2,
    13.8,
    31.2,
    12.98,
    -0.26,
    0.045,
    -0.34,
    54,
    44,
    25,
    1.722,
    1.134,
    BITTERN,
    1000,
  ]),
];

const unit = (type: UnitType & Partial<UnitSheet>): Entry => entryOfUnit(type);
const LEADS = { connectorIn: HALYARD, connectorOut: HALYARD, voltageSystemMax: 1500, currentMax: 20 };

const UNITS: readonly Entry[] = [
  unit({ ...UNIT_PRESETS.monitored, ...LEADS, name: names.reportingBoth, measures: 'both' }),
  unit({ ...UNIT_PRESETS.monitored, ...LEADS, name: names.reportingOutput }),
  unit({ ...UNIT_PRESETS.shutdown_only, ...LEADS, name: names.shutdown }),
  unit({ ...UNIT_PRESETS.optimizing, ...LEADS, name: names.optimizing }),
];

const inverter = (
  name: string,
  acPowerMax: number,
  inputs: number,
  stringsPerInput: number,
  voltageMax: number,
  mpptMin: number,
  mpptMax: number,
  currentMax: number,
  iscMax: number,
): Entry => ({
  name,
  acPowerMax,
  inputs,
  stringsPerInput,
  voltageMax,
  mpptMin,
  mpptMax,
  currentMax,
  iscMax,
});

const INVERTERS: readonly Entry[] = [
  inverter(names.home6, 6_000, 2, 1, 600, 90, 560, 16, 20),
  inverter(names.roof20, 20_000, 4, 2, 1000, 180, 850, 32, 40),
  inverter(names.roof50, 50_000, 8, 2, 1100, 200, 1000, 32, 40),
  inverter(names.field110, 110_000, 12, 2, 1500, 500, 1450, 36, 55),
];

export function starterEquipment(): StarterEquipment {
  return {
    connectors: CONNECTORS,
    modules: MODULES,
    units: UNITS,
    inverters: INVERTERS,
    pairs: [
      {
        first: HALYARD,
        second: BITTERN,
        evidence: texts.pairEvidence,
      },
    ],
  };
}

/** Families in the order in which they may be written: what others name comes first. */
export const WRITING_ORDER: readonly EquipmentFamily[] = ['connectors', 'modules', 'units', 'inverters'];

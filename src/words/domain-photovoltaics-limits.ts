import type { Structure } from '../domain/photovoltaics/limits/design';
import { listed, number, quantity } from '../drawings/numbers';

/** What findings of all checks have in common. Figures are written before, each with its unit. */
export const designFindingSaid = {
  figure: (value: number, digits: number, unit: string) =>
    unit ? quantity(value, unit, digits) : number(value, digits),
  noLimit: 'The limit isn’t entered.',
  onEstimate: (exceeded: string) =>
    `${exceeded} The temperature is only an estimate from latitude and altitude.`,
  enterTemperatures: 'Enter the site’s design temperatures; then this can be told.',
  giveInverterType: 'Give the inverter its type.',
};

export const unitVoltageSaid = {
  clause: 'NEC 690.7(A)(1), unit’s maximum input voltage according to the type entered',
  within: (cold: string) => `One module gives ${cold} on the coldest day.`,
  exceeded: (cold: string) => `One module gives ${cold} on the coldest day, above the unit’s input limit.`,
  remedy: 'Choose another unit or module.',
};

/** Whose limit a string's voltage is held against; a building's by where the system stands. */
export type VoltageLimitOf = 'inverter' | 'module' | 'unit' | Structure;
const WHOSE: Record<VoltageLimitOf, string> = {
  inverter: 'the inverter',
  module: 'the modules’ system voltage',
  unit: 'the units’ system voltage',
  one_or_two_family_dwelling: 'on a one- or two-family dwelling',
  other_building: 'on a building',
  not_on_building: 'away from buildings',
};

export const stringVoltageSaid = {
  clause: {
    inverter: 'NEC 690.7(A)(1), inverter’s maximum DC voltage',
    module: 'NEC 690.7(A)(1), modules’ maximum system voltage (IEC 61730)',
    unit: 'NEC 690.7(A)(1), units’ maximum system voltage according to the type entered',
    one_or_two_family_dwelling: 'NEC 690.7, one- and two-family dwellings: 600 V',
    other_building: 'NEC 690.7, other buildings: 1000 V (from memory)',
    not_on_building: 'NEC 690.7, not on or in buildings: 1500 V (from memory)',
  } satisfies Record<VoltageLimitOf, string>,
  within: (whose: VoltageLimitOf, day: string, modules: number, voltage: string, most: number) =>
    `On the coldest day (${day}) ${modules} modules give ${voltage}; ${most} would fit ${WHOSE[whose]}.`,
  exceeded: (whose: VoltageLimitOf, day: string, modules: number, voltage: string, most: number) =>
    `On the coldest day (${day}) ${modules} modules give ${voltage}; at most ${most} fit ${WHOSE[whose]}.`,
  tableEnds: 'Table 690.7(A) ends at −40 °C.',
  byTable: (voltage: string) => `By Table 690.7(A) it would be ${voltage}.`,
  byTableAbove: (voltage: string) =>
    `By Table 690.7(A) it would be ${voltage}, above the limit: the datasheet’s coefficient goes first where it is given.`,
  otherMethod:
    'For systems of 100 kW or more NEC 690.7(A)(3) lets a licensed professional electrical engineer document another method.',
  noInverterType: 'The inverter has no type, so its highest DC voltage isn’t known.',
  shortenForInverter: 'Shorten the string, or choose an inverter for a higher voltage.',
  shortenForBuilding: (limit: string, structure: Structure) =>
    `Shorten the string to stay at or below ${limit} ${WHOSE[structure]}.`,
  shortenForModule: 'Shorten the string, or choose modules for a higher system voltage.',
  shortenForUnit: 'Shorten the string, or choose units for a higher system voltage.',
  optimizing: (modules: number) =>
    `Optimizing units: the inverter sets the string’s voltage, so ${modules} times voc doesn’t apply.`,
  optimizingClause: 'NEC 690.7(B) (in part from memory)',
  optimizingRemedy:
    'Take the shortest and longest string, and the string’s maximum voltage, from the unit maker’s instructions.',
};

export const mpptWindowSaid = {
  hotClause: 'Inverter’s MPPT window; cell by NOCT (Ross 1981)',
  coldClause: 'Inverter’s MPPT window',
  noInverterType: 'The inverter has no type, so its MPPT window isn’t known.',
  lengthen: (fewest: number) => `Lengthen the string to ${fewest} modules or more.`,
  shorten: 'Shorten the string, or choose an inverter with a higher window.',
  hotWithin: (air: string, cells: string, voltage: string, fewest: number) =>
    `On the hottest day (air ${air}, cells ${cells}) the string works at ${voltage}; ${fewest} modules would do.`,
  hotExceeded: (air: string, cells: string, voltage: string, fewest: number) =>
    `On the hottest day (air ${air}, cells ${cells}) the string works at ${voltage} and falls out of the window: it needs ${fewest} modules. It costs energy and is no hazard.`,
  coldWithin: (air: string, voltage: string) =>
    `On the coldest day (${air}) the string works at ${voltage} at most.`,
  coldExceeded: (air: string, voltage: string) =>
    `On the coldest day (${air}) the string would work best at ${voltage}, above the window. It costs energy and is no hazard.`,
};

const ofStrings = (strings: number): string =>
  strings === 1 ? '125 % of isc' : `125 % of isc of ${strings} strings`;

export const stringCurrentSaid = {
  unitClause: 'NEC 690.8(A)(1), unit’s maximum current according to the type entered',
  unitWithin: (current: string) => `125 % of isc is ${current}.`,
  unitExceeded: (current: string) => `125 % of isc is ${current}, above the unit’s limit.`,
  unitRemedy: 'Choose a unit for a higher current, or a module with a lower one.',
  unitAskMaker: 'Ask the unit’s maker whether the limit is meant for isc as printed, without the 125 %.',
  powerClause: 'Unit’s maximum module power according to the type entered',
  powerWithin: (power: string) => `The module has ${power}.`,
  powerExceeded: (power: string) => `The module has ${power}, more than the unit is made for.`,
  powerRemedy: 'Choose a unit for a larger module.',
  noInverterType: 'The inverter has no type, so the limits of its inputs aren’t known.',
  inputClause: 'NEC 690.8(A)(1), input’s maximum short-circuit current',
  inputWithin: (strings: number, current: string) => `${ofStrings(strings)} is ${current}.`,
  inputExceeded: (strings: number, current: string) =>
    `${ofStrings(strings)} is ${current}, above what the input may see.`,
  inputAskMaker: 'Ask the inverter’s maker whether the limit is meant for isc as printed, without the 125 %.',
  spread: 'Spread the strings over more inputs.',
  operatingClause: 'Input’s maximum operating current',
  operatingWithin: (current: string) => `At full sun the input takes ${current}.`,
  operatingExceeded: (current: string) =>
    `At full sun the strings offer ${current}; the input takes no more than its limit. It costs energy and is no hazard.`,
  spreadOrAccept: 'Spread the strings over more inputs, or accept the loss.',
};

export const seriesFuseSaid = {
  clause: 'NEC 690.9 (from memory), modules’ maximum series fuse',
  nothingFeedsBack: 'No other string is on the input: nothing feeds back.',
  noneNeeded: (others: number, back: string) =>
    `${others === 1 ? 'The other string' : `The other ${others} strings`} can feed back ${back}: no string fuse is needed by this arithmetic.`,
  noneFits: (others: number, back: string, fuseMax: string, needed: string) =>
    `The other ${others} strings can feed back ${back}, more than the modules’ series fuse of ${fuseMax}; a fuse would need at least ${needed}, so none fits.`,
  needed: (others: number, back: string, fuseMax: string, needed: string) =>
    `The other ${others} strings can feed back ${back}, more than the modules’ series fuse of ${fuseMax}. Each string needs a fuse of ${needed} to ${fuseMax}; whether one is fitted isn’t recorded.`,
  checkFuses: 'Check that string fuses are fitted and rated for DC.',
  fewerStrings: 'Put fewer strings on the input.',
};

export const stringShutdownSaid = {
  ruleSetClause: 'Rule set of the site',
  noneAsked: 'The site’s rule set asks for no rapid shutdown.',
  noLimitInside: 'The 2014 edition sets no limit inside the array.',
  hazardControl: 'A listed hazard-control system stands in for the 80 V: its listing decides.',
  hazardControlClause: 'NEC 690.12(B)(2)(1), UL 3741',
  hazardControlRemedy: 'Follow the installation instructions of the listing.',
  insideClause: 'NEC 690.12(B)(2): 80 V between any two conductors and to earth',
  insideWithin: (voltage: string, day: string) =>
    `Behind one unit in shutdown, ${voltage} remain on the coldest day (${day}).`,
  insideExceeded: (voltage: string, day: string) =>
    `Behind one unit in shutdown, ${voltage} remain on the coldest day (${day}): one module to a unit can’t meet the limit.`,
  lowerModule: 'Choose a module with a lower voltage.',
  useHazardControl: 'Use a listed hazard-control system (UL 3741) and set the site’s rule set to it.',
  staysInside: 'The home run doesn’t leave the array boundary.',
  outsideClause: 'NEC 690.12(B)(1), units according to the type entered',
  /** `most` null: any number. */
  outsideWithin: (units: number, each: string, voltage: string, most: number | null) =>
    `In shutdown ${units} units of ${each} at most leave ${voltage} on the home run; ${most ?? 'any number'} would stay within.`,
  outsideExceeded: (units: number, each: string, voltage: string, most: number | null) =>
    `In shutdown ${units} units of ${each} at most leave ${voltage} on the home run; at most ${most ?? 'any number'} stay within.`,
  outsideRemedy: 'Shorten the string, or choose units with a lower shutdown voltage.',
  checkShutdownVoltage: 'Check the highest shutdown voltage on the unit’s sheet.',
  holds:
    'The unit holds its state when its command stops (according to the type entered): it doesn’t shut down by itself.',
  holdsRemedy: 'Choose units that shut down when their command stops.',
  checkSheet: 'Check the sheet: the entry may be wrong.',
  testShows: 'The shutdown test shows what the units do.',
  timeWithin: (time: string) =>
    `The unit shuts down ${time} after its command stops (according to the type entered).`,
  timeExceeded: (time: string) =>
    `The unit shuts down only ${time} after its command stops (according to the type entered).`,
  timeRemedy: 'Choose a faster unit.',
};

export const slotDesignSaid = {
  withoutUnit: (positions: readonly number[]) =>
    `No unit is recorded at position${positions.length > 1 ? 's' : ''} ${listed(positions)}: a module wired straight in keeps its full voltage and the string can’t shut down.`,
  allWithUnit: 'Every slot has its unit.',
  withoutUnitClause: 'As-built record; NEC 690.12',
  withoutUnitRemedy: 'Read the serials there, or fit the missing units.',
  notRecordedYet: 'The unit is there and its serial was not recorded yet.',
  mixedUnits: (positions: readonly number[], types: readonly string[], entered: string) =>
    `Positions ${listed(positions)} hold ${listed(types)}, the string is entered with ${entered}. They may start, stop and report differently.`,
  mixedUnitsClause: 'Units’ instructions; common practice: one type in a string',
  mixedUnitsRemedy: 'Fit one unit type throughout, or correct the record.',
  readWrong: 'The serial was read with the wrong type.',
  mixedModules: (types: readonly string[], spread: string) =>
    `${types.length} module types stand in series (${listed(types)}); their currents at maximum power differ by ${spread}, and the lowest sets the string’s. It costs energy and is no hazard.`,
  mixedModulesClause: 'Own rule: 3 % of imp',
  mixedModulesRemedy: 'Sort the modules into strings by type.',
};

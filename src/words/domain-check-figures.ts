/** What the figures of a check say of its result; numbers come as they are written. */

const PRACTICE = 'common practice';
const UNIT_TYPE = 'unit type as entered';

/** What is wrong with what was typed or chosen for a check, and what would do. */
export const checkFigureFaults = {
  span: (min: number, max: number, unit: string) => `${min} to ${max} ${unit}`.replace('-', '−'),
  unknown: (check: string) => `${check} takes no figure of this name. Leave it out.`,
  missing: (figure: string, check: string) => `${figure} is missing. ${check} can only pass with it.`,
  impossible: (figure: string, value: string, span: string) =>
    `${figure}: ${value} is not possible. Give a number from ${span}.`,
  noChoice: (figure: string, value: string, choices: readonly string[]) =>
    `${figure}: ${value} is none of the choices. Give one of ${choices.join(', ')}.`,
  noConnector: (figure: string) =>
    `${figure}: this connector type is not in the catalogue. Choose one that is, or enter it first.`,
};

/** What stands of a check; `…Remedy` what would do, `…Source` what it is held against. */
export const checkFiguresSaid = {
  putRight: 'Put it right, then record the check again.',

  leadsUp: 'Leads leave a unit upwards: water runs along them into the housing.',
  leadsUpRemedy: 'Turn the unit so that its leads go down or to a side.',
  leadsUpSource: PRACTICE,

  labelIn: (unitType: string) =>
    `The label looks at the back sheet; ${unitType} allows it only the other way, according to the type entered.`,
  labelInRemedy: 'Turn the unit over, or correct the type if its sheet allows either face.',
  labelInSource: UNIT_TYPE,

  noSerial: (slots: number, units: number) =>
    `${slots} of ${units} slots ${slots === 1 ? 'has' : 'have'} no serial on the as-built.`,
  noSerialRemedy: 'Read the serials on the roof, or import them.',
  noSerialSource: 'as-built',

  reversed: (volts: string) =>
    `${volts} V: the string is reversed at the meter or at its leads. Do not connect it.`,
  reversedRemedy: 'Check the leads at the meter first, then the marking of the home run; measure again.',
  reversedSource: 'IEC 62446-1, clause 6.2',

  continuity: (ohms: string, most: number) => `${ohms} Ω is above the ${most} Ω that is common practice.`,
  continuityRemedy:
    'Take off the resistance of the test leads, clean the joint and measure again; local rules decide.',
  continuitySource: 'common practice; local rules decide',

  earthFaultRemedy: 'Find the place where a conductor touches earth before anything is energised.',
  earthUnclearRemedy: 'Measure again, high-impedance input, and wait until each reading settles.',
  earthSource: PRACTICE,

  /** Where the maker of the units allows no test. */
  testedAnywayRemedy: 'Record it as not applicable; have the units looked at if a test voltage was applied.',
  testVoltageHigh: (volts: number, allowedV: number, unitType: string) =>
    `${volts} V is more than the ${allowedV} V that the maker of ${unitType} allows: the units may be damaged.`,
  testVoltageHighRemedy: 'Have the units looked at, and test again with the voltage that is allowed.',
  testVoltageHighSource: UNIT_TYPE,
  insulationLow: (megohms: string, least: number) => `${megohms} MΩ is below ${least} MΩ.`,
  insulationLowRemedy: 'Look for damaged insulation and moisture, part the array and measure its parts.',
  insulationLowSource: 'IEC 62446-1 Table 2, from memory: look it up in your edition',
  testVoltageLow: (volts: number, askedV: number) =>
    `${volts} V is less than the ${askedV} V that the table asks for at this string’s voltage.`,
  testedInShutdown: 'The units were in shutdown: what lies behind them was not tested.',
  testedInShutdownSource: PRACTICE,
};

/** What a string's current says. */
export const checkCurrentSaid = {
  backwards: (amperes: string) => `${amperes} A: current flows the wrong way round, or the clamp is turned.`,
  none: 'No current flows.',
  noneRemedy:
    'Turn the clamp as its arrow says; then look for an open connector or a string that is not released.',
  below: (amperes: string, percent: number, strings: number, average: string) =>
    `${amperes} A is ${percent} % below the average of ${strings} strings measured with it (${average} A).`,
  above: (amperes: string, percent: number, strings: number, average: string) =>
    `${amperes} A is ${percent} % above the average of ${strings} strings measured with it (${average} A).`,
  apartRemedy: 'Measure these strings again, one after the other, while the light is steady.',
  source:
    'IEC 62446:2009, clause 5.4.5, as quoted by others: within 5 % of the average under stable irradiance',
  offSheet: (amperes: string, sheet: string) =>
    `${amperes} A is far from the ${sheet} A that the datasheet gives at this irradiance.`,
  offSheetRemedy: 'Check the irradiance, shade, and whether the inverter holds the string back.',
  offSheetSource: 'module datasheet scaled by irradiance; ±15 % is a rule of our own',
};

/** Where two connectors of a string meet. */
export const matedPlaceSaid = {
  moduleToUnit: (words: string) => `Between module and unit: ${words}`,
  stringToHomeRun: (words: string) => `Between string and home run: ${words}`,
};

/** What stands in the way of a signature, and what is worth knowing before it. */
export const signOffSaid = {
  mayFollow: (check: string) => `${check}: not recorded yet; it may follow once current flows.`,
  missing: (check: string) => `${check} is not recorded.`,
  recordNotApplicable: (reason: string) => `Record it as not applicable: ${reason}`,
  judged: (check: string, words: readonly string[]) => `${check}: ${words.join(' ')}`,
  /** `reason` may be empty. */
  failed: (check: string, reason: string) => `${check} failed${reason ? `: ${reason}` : '.'}`,
};

import { number, volts } from '../drawings/numbers';

export const comb = {
  slotsPositionsParts: (slots: number, parts: string) => `${slots} positions: ${parts}.`,
};

export const staircase = {
  voltageStaircaseOfPositions: (slots: number) => `Voltage staircase of ${slots} positions.`,
  theStringGives: (voltage: number) => `The string gives ${volts(voltage)}.`,
  expected: (expected: number) => `Expected: ${volts(expected)}.`,
  itsUnitsTellNothing: 'Its units tell nothing themselves.',
  thatIsWhatOf: (passing: number, n: number) =>
    `That is what ${passing} of ${n} passing units give; positions unknown.`,
  allAre: (condition: string) => `All are ${condition}.`,
  position: 'Position',
  positions: 'Positions',
  positionsUnknown: 'positions unknown',
  ofPassByThe: (passing: number, n: number) => `${passing} of ${n} pass by the total, positions unknown`,
  positionAlongTheString: 'Position along the string, from the negative end',
};

export const drawingsStringsCondition = {
  noUnit: 'no unit',
  tellsNothing: 'tells nothing',
  passing: 'passing',
  notShuttingDown: 'not shutting down',
  stuck: 'stuck',
  inShutdown: 'in shutdown',
  silent: 'silent',
  unheard: 'unheard',
  dark: 'dark',
};

export const drawingsStringsMix = {
  notShuttingDown: 'not shutting down',
  passing: 'passing',
  stuck: 'stuck',
  inShutdown: 'in shutdown',
  silent: 'silent',
  unheard: 'unheard',
  dark: 'dark',
  tellNothingThemselves: 'tell nothing themselves',
};

export const mixBar = {
  unitsByState: (units: number, map: string) => `${number(units)} units: ${map || 'none'}`,
};

export const walk = {
  roofWithThePath: (listedSaid: string, words: string) => `Roof with the path of ${listedSaid}. ${words}`,
};

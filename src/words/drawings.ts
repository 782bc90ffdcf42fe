import { number, percent, quantity, volts } from '../drawings/numbers';

export const loopScatter = {
  pointsResistanceOhmBetween: (points: number, ohm: number, low: number, high: number) =>
    `${points} points. Resistance ${number(ohm, 3)} ohm, between ${number(low, 3)} and ${number(high, 3)} nineteen times in twenty.`,
  pointsNoLine: (points: number) => `${points} points, no line.`,
  sumOfUnitVoltages: (said: string) =>
    `Sum of unit voltages less input voltage, over the string’s current. ${said}`,
  currentOfTheString: 'Current of the string, A',
  ohmLowToHigh: (ohm: number, low: number, high: number) =>
    `${quantity(ohm, 'Ω', 3)} (${number(low, 3)} to ${number(high, 3)})`,
};

export const moduleCurve = {
  voltageV: 'voltage, V',
  currentA: 'current, A',
  powerW: 'power, W',
};

export const rollCallCurve = {
  ofUnitsHeardAfter: (heardAtS: number, total: number, round: number, expected: string) =>
    `${heardAtS} of ${total} units heard after ${round} minutes${expected}.`,
  roundMin: (round: number) => `${round} min`,
  onTheAsBuilt: (total: number) => `${total} on the as-built`,
  expectedAfterMinutes: (expected: number, round: number) => `; ${expected} expected after ${round} minutes`,
};

export const testLines = {
  command: 'command',
  insideVvInside: (insideV: number) => `${insideV} V inside`,
  outsideVvOutside: (outsideV: number) => `${outsideV} V outside`,
  released: 'released',
};

export const caseFigures = {
  daylight: 'daylight',
  dawnOrDusk: 'dawn or dusk',
  dark: 'dark',
  sunTheHorizon: (replace: string, elevation: number) =>
    `sun ${replace} ${elevation >= 0 ? 'above' : 'below'} the horizon`,
  inThePlane: (poaGlobal: number) => `, ${number(poaGlobal)} W/m² in the plane`,
  unitsTellNothingThemselves: 'units tell nothing themselves',
  ofPass: (passing: number, units: number) => `${passing} of ${units} pass`,
  notShuttingDown: (notShuttingDown: number) => `${notShuttingDown} not shutting down`,
  stuckStuck: (stuck: number) => `${stuck} stuck`,
  inShutdown: (shutdown: number, stuck: number) => `${shutdown - stuck} in shutdown`,
  unheardUnheard: (unheard: number) => `${unheard} unheard`,
  silentSilent: (silent: number) => `${silent} silent`,
  unconfirmedUnconfirmed: (unconfirmed: number) => `${unconfirmed} unconfirmed`,
  notKnown: 'not known',
  expectedInShutdown: (voltage: number, expectedInShutdown: number) =>
    `${volts(voltage)}, ${volts(expectedInShutdown)} expected in shutdown`,
  ofExpected: (voltage: number, expectedVoltage: number) =>
    `${volts(voltage)} of ${volts(expectedVoltage)} expected`,
  site: 'Site',
  light: 'Light',
  powerAC: 'Power, AC',
  energyOfTheDay: 'Energy of the day so far',
  noLongerOnThe: 'no longer on the as-built',
  voltage: 'Voltage',
  units: 'Units',
  current: 'Current',
  lastDayJudged: 'Last day judged',
  ofExpected2: (ratio: number, day: string) => `${percent(ratio)} of expected (${day})`,
  notJudged: 'not judged',
  wholeString: (name: string) => `${name} (whole string)`,
  position: 'position',
  positions: 'positions',
};

export const drawingsModuleCurve = {
  isc: 'isc',
  vmpImp: 'vmp, imp',
  voc: 'voc',
};

import { counted, number, volts } from '../drawings/numbers';
import { clock, clockOrDate } from '../drawings/times';

export const ladderCard = {
  typesNotEnteredRead: 'types not entered: read the marks on both halves',
  modulesAndTheirLeads:
    'Modules and their leads stay at module voltage in light. Never open a connector under load. Isolate, lock out, prove dead with a rated meter; fall protection; qualified people, local code first.',
  shutdownIsNotIsolation: 'Shutdown is not isolation.',
  where: 'Where',
  placeNotRecorded: 'place not recorded',
  andMore: (stops: number, shown: number, listedSaid: string) => `and ${stops - shown} more: ${listedSaid}`,
  leaveStopsOutFor: '. Leave stops out for a card of their own.',
  noStopIsChosen: 'No stop is chosen.',
  bring: 'Bring',
  countedCountSpareUnit: (count: number) => counted(count, 'spare unit'),
  connectorHalves: (where: string, halves: string) => `Connector halves, ${where}: ${halves}`,
  meterRatedFor: 'Meter rated for ',
  ladderFallProtectionLock: ', ladder, fall protection, lock',
  dcOrMore: (ceil: number) => `${number(ceil * 50)} V DC or more`,
  theStringsOpenCircuit: 'the string’s open-circuit voltage',
  theMeterToString: (light: string) => `The meter, + to −, string separated, ${light}`,
  string: 'String',
  inShutdown: 'in shutdown',
  passing: 'passing',
  asItIsNow: 'as it is now',
  lowToHigh: (low: string, high: string) => `${low} to ${high}`,
  accordingToTheTypes: 'According to the types entered. At night and under snow 0 V: that proves nothing.',
  andMoreStrings: (readings: number, stringsMax: number) => `And ${readings - stringsMax} more strings. `,
  shutdownSwitch: 'Shutdown switch:',
  onSite: 'On site:',
  backToTheWalk: 'Back to the walk',
  print: 'Print',
};

export const stopList = {
  noReportYet: 'no report yet',
  voltageAtSeen: (voltage: null | number, seen: string, at: string, timeZone: string) =>
    `${voltage === null ? 'reported' : volts(voltage)} at ${clockOrDate(seen, at, timeZone)}`,
  isDone: (key: string) => `${key} is done`,
  placeOnTheRoof: 'place on the roof not recorded',
  noUnit: 'no unit',
  tickedStillByIts: (at: string, timeZone: string, kind: string) =>
    `Ticked ${clock(at, timeZone)}; still ${kind} by its last word: `,
  leaveOut: 'Leave out',
  leaveOut2: (key: string) => `Leave out ${key}`,
  stops: 'Stops',
  ofTicked: (filter: number, stops: number) => `${filter} of ${stops} ticked · `,
  allAsCsv: 'all as CSV',
  noStopIsLeft: 'No stop is left on this walk',
  theRollCallHas: 'The roll call has not been started',
  toTheRollCall: 'To the roll call',
  leftOutOfThis: 'Left out of this walk:',
  putAllBack: (leftOut: number) => `Put all ${leftOut} back`,
  tickedAndInOrder: 'Ticked, and in order again',
  wasTickedNow: (kind: string, at: string, timeZone: string) =>
    `was ${kind}, ticked ${clock(at, timeZone)}; now `,
  forget: 'Forget',
};

export const walkBoard = {
  commissioning: 'Commissioning',
  whereTheStopsAre: 'Where the stops are still holds.',
  theWalkCouldNot: 'The walk could not be read again',
  theRoof: 'The roof',
  aboutFromTheFirst: (metres: number) => `about ${number(metres)} m from the first stop to the last`,
  aSquareIsA:
    'A square is a stop, with its position counted from the negative end: filled, stuck or not shutting down; dashed, unheard or without a unit; crossed, silent. Dotted: the way.',
  noPlaceOnThe: 'No place on the roof is drawn for these strings',
  drawThem: 'Draw them',
  eachModuleAndIts:
    'Each module and its leads to its unit stay at module voltage in light. Never open a connector under load. Isolate, lock out, prove dead with a rated meter; local code first, qualified people only.',
  shutdownIsNotIsolation: 'Shutdown is not isolation.',
  ladderCard: 'Ladder card',
  oneScreenForThe: (map: string) =>
    `One screen for the pocket: places, ${map}, connector types, what the meter should read.`,
  openTheLadderCard: 'Open the ladder card',
  countedCountSpareUnit: (count: number) => counted(count, 'spare unit'),
};

export const walkStops = {
  moduleToUnit: 'module to unit',
  unitToUnit: 'unit to unit',
};

import { counted, number } from '../drawings/numbers';
import { clockSeconds } from '../drawings/times';

export const traceSheet = {
  string: 'String',
  atTheCommand: 'At the command',
  newest: 'Newest',
  orLess: (voltage: number) => `${voltage} V or less`,
  fromTheStart: 'from the start',
  afterUnderFromSs: (underFromS: number) => `after ${underFromS} s`,
  measured: 'Measured',
  voltageInTheSeconds: (startedAt: string, timeZone: string, words: string) =>
    `Voltage in the seconds after ${clockSeconds(startedAt, timeZone)}. ${words}`,
  secondBySecond: 'Second by second',
  theSameAsA: 'The same as a table',
  voltagesAfterTheCommand: (startedAt: string, timeZone: string) =>
    `Voltages after the command of ${clockSeconds(startedAt, timeZone)}`,
  reportsOfUnitsAnd: (source: string) =>
    `Reports of units and inverters are no test: only a rated meter at the home run shows that a string is dead. Time limit: ${source}.`,
  theNewestSecondsCould: ' The newest seconds could not be read.',
};

export const traceModel = {
  atTheHomeRun: 'at the home run',
  atTheInvertersInput: 'at the inverter’s input, which its capacitors hold up',
  sumOfWhatIts: 'sum of what its units report',
  noVoltagesHaveBeen: 'No voltages have been recorded second by second yet.',
  untoldNothing: (untold: number) =>
    ` ${counted(untold, 'string')} ${untold === 1 ? 'tells' : 'tell'} nothing.`,
  noStringHasTold: (rest: string) => `No string has told its voltage since the command.${rest}`,
  ofAboveAgain: (up: number, known: number, voltage: number, rest: string) =>
    `${number(up)} of ${counted(known, 'string')} ${up === 1 ? 'is' : 'are'} above ${voltage} V again.${rest}`,
  minToMaxS: (min: number, max: number) => `${min} to ${max} s`,
  known1TheString: (known: number, voltage: number, span: string, rest: string) =>
    `${known === 1 ? 'The string' : `All ${known} strings`} fell to ${voltage} V or less within ${span}, by telemetry.${rest}`,
  countedOverString: (over: number) => counted(over, 'string'),
  ofFellToOr: (under: number, known: number, voltage: number, named: string, over: number, rest: string) =>
    `${under} of ${counted(known, 'string')} fell to ${voltage} V or less; ${named} ${over === 1 ? 'is' : 'are'} still above it.${rest}`,
};

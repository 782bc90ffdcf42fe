import { countAtStart, counted, number } from '../drawings/numbers';

export const statusSheets = {
  never: 'never',
  logger: 'Logger',
  lastSpoke: 'Last spoke',
  notConnected: 'Not connected',
  firmwareAddress: 'Firmware, address',
  noAddressYet: 'no address yet',
  refused: 'Refused',
  lastRefusal: 'Last refusal',
  none: 'none',
  theAccountGivenMay:
    'The account given may not create roles, so the database itself does not keep organisations apart; the queries still do. Give an account that may create roles, or addresses of two accounts, and start again.',
  oneDatabaseAccountFor: 'One database account for everything',
  loggers: 'Loggers',
  newestRefusalFirst: 'newest refusal first',
  loggersWithTheirConnection: 'Loggers with their connection and what was refused from them',
  noLoggerIsEntered: 'No logger is entered yet',
  work: 'Work',
  newestFrame: 'Newest frame',
  judgement: 'Judgement',
  stringsWaitTheFirst: (unjudgedStrings: number) =>
    `${number(unjudgedStrings)} strings wait, the first since `,
  upWithWhatHas: 'up with what has come in',
  rollUps: 'Roll-ups',
  quartersWait: (quartersWaiting: number) => `; ${number(quartersWaiting)} quarters wait`,
  standStill: 'stand still; ',
  doneUpTo: 'done up to ',
  noneDoneYet: 'none done yet',
  framesParkedForLack: 'Frames parked for lack of a place',
  placesPreparedTo: 'Places prepared to',
  tomorrowIsMissing: ' (tomorrow is missing)',
  databaseAndProcesses: 'Database and processes',
  postgreSQL: 'PostgreSQL',
  organisationsKeptApartBy: 'Organisations kept apart by the database',
  yes: 'yes',
  noOneAccount: 'no, one account',
  connectionsRefusedForAn: 'Connections refused for an unknown token, since the start',
  processName: (name: string) => `Process ${name}`,
  servesLoggers: (loggers: number) => `serves ${number(loggers)} loggers`,
  noProcessServesA: 'No process serves a logger of yours just now.',
};

export const statusFindingWords = {
  judgementIsBehindWhat: 'judgement is behind what has come in',
  rollUpsStandStill: 'roll-ups stand still',
  noPlaceIsPrepared: 'no place is prepared for the frames of tomorrow',
  allRunsWithOne: 'all runs with one database account',
  loggersOfLoggersConnected: (loggers: number, away: number, refused: number) =>
    `${number(loggers - away)} of ${counted(loggers, 'logger')} connected; ${refused === 0 ? 'no message was refused' : `${counted(refused, 'message')} refused since they were set up`}.`,
  ofNotConnected: (away: number, loggers: number) =>
    `${countAtStart(away)} of ${counted(loggers, 'logger')} ${away === 1 ? 'is' : 'are'} not connected`,
  nothingNewerIsKnown: (away: number, counts: string) =>
    `Nothing newer is known of ${away === 1 ? 'its site' : 'their sites'} until ${away === 1 ? 'it comes' : 'they come'} back. ${counts}`,
  theInstallationRunsAs: 'The installation runs as it should',
};

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
  moreLoggers: (loggers: number) => `${counted(loggers, 'logger')} more`,
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
  replica: 'Replica, for readers of history and reports',
  replicaState: { serves: 'serves', behind: 'too far behind', away: 'away' },
  secondsBehind: (lagS: number) => `, ${number(lagS, 1)} s behind`,
  processName: (name: string) => `Process ${name}`,
  servesLoggers: (loggers: number) => `serves ${number(loggers)} loggers`,
  noProcessServesA: 'No process serves a logger of yours just now.',
};

export const statusFindingWords = {
  judgementIsBehindWhat: 'judgement is behind what has come in',
  rollUpsStandStill: 'roll-ups stand still',
  noPlaceIsPrepared: 'no place is prepared for the frames of tomorrow',
  allRunsWithOne: 'all runs with one database account',
  theReplicaDoesNot: 'the replica does not serve, so the primary answers its readers',
  loggersOfLoggersConnected: (loggers: number, away: number, refused: number) =>
    `${number(loggers - away)} of ${counted(loggers, 'logger')} connected; ${refused === 0 ? 'no message was refused' : `${counted(refused, 'message')} refused since they were set up`}.`,
  ofNotConnected: (away: number, loggers: number) =>
    `${countAtStart(away)} of ${counted(loggers, 'logger')} ${away === 1 ? 'is' : 'are'} not connected`,
  nothingNewerIsKnown: (away: number, counts: string) =>
    `Nothing newer is known of ${away === 1 ? 'its site' : 'their sites'} until ${away === 1 ? 'it comes' : 'they come'} back. ${counts}`,
  theInstallationRunsAs: 'The installation runs as it should',
};

export const processSheets = {
  nameDashed: (name: string) => `${name} (dashed) `,
  markWordsAtMarks: (markWords: string, marks: number) => `; ${markWords} at ${counted(marks, 'time')}`,
  markWordsAtMarks2: (markWords: string, marks: number) => `${markWords} at ${counted(marks, 'time')}`,
  processOn: (process: string, host: string, roles: string) => `Process ${process} on ${host}: ${roles}`,
  numberRunsSince: (pid: number) => `number ${pid}, started `,
  inTheLast: (running: number, hours: number) =>
    `${counted(running, 'process', 'processes')} in the last ${counted(hours, 'hour')}`,
  howFarBack: 'How far back',
  theFirstComeA: 'The first come a minute after a start.',
  noProcessHasTold: 'No process has told its figures in the last minutes',
  endedOrAwayFrom: 'Ended, or away from the database: ',
  onLastHeard: (process: string, host: string, roles: string) =>
    `${process} on ${host} (${roles}), last heard `,
  andMore: (ended: number) => `; and ${ended - 12} more`,
};

export const processLines = {
  databaseConnections: 'Connections to the database',
  inUse: 'in use',
  waitedFor: 'waited for',
  readingsMadeDurable: 'Readings made durable',
  readingsThatWaitedAt: 'Readings that waited at once',
  commitAndAcknowledgement95: 'Commit and acknowledgement, 95 of 100 within',
  judgedAfterCommit95: 'Judged after commit, 95 of 100 within',
  delayOfTheEvent: 'Delay of the event loop, 99 of 100 within',
  n99Of100: '99 of 100',
  pagesAndAnswers95: 'Pages and answers, 95 of 100 within',
  pagesAndAnswers: 'Pages and answers',
  browsersThatListen: 'Browsers that listen',
  jobsRun: 'Jobs run',
  aMinute: 'a minute',
  longestThatADue: 'Longest that a due job has waited',
  memory: 'Memory',
  socketsWerePaused: 'sockets were paused',
  anAnswerFailed: 'an answer failed',
  aBrowserReadToo: 'a browser read too slowly',
  aJobFailed: 'a job failed',
  noneYet: 'none yet',
};

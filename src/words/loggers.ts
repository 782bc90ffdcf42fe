import { counted } from '../drawings/numbers';

export const byHttps = {
  itFetchesItsRoster:
    'It fetches its roster, which names its strings with their slots, and sends the same messages as on the WebSocket, one a line:',
  theAnswerComesOnce: (batchMessagesMax: number, batchMaxBytes: number, mB: number) =>
    `The answer comes once everything is kept, and tells what was refused: which message, which field, what would do. Without an answer send all of it again; what comes twice is kept once. At most ${batchMessagesMax} messages and ${batchMaxBytes / mB} MB at a time, packed with gzip if you like, and one batch of a logger after the other. 429 and 503 say in Retry-After when to come back.`,
};

export const endTokenDialog = {
  title: (token: string) => `End ${token ? `“${token}”` : 'this token'} now`,
  means: (others: number, serial: string) =>
    `Whoever speaks with it is cut off at once. ${others === 0 ? `Logger ${serial} has no other token: it is refused until it gets a new one, and nothing of its units is heard. What it has not sent yet stays in it.` : 'Another token of this logger stays in force.'}`,
  why: 'Why',
  aFewWordsThey: 'A few words; they stay in the history.',
  notEnded: 'The token was not ended',
  ending: 'Ending …',
  endItNow: 'End it now',
  keepIt: 'Keep it',
};

export const loggerSheet = {
  loggerSerial: (serial: string) => `Logger ${serial}`,
  connectedBy: (byHttps: boolean) => `connected by ${byHttps ? 'HTTPS' : 'WebSocket'}`,
  notConnected: 'not connected',
  lastSpoke: 'Last spoke ',
  fromLastAddress: (lastAddress: string) => ` from ${lastAddress}`,
  firmware: (firmware: string) => `; firmware ${firmware}`,
  tokens: 'Tokens',
  makeFirstToken: 'Make a token',
  makeNewToken: 'Make a new token',
  tokensOfLogger: (serial: string) => `Tokens of logger ${serial}`,
  itHasNoToken: 'It has no token, so that it is refused',
  token: 'Token',
  unnamed: 'without a name',
  lastUsed: 'last used ',
  never: 'never',
  state: 'State',
  endedBy: (endedBy: string) => ` by ${endedBy}`,
  made: 'Made',
  lastUsedHeading: 'Last used',
  end: 'End',
  endNow: 'End now',
  endNowLabel: (name: string) => `End now: ${name ? `the token ${name}` : 'this token'}`,
  nothingOfItWas: 'Nothing of it was refused',
  refusedUntilNow: (refused: number) => `${counted(refused, 'message')} refused so far`,
  refusalsCaption: (serial: string) => `What was refused of logger ${serial}`,
  newestRefusals: 'What was wrong, the newest of its kind',
  times: 'Times',
  first: 'First',
  last: 'Last',
  withTokenThatNobody: (wrongTokens: number) =>
    `${counted(wrongTokens, 'attempt')} with a token that nobody knows came from `,
  theLastOne: ', the last one ',
  otherDevicesMayShare: '. Other devices may share this address.',
};

export const loggersBoard = {
  fleet: 'Fleet',
  loggers: 'Loggers',
  whatIsShownMay: 'What is shown may be old.',
  notReadAnew: 'The loggers could not be read anew',
  noLoggerYet: 'No logger yet',
  lookAtTheAs: 'Look at the as-built',
  aLoggerWithoutOur: 'A logger without our WebSocket reports by HTTPS',
  how: 'How',
};

export const newTokenDialog = {
  tokenForLogger: (serial: string) => `A token for logger ${serial}`,
  name: 'Name',
  soThatYouKnow: 'So that you know it again: where it was put, by whom.',
  theOneBeforeEnds: 'The one before ends',
  theBeforeEnd: (before: number) => `The ${counted(before, 'token')} before end`,
  itsConnectionIsClosed:
    'Its connection is closed at once; the logger is refused until it has the new one. What it has not sent yet stays in it.',
  untilThenBothLet: 'Until then both let the logger in: there is time to put the new one into it.',
  why: 'Why',
  aFewWordsThey: 'A few words; they stay in the history.',
  noTokenWasMade: 'No token was made',
  making: 'Making …',
  makeTheToken: 'Make the token',
};

export const errorTitles = {
  invalid: 'Something in the request is wrong',
  unauthenticated: 'Sign in first',
  forbidden: 'Your role does not include this',
  notFound: 'Nothing is here',
  notAllowed: 'This address does not take that',
  conflict: 'This clashes with what is there',
  tooLarge: 'Too large',
  tooMany: 'Too many tries',
  unavailable: 'Not reachable just now',
  noSuch: (what: string) => `No such ${what}. Check the link, or go back to the fleet.`,
};

export const bearerRefusals = {
  sendToken: 'Send a token: Authorization: Bearer TOKEN. Tokens are made on the account page.',
  unknownToken: 'Nobody knows this token. Check that all of it was sent, as Authorization: Bearer TOKEN.',
  tokenEnded: (at: string) => `This token was ended at ${at}. Make a new one.`,
  tokenRanOut: (at: string) => `This token ran out at ${at}. Make a new one on the account page.`,
  personGone: 'The person whose token this is can’t sign in any more.',
};

export const confirmPasswordRefusals = {
  notYoursNothingSigned:
    'This is not your password. Enter the one that you sign in with; nothing was signed.',
  notYours: 'This is not your password.',
};

export const limitWords = {
  tooMany: (what: string, seconds: number) =>
    `Too many tries to ${what}. Wait ${seconds > 90 ? `${Math.ceil(seconds / 60)} minutes` : `${seconds} seconds`}, then try again.`,
  signIn: 'sign in',
  signWithPassword: 'sign with your password',
  askForLetter: 'ask for a letter',
  useLink: 'use a link',
  readPage: 'read this page',
  useCode: 'use a code',
  useToken: 'use a token',
};

export const bodyRefusals = {
  tooLarge: (bytes: number) => `The body is larger than ${bytes} bytes. Send less at once.`,
  contentType: (type: string) => `The body has content type "${type || 'none'}"; send application/json.`,
  sendJson: 'send application/json',
  unreadable: 'not readable',
  noText: 'has a character that no text has (NUL); leave it out',
  noJson: (reason: string) => `The body is not JSON: ${reason}`,
};

export const callOutRefusals = {
  noAddress: 'This is no address. Begin with https://.',
  noPassword: 'Leave out name and password: the signature proves who calls.',
  useHttps: 'Use https://: what is called carries facts of your sites.',
  privateAddress: 'This address is inside a private network. Use one that the public network reaches.',
  leadsToPrivate: (hostname: string, address: string) => `${hostname} leads to ${address}, a private address`,
  noAnswer: (seconds: number) => `no complete answer within ${seconds} s`,
};

export const callerRefusals = {
  signIn: 'Sign in, then try again.',
};

export const endpointRefusals = {
  noSuchAddress: 'No such address. Check the link, or go back to the fleet.',
  anotherPersonSendLater:
    'Another person is signed in by now. Sign in as the person who recorded this, then it is sent.',
  anotherPerson: 'Another person is signed in by now.',
  signIn: 'Sign in, then try again.',
  roleLacksThis: (role: string) => `The role ${role} does not include this. Ask a manager.`,
};

export const inTimeRefusals = {
  databaseLate:
    'The database does not answer in time. Readings already acknowledged are kept; try again in a minute.',
};

export const pageRefusals = {
  forStaff: 'This page is for the people who look after sites.',
  failedHere: 'Something failed on our side',
  tryAgain: (requestId: string) => `Try again; if it stays, report it with the number ${requestId}.`,
};

export const problemWords = {
  unkeepable: 'Something in it is no text (a NUL character). Leave it out and send it again.',
  databaseAway:
    'The database does not answer. Readings already acknowledged are kept; try again in a minute.',
  failedHere: 'Something failed on our side',
  tryAgain: (requestId: string) => `Try again; if it stays, report it with the number ${requestId}.`,
};

export const photoRefusals = {
  damaged: 'The picture is damaged: it can’t be read. Take or export it again.',
  tooManyPixels: (width: number, height: number, millions: number) =>
    `The picture has ${width} × ${height} pixels; at most ${millions} million are taken. Make it smaller.`,
  unreadable: (reason: string) =>
    `The picture can’t be read to its end (${reason}). Take or export it again.`,
};

export const fileKinds = {
  sendPicture: 'Send a JPEG, PNG or WebP picture.',
  empty: 'The file is empty.',
  heic: 'This is a HEIC picture, which this server can’t read.',
  heicRemedy:
    'In the phone’s camera settings choose the most compatible format (JPEG), or export the picture as JPEG, and send that.',
  avif: 'This is an AVIF picture, which is not taken here.',
  video: 'This is a video.',
  videoRemedy: 'Take a photo instead.',
  gif: 'This is a GIF.',
  tiff: 'This is a TIFF or a raw camera picture, which is not taken here.',
  bitmap: 'This is a bitmap (BMP), which is not taken here.',
  svg: 'This is an SVG drawing, which is not taken here.',
  webPage: 'This is a web page, whatever its name says.',
  archive: 'This is an archive or an office document.',
  unknown: 'This is no picture that is known here.',
};

export const uploadRefusals = {
  takeSmaller: 'Take the photo with a lower resolution, or make the file smaller.',
  tooLarge: (megabytes: number, remedy: string) => `The file is larger than ${megabytes} MB. ${remedy}`,
  atMost: (megabytes: number) => `At most ${megabytes} MB`,
  noFile: 'No file came. Choose one and send it again.',
  sendAsBody: 'Send the file as the body.',
  brokeOffSendAgain: 'The upload broke off. Send the file again; what arrived twice is kept once.',
  brokeOff: 'The upload broke off.',
};

export const requestRefusals = {
  addressUnreadable: 'The address is not readable.',
  badEscape: 'The address has a % that encodes nothing.',
  noText: 'The address has a character that no text has (NUL).',
  noSuchMethod: (methods: string) => `This method is not known here. There are ${methods}.`,
  tooLarge: (bytes: number) => `A body may have at most ${bytes} bytes. Send less at once.`,
  noPagesHere: 'This process serves no pages.',
};

export const upgradeFailures = {
  databaseAway: 'The database does not answer.',
  failedHere: 'Something failed on our side',
  tryAgain: 'Try again in a minute.',
};

export const topicRefusals = {
  forStaff: 'This topic is for the people who look after sites.',
  notOpen: 'There is nothing of that name, or it is not open to you.',
};

export const liveRefusals = {
  tooSlow: 'too slow: come back with the cursor',
  noMessage: 'This is no message of /live.',
  tooManyTopics: (most: number) => `One connection listens to ${most} topics at most.`,
  awayJustNow: 'not reachable just now: come back in a moment',
};

export const liveUpgradeRefusals = {
  ownPagesOnly: 'Live data is for pages of this site only.',
  noPagesHere: 'This process serves no pages.',
  signIn: 'Sign in, then reload the page.',
};

export const ingestRefusals = {
  noReadingsHere: 'This process takes no readings.',
};

export const doorRefusals = {
  otherSite: 'The request came from another site.',
  onlyRead: 'A shared page is only read.',
  noSuchCall: 'There is nothing at this address, or nothing by this method.',
  notReachable: 'Not reachable just now',
  databaseAway: 'The database does not answer, so Wakeline cannot tell who you are. Try again in a minute.',
};

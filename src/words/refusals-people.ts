export const apiTokenRefusals = {
  notYourSite: 'One of the sites is not among yours. Reload the page and choose again.',
  wrongPassword: 'This is not your password. No token was made.',
  tooMany: (most: number) => `You have ${most} tokens in force. End one that you don’t use any more first.`,
  nameTaken: 'A token of yours has this name. Choose another, so that you can tell them apart.',
};

export const loggerTokenRefusals = {
  endedAlready: 'This token had ended already. Load the page again to see it.',
};

export const myAccountWords = {
  hello: (name: string) => `Hello ${name}`,
  someBrowser: 'A browser',
  browserOn: (browser: string, system: string) => `${browser} on ${system}`,
  beginAgain: 'Begin again: there is no secret that waits for its code.',
  unknownDevice: 'An unknown device',
  wrongPassword: 'This is not your password. Nothing was changed.',
  wrongPasswordShort: 'This is not your password.',
  askedForAddress: 'You asked to sign in to Wakeline with this address from now on.',
  linkConfirms: (hours: number) => `The link below confirms it, once, for ${hours} hours.`,
  useAddress: 'Use this address',
  leaveLetter: 'If you did not ask for it, leave this letter: nothing changes.',
  newAddress: 'Your new address for Wakeline',
  factorInForce: 'A second factor is in force already. End it first.',
  codeWrongCheckClock:
    'This code does not fit. Type the one that your authenticator shows now; is the phone’s clock right?',
  codeWrong: 'This code does not fit.',
  codeWrongOrRecovery:
    'This code does not fit. Type the one that your authenticator shows now, or a recovery code.',
};

export const noticeChoiceRefusals = {
  noSuchZone: 'There is no such time zone. Choose one of the list.',
  roleNotTold: (role: string, kind: string) => `The role ${role} is not told of “${kind}”.`,
  fixed: (kind: string, why: string) => `“${kind}” can’t be changed: ${why}`,
  siteNotOpen: 'One of these sites is not open to you. Reload the page and choose again.',
};

export const invitationWords = {
  hello: (name: string) => `Hello ${name}`,
  someManager: 'A manager',
  siteNotYours: 'One of the sites is not among yours. Reload the page and choose again.',
  oneNotYours: 'One of them is not among yours.',
  chooseCustomerSites: 'Choose the sites that this customer will see.',
  chooseSite: 'Choose at least one site.',
  signsInAlready: (email: string) =>
    `Somebody signs in with ${email} already. Change that person, or use another address.`,
  addressTaken: 'Somebody signs in with this address already.',
  invites: (from: string) =>
    `${from} invites you to Wakeline, where the solar sites in their care are watched.`,
  linkWorksOnce: (days: number) =>
    `The link below works once, for ${days} days. You choose a password of your own.`,
  accept: 'Accept the invitation',
  notExpected: 'If you did not expect this, leave it: without the link nothing happens.',
  subject: 'Your invitation to Wakeline',
  usedBefore: 'This invitation was used or ended before. Reload the page.',
  ownRole: 'Nobody changes their own role or ends their own access. Ask another manager.',
  lastManager: (name: string) => `${name} is the last manager. Make somebody else a manager first.`,
};

export const logoRefusals = {
  pdf: 'This is a PDF. Send the logo as a PNG, JPEG or WebP picture.',
  unreadable: (reason: string) => `The picture can’t be read (${reason}). Export it again as PNG.`,
};

export const shareLinkRefusals = {
  dayOver: 'This day is over at the site. Choose a later one, or leave it empty.',
  endedBefore: 'There is no such shared page, or it was ended before.',
  notGood: 'The link was ended, has run out, or was not copied whole. Ask whoever gave it to you.',
};

export const signInRefusals = {
  notTogether:
    'E-mail and password do not belong together. Check both, or have a letter sent that sets a new password.',
  typeCodeOrRecovery: 'Type the code that your authenticator shows now, or one of your recovery codes.',
  typeCode: 'Type the code of your authenticator.',
};

export const unsubscribeWords = {
  endsNone:
    'This link ends no letters: it was cut short, or the account has ended. Sign in and choose under “Your account”.',
  dayLetter: 'The day’s letter',
};

export const webhookLetters = {
  redirected: 'it answered with a redirect, which is not followed: enter the address that it leads to',
  answered: (status: number) => `it answered ${status}`,
  switchedOff: (name: string) => `The webhook “${name}” is switched off`,
  failedForDays: (days: number, why: string) =>
    `Every call failed for ${days} days, the last because ${why}. What happens from now on is not told to it until you switch it on again.`,
  calledAt: 'It was called at',
  seeCalls: 'See its calls',
  whyThisLetter: (organisation: string, kind: string, choices: string) =>
    `You get this letter because you manage ${organisation} in Wakeline: “${kind}”. ${choices}`,
};

export const webhookRefusals = {
  tooMany: (most: number) => `There are ${most} webhooks already. Remove one, or let one carry more kinds.`,
  testCall: 'A test call',
  testReason: 'Somebody asked for it on the page of this webhook. Nothing has happened.',
  switchOnFirst: 'The webhook is switched off. Switch it on, then send again.',
};

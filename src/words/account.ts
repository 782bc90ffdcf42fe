import { counted } from '../drawings/numbers';

export const accountWords = {
  onThisDeviceOnly: 'You are signed in on this device only',
  onDevices: (others: number) => `You are signed in on ${others + 1} devices`,
  whoYouAre: (person: string, role: string, organisation: string, email: string) =>
    `${person}, ${role} of ${organisation}. You sign in with ${email}.`,
  password: 'Password',
  address: 'Address',
};

export const credentialForms = {
  passwordChanged: 'Your password is changed; other devices were signed out.',
  currentPassword: 'Current password',
  newPassword: 'New password',
  passwordHint: (passwordMin: number) => `At least ${passwordMin} characters. Three or four words do well.`,
  changeThePassword: 'Change the password',
  addressChangesWhen: (email: string) =>
    `Your address changes when the link in it is used. Until then you sign in with ${email}.`,
  letterSent: (sentTo: string) => `A letter is on its way to ${sentTo}`,
  newAddress: 'New address',
  sendTheLetter: 'Send the letter',
};

export const secondFactorWords = {
  secondFactor: 'Second factor',
  inForceSince: 'In force since ',
  recoveryCodesLeft: (recoveryCodesLeft: number) => `. ${counted(recoveryCodesLeft, 'recovery code')} left.`,
  none: 'None. With one, sign-in also asks for a code that an authenticator on your phone shows.',
  endIt: 'End it',
  setOneUp: 'Set one up',
  keepRecoveryCodes:
    'Keep these recovery codes where you will find them without your phone. Each works once; they are not shown again.',
  nowInForce: 'The second factor is in force',
  recoveryCodes: 'Recovery codes',
  iHaveKeptThem: 'I have kept them',
  yourPassword: 'Your password',
  endTheSecondFactor: 'End the second factor',
  goOn: 'Go on',
  leaveIt: 'Leave it',
  readPicture: 'Read this picture with your authenticator, then type the code that it shows.',
  pictureLabel: 'Code for your authenticator; the secret below says the same',
  orTypeSecret: 'Or type in the secret ',
  code: 'Code',
  putItInForce: 'Put it in force',
};

export const sessionsWords = {
  whereYouAreSigned: 'Where you are signed in',
  usedFrom: (address: null | string) => `${address ? `from ${address}, ` : ''}used `,
  thisDevice: 'this device',
  signItOut: 'Sign it out',
  signOutEverywhereElse: 'Sign out everywhere else',
  showMoreDevices: (sessions: number, fEW: number) => `Show ${counted(sessions - fEW, 'more device')}`,
};

export const tokenForm = {
  name: 'Name',
  whatWillUseIt: 'What will use it, so that you know it again.',
  whatItMayDo: 'What it may do',
  sites: 'Sites',
  everySite: 'every site that you see',
  sitesCount: (sites: number) => counted(sites, 'site'),
  onlyTheseSites: 'Only these sites',
  holdsFor: 'Holds for',
  days: (days: number) => `${days} days`,
  yourPassword: 'Your password',
  makeTheToken: 'Make the token',
};

export const tokensWords = {
  makeToken: 'Make a token',
  yourNewToken: 'Your new token',
  endThisToken: 'End this token?',
  tokens: 'Tokens',
  programsInterface: 'What a program can ask for',
  noneATokenLets:
    'None. A token lets a program of yours read from Wakeline, and never do more than you may yourself.',
  endIt: 'End it',
  endTheToken: (name: string) => `End the token ${name}`,
  theTokenHasEnded: (token: string) => `The token ${token} has ended.`,
  ranOut: 'ran out',
  everySite: 'every site',
  expiredOut: (expired: boolean) => `. ${expired ? 'Ran' : 'Runs'} out `,
  used: 'Used ',
  fromLastAddress: (lastAddress: string) => ` from ${lastAddress}`,
  notUsedYet: 'Not used yet',
  sitesCount: (sites: number) => counted(sites, 'site'),
  keepItWhereYour:
    'Keep it where your program finds it and nobody else does. It is not shown again: Wakeline has only its hash.',
  theToken: 'The token',
  copied: 'It is on your clipboard.',
  copyRefused: 'Your browser did not allow it. Select the token and copy it.',
  copyIt: 'Copy it',
  keptIt: 'I have kept it',
  theProgramThatUses: 'The program that uses ',
  endMeans: ' is refused from that moment. It can’t be undone; a new one can be made.',
  endTokenTitle: 'End the token',
  leaveIt: 'Leave it',
};

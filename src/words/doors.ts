export const signInPage = {
  theServerIsOut: 'The server is out of reach. Check the connection, then try again.',
  signIn: 'Sign in',
  wakelineWatchesPvSites:
    'Wakeline watches PV sites with electronics on every module. It never switches them.',
  eMail: 'E-mail',
  password: 'Password',
  codeOfYourAuthenticator: 'Code of your authenticator',
  keepMeSignedIn: 'Keep me signed in on this device',
  passwordForgotten: 'Password forgotten',
};

export const forgotPasswordPage = {
  passwordForgotten: 'Password forgotten',
  lookIntoYourMail: 'Look into your mail',
  letterMayCome: (email: string, resetHours: number) =>
    `If somebody signs in with ${email}, a letter is on its way there. Its link works once, for ${resetHours} hours.`,
  letterHint: 'A letter with a link that sets a new password goes to your address.',
  eMail: 'E-mail',
  sendMeTheLetter: 'Send me the letter',
  toSignIn: 'To sign-in',
};

export const newPasswordTokenPage = {
  aNewPassword: 'A new password',
  isSet: 'Your new password is set',
  everyDeviceWasSigned: 'Every device was signed out. Sign in with the new one.',
  forWhom: (email: string) => `For ${email}. Every device is signed out when it is set.`,
  newPassword: 'New password',
  setIt: 'Set it',
  linkUnusable: 'This link can’t be used',
  toSignIn: 'To sign-in',
  newLetter: 'Have a new letter sent',
};

export const invitationTokenPage = {
  yourInvitation: 'Your invitation',
  welcomeToWakeline: 'Welcome to Wakeline',
  invitesYou: (invitedBy: string, organisation: string, email: string) =>
    `${invitedBy} of ${organisation} invites you. You sign in with ${email}.`,
  yourName: 'Your name',
  password: 'Password',
  begin: 'Begin',
  unusable: 'This invitation can’t be used',
  toSignIn: 'To sign-in',
};

export const confirmEmailTokenPage = {
  yourNewAddress: 'Your new address',
  yourAddressIsChanged: 'Your address is changed',
  done: (done: string) => `From now on you sign in with ${done}.`,
  linkUnusable: 'This link can’t be used',
  question: 'Use this address from now on?',
  questionHint: 'You sign in with the address that this letter was sent to.',
  useThisAddress: 'Use this address',
  toSignIn: 'To sign-in',
};

export const unsubscribeTokenPage = {
  letters: 'Letters',
  linkUnusable: 'This link ends no letters',
  lettersComeAsBefore: 'Letters come as before',
  to: (what: string, email: string) => `${what}, to ${email}.`,
  noMoreOfThese: 'No more of these letters',
  lettersEnded: (what: string, email: string) =>
    `${what}: ${email} gets no letters of this kind. What happens is still shown under Notices.`,
  sendThemAsBefore: 'Send them as before',
  endTheseLetters: 'End these letters?',
  lettersOf: (what: string, email: string) =>
    `${what}, to ${email}. What happens is still shown under Notices when you sign in.`,
  endLettersButton: 'End these letters',
  lettersAboutAString:
    'Letters about a string that does not shut down can’t be ended, nor those about your account.',
  chooseNotices: 'Choose what you are told of',
};

export const sharedTokenPage = {
  notShared: 'Not shared',
  tooManyTries: 'Too many tries',
  nothingIsSharedHere: 'Nothing is shared here',
  lookedAfterBy: (organisation: string) => `Looked after by ${organisation}`,
};

export const problem404Page = {
  nothingIsHere: 'Nothing is here',
  theAddressLeadsNowhere:
    'The address leads nowhere, or to something that is not yours to see. Check the link, or go back to the start.',
};

export const problem500Page = {
  somethingFailedOnOur: 'Something failed on our side',
  tryAgain: (requestId: string) => `Try again; if it stays, report it with the number ${requestId}.`,
};

export const problemPage = {
  nothingIsHere: 'Nothing is here',
  checkAddress: 'Check the address, or go back to the start.',
};

export const newPasswordField = {
  atLeastCharactersThree: (passwordMin: number) =>
    `At least ${passwordMin} characters. Three or four words do well.`,
};

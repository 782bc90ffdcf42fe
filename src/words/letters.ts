import { counted } from '../drawings/numbers';

export const lettersWords = {
  thisDemosLettersGo: 'This demo’s letters go to a post on this machine and no further.',
  aLetterIsMarked: 'A letter is marked as sent only after the mail server took it.',
  noMailServer: (waiting: number) =>
    `${counted(waiting, 'letter waits', 'letters wait')}: no mail server is set`,
  setTheMailServer: 'Set SMTP_URL; what waits goes out by itself.',
  givenUp: (lost: number) => `${counted(lost, 'letter was', 'letters were')} given up`,
  theMailServerRefused: 'The mail server refused it for good, or twelve tries failed: see why below.',
  toBeSent: (waiting: number) => `${counted(waiting, 'letter waits', 'letters wait')} to be sent`,
  noLetterHasBeen: 'No letter has been written',
  everyLetterHasBeen: 'Every letter has been sent',
  sent: 'sent',
  givenUp2: 'given up',
  waitsAttempts: (attempts: number) => `waits, ${counted(attempts, 'try', 'tries')}`,
  waits: 'waits',
  aHandoverWritesTo: 'A handover writes to the customers of its site.',
  nothingHasBeenWritten: 'Nothing has been written yet',
  letters: 'Letters',
  newestFirstAtMost: 'newest first, at most 200',
  toWritten: (to: string) => `to ${to}, written `,
  nextTry: ' Next try ',
  readAsReceived: 'Read it as it was received',
  letterSubject: (subject: string) => `Letter: ${subject}`,
};

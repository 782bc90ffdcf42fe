/** What the browser's own plumbing says where no answer of the server can. */

export const apiSaid = {
  notAsExpected: 'The server did not answer as expected',
  noExplanation: (status: number) => `It answered ${status} without an explanation. Try again in a minute.`,
  failed: 'The request failed',
  answered: (status: number) => `The server answered ${status}.`,
  outOfReach: 'The server is out of reach',
  noAnswer: 'No answer came. Check the connection, then try again; nothing that you typed is lost.',
  uploadBroken: 'The upload broke off. Try again; what arrived twice is kept once.',
};

export const cameraSaid = {
  insecure:
    'The camera needs a secure address (https) or localhost. Typing works, and so does a reader that types.',
  none: 'This browser gives pages no camera. Typing works, and so does a reader that types.',
};

/** What a phone says of what it keeps. */
export const phoneStoreSaid = {
  full: 'The phone has no room left for this. Free some room or send what is waiting, then save again; what you typed stands here.',
  newer: 'A newer version of this page has been opened on this phone. Load this page again.',
  notAllowed:
    'This browser keeps nothing here: a private window, or storage is switched off. Records can only be sent while there is a network.',
  /** `reason` may be empty. */
  failed: (reason: string) => `The phone could not keep this: ${reason || 'no reason given'}. Try again.`,
  photoGone: 'The photo is gone',
  photoGoneRemedy: 'Its bytes are no longer on this phone. Take it again, or leave it out.',
};

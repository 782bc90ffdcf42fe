import { longDate } from '../drawings/times';

export const sharedPages = {
  endedAt: (endedAt: string, timeZone: string) => `ended ${longDate(endedAt, timeZone)}`,
  untilSomebodyEndsIt: 'until somebody ends it',
  ranOutAfter: 'ran out after',
  until: 'until',
  lobbyScreen: 'lobby screen',
  madeBy: (madeBy: string, createdAt: string, timeZone: string) =>
    ` made by ${madeBy}, ${longDate(createdAt, timeZone)} · `,
  inFrameOf: (framedBy: string) => `in a frame of ${framedBy} · `,
  lastUsed: 'last used ',
  neverUsed: 'never used',
  endIt: 'End it',
  endIt2: (link: string) => `End it: ${link}`,
  sharedPages: 'Shared pages',
  onlyManagersSeeThis: 'only managers see this sheet',
  whoeverHasTheLink: (siteName: string) =>
    `Whoever has the link sees the sentences, today’s curve and the energy of ${siteName} without signing in; no address, no telephone, no names, no tests and no papers.`,
  shareThisPage: 'Share this page',
  notReadAnew: 'The links could not be read anew',
  nobodySeesItWithout: 'Nobody sees it without signing in at present.',
  endedAndRunOut: (over: number) => `Ended and run out (${over})`,
  linkShownOnce: 'The link, shown this once',
  endEnding: (ending: string) => `End “${ending}”?`,
  screensAndPeopleThat:
    'Screens and people that use the link see nothing from now on. It can’t be taken up again.',
  leaveIt: 'Leave it',
};

export const shareForm = {
  ordinaryPage: 'An ordinary page, for people with a phone or a computer',
  aLobbyScreenLarge: 'A lobby screen: large, nothing to touch, dark at night',
  linkOf: (link: string) => `Link of “${link}”`,
  keepItNowOnly:
    'Keep it now: only a fingerprint of it is stored. Whoever has it sees the page until it ends.',
  copied: 'Copied.',
  copyByHand: 'It could not be copied: select it above and copy it by hand.',
  copyTheLink: 'Copy the link',
  openIt: 'Open it',
  done: 'Done',
  label: 'Label',
  whereOrForWhom: 'Where or for whom it is, for instance: Lobby.',
  form: 'Form',
  endsOn: 'Ends on',
  lastDayHint: 'The last day on which it works, at the site. Empty: until somebody ends it.',
  framedBy: 'May stand in a page of',
  forALobbyScreen:
    'For a lobby screen that shows several pages: the address of its page, as https://screens.example. Empty: no page may show it in a frame.',
  makeTheLink: 'Make the link',
};

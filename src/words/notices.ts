import { counted } from '../drawings/numbers';

export const choices = {
  giveATimeOf: 'Give a time of day, as 07:30.',
  youGetNoLetters: 'You get no letters; what happens is shown here',
  ofNoticeByLetter: (atOnce: number) => `${counted(atOnce, 'kind')} of notice by letter at once`,
  inTheDaysLetter: (digest: number) => `${digest} in the day’s letter`,
  yourAccount: 'Your account',
  whatYouAreTold: 'What you are told of',
  lettersGoToWhatever: (email: string) =>
    `Letters go to ${email}. Whatever is not switched off is also shown under Notices.`,
  whatYouAreToldOf: 'What you are told of is kept as you chose it.',
  kinds: 'Kinds',
  hours: 'Hours',
  theDaysLetterAt: 'The day’s letter at',
  onDaysOnWhich: 'On days on which there is something to tell.',
  nothingGoesIntoIt: 'Nothing goes into it as you have chosen.',
  quietHoursNoLetters: 'Quiet hours: no letters, but hazards',
  quietHoursNoLetters2: 'Quiet hours: no letters',
  from: 'From',
  to: 'To',
  yourTimeZone: 'Your time zone',
  asTheOrganisation: (replaceAll: string) => `As the organisation, ${replaceAll}`,
  sites: 'Sites',
  saveWhatYouAre: 'Save what you are told of',
};

export const kindRows = {
  howYouAreTold: (name: string) => `How you are told: ${name}`,
  howUsual: (how: string) => `${how} (usual)`,
};

export const noticeList = {
  nTimes: (n: number) => `${n} times`,
  noticesNewestFirst: 'Notices, newest first',
  unread: 'Unread: ',
  wentAndCameBack: (came: string) => `went and came back ${came}`,
  over: 'over',
  unreadItem: (unread: boolean, item: string) => `${unread ? 'Mark as read' : 'Mark as unread'}: ${item}`,
  read: 'Read',
  unread2: 'Unread',
  markAsRead: 'Mark as read',
  markAsUnread: 'Mark as unread',
};

export const noticesWords = {
  showTheseOnly: 'Show these only',
  markAllAsRead: 'Mark all as read',
  chooseWhatYouAre: 'Choose what you are told of',
  notices: 'Notices',
  findANoticeOr: 'Find a notice or a site',
  whichNotices: 'Which notices',
  all: 'All',
  unread: 'Unread',
  about: 'About',
  everything: 'everything',
  site: 'Site',
  everySite: 'every site',
  noNoticeFitsThese: 'No notice fits these filters',
  noNoticesYet: 'No notices yet',
  useFewerWordsOr: 'Use fewer words, or look at everything.',
  older: 'Older',
};

export const siteChoice = {
  ofWhichSites: 'Of which sites',
  everySite: 'Every site',
  chosenSites: 'Chosen sites',
  hazardsComeFromEvery: 'Hazards come from every site all the same.',
  sites: 'Sites',
  findASite: 'Find a site',
};

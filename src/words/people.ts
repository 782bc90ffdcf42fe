import { countAtStart, counted, number } from '../drawings/numbers';

export const peopleWords = {
  name: 'Name',
  you: ' (you)',
  role: 'Role',
  sitesCount: (sites: number) => counted(sites, 'site'),
  secondFactor: 'Second factor',
  tokens: 'Tokens',
  used: 'used ',
  notUsedYet: 'not used yet',
  lastSeen: 'Last seen',
  cannotSignIn: 'cannot sign in',
  change: 'Change',
  canSignInAgain: (name: string) => `${name} can sign in again.`,
  deactivate: 'Deactivate',
  letInAgain: 'Let in again',
  inviteSomebody: 'Invite somebody',
  invitationEnded: (name: string) => `The invitation of ${name} has ended.`,
  people: 'People',
  filterPlaceholder: 'Filter by name or address',
  all: 'All',
  whichPeople: 'Which people',
  canSignIn: 'Can sign in',
  everybody: 'Everybody',
  peopleOfTheOrganisation: 'People of the organisation',
  nobodyFitsTheseFilters: 'Nobody fits these filters',
  inviteHint: 'A letter with a link goes to this address. The link works once, for a week.',
  sendTheInvitation: 'Send the invitation',
  invitationSent: (email: string) => `An invitation is on its way to ${email}.`,
  changePerson: (person: string) => `Change ${person}`,
  save: 'Save',
  wasChanged: (name: string, role: string, role2: string) =>
    `${name} was changed.${role === role2 ? '' : ' The new role holds from the next sign-in.'}`,
  tokensEnded: (person: string) => `The tokens of ${person} have ended.`,
  deactivatePerson: (person: string) => `Deactivate ${person}?`,
  isSignedOutEverywhere: (person: string) =>
    `${person} is signed out everywhere at once and can’t sign in. What ${person} has recorded stays, under the same name.`,
  canNoLongerSign: (person: string) => `${person} can no longer sign in.`,
  leaveIt: 'Leave it',
  invited: 'Invited',
  invitedAs: (email: string, invitedBy: string) => `${email} · by ${invitedBy}, `,
  ranOut: 'ran out',
  inviteAgain: 'Invite again',
  endIt: 'End it',
};

export const personForm = {
  roleManager: 'Manager: everything, and who may do what',
  roleTechnician: 'Commissioning technician: builds, checks and tests sites',
  roleAnalyst: 'O&M analyst: watches sites, changes nothing on them',
  roleCustomer: 'Customer: sees the sites given, in plain words',
  name: 'Name',
  signsInWith: (email: string) => `Signs in with ${email}`,
  eMail: 'E-mail',
  role: 'Role',
  ownRoleFixed: 'Nobody changes their own role.',
  sites: 'Sites',
};

export const personTokens = {
  tokensInForce: (tokens: number, person: string) =>
    `${counted(tokens, 'token')} in force, by which programs act for ${person}. Ended ones let nobody in from that moment.`,
  endTheToken: 'End the token',
  endAllTokens: (tokens: number) => `End all ${tokens} tokens`,
};

export const peopleList = {
  invitationsWaiting: (open: number) => counted(open, 'invitation waits', 'invitations wait'),
  whoCanSignIn: (active: number) =>
    `${active === 1 ? 'One person' : `${countAtStart(active)} people`} can sign in`,
  onlyManager: (managers: undefined | string, waiting: string) =>
    `${managers ?? ''} is the only manager: invite a second one, so that nobody is locked out.${waiting}`,
  managersAmongThem: (managers: number, waiting: string) =>
    `${number(managers)} of them are managers.${waiting}`,
};

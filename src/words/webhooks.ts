import { number } from '../drawings/numbers';

export const deliveryList = {
  test: 'Test',
  statusNullNoAnswer: (status: null | number, latencyMs: number) =>
    ` · ${status === null ? 'no answer' : `answered ${status}`} in ${number(latencyMs)} ms`,
  nextTry: ' · next try ',
  sendAgain: 'Send again',
  sendAgain2: (kind: string, id: string) => `Send again: ${kind}, ${id}`,
  whatWasSentAnd: 'What was sent, and what came back',
  showIt: 'Show it',
  whatWasSent: 'What was sent',
  statusAndLatency: (status: null | number, latencyMs: number) =>
    `: ${status === null ? 'no answer' : status}, ${number(latencyMs)} ms`,
};

export const secretNotice = {
  keepThisSecretWhere: 'Keep this secret where the receiver finds it: it is not shown again',
  secret: 'Secret',
};

export const verifySheet = {
  namesTheCallThe: 'names the call: the same at every try. Keep it, and a call that comes twice counts once.',
  whenItWasSigned: 'when it was signed, in seconds since 1970-01-01 UTC.',
  sha256AndHmac: 'sha256= and the HMAC-SHA256 of time, a full stop and the body, with the secret, in hex.',
  whatAReceiverDoes: 'What a receiver does',
  aCallIsA:
    'A call is a POST with JSON. Answer with any status from 200 to 299 within ten seconds, then do your work. Anything else counts as failed: it is tried again after 1, 5 and 30 minutes, then hours, then daily. Redirects are not followed. Calls can overtake each other: go by the times in them.',
  anExampleThatProves: 'An example that proves a call, in JavaScript for Node',
  showIt: 'Show it',
  example: 'Example',
};

export const webhookBoard = {
  webhooks: 'Webhooks',
  makeATestCall: 'Make a test call',
  itIsSwitchedOff: 'It is switched off.',
  itIsSwitchedOn: 'It is switched on.',
  switchItOff: 'Switch it off',
  switchItOn: 'Switch it on',
  change: 'Change',
  calls: 'Calls',
  whichCalls: 'Which calls',
  all: 'All',
  failed: 'Failed',
  waiting: 'Waiting',
  noCallYet: 'No call yet',
  noneOfThese: 'None of these',
  older: 'Older',
  itCalls: 'It calls',
  toldOf: 'Told of',
  addedBy: (createdBy: string) => `Added by ${createdBy}`,
  newSecret: 'New secret',
  removeIt: 'Remove it',
  changeHook: (hook: string) => `Change ${hook}`,
  save: 'Save',
  theWebhookIsChanged: 'The webhook is changed.',
  makeANewSecret: 'Make a new secret?',
  callsAreSignedWith: 'Calls are signed with it from then on. A receiver that has the old one refuses them.',
  makeANewSecret2: 'Make a new secret',
  leaveIt: 'Leave it',
  removeHook: (hook: string) => `Remove ${hook}?`,
  itIsNotCalled: 'It is not called any more. What it was called with stays in the record of who did what.',
};

export const webhookForm = {
  beginsWithHttpsAnd: 'Begins with https:// and is reached over the public network.',
  beginsWithHttpsOr: 'Begins with https://, or is on this machine: it is a demo.',
  addressesInsideYourNetwork: 'Addresses inside your network are allowed here.',
  name: 'Name',
  whatIsCalledSo: 'What is called, so that others know.',
  address: 'Address',
  itIsToldOf: 'It is told of',
};

export const webhooksWords = {
  switchedOff: 'switched off',
  fails: 'fails',
  on: 'on',
  webhook: 'Webhook',
  toldOf: 'Told of',
  lastTaken: 'Last taken',
  waiting: 'Waiting',
  state: 'State',
  addAWebhook: 'Add a webhook',
  webhooks: 'Webhooks',
  webhooksOfTheOrganisation: 'Webhooks of the organisation',
  noneYet: 'None yet',
  addItAndShow: 'Add it and show its secret',
};

export const webhooksExample = {
  importCreateHmacTimingSafeEqualFrom:
    "import { createHmac, timingSafeEqual } from 'node:crypto';\n\n// headers: names in small letters; body: the bytes as they came, before any parsing\nexport function isFromWakeline(headers, body, secret, nowS = Date.now() / 1000) {\n  const time = headers['wakeline-time'] ?? '';\n  const given = Buffer.from(headers['wakeline-signature'] ?? '');\n  const mine = 'sha256=' + createHmac('sha256', secret).update(time + '.').update(body).digest('hex');\n  const isRecent = Math.abs(nowS - Number(time)) <= 300; // an old call is not played again\n  return isRecent && given.length === mine.length && timingSafeEqual(given, Buffer.from(mine));\n}\n",
};

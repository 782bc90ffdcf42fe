import type { StepKey } from '../domain/commissioning/steps';

/** Heads of the tables of an organisation that people download. Heads of tables that are read back stand where they are read. */

export const auditHeads = {
  atUtc: 'at (UTC)',
  person: 'person',
  from: 'from',
  action: 'action',
  subject: 'subject',
  site: 'site',
  reason: 'reason',
  before: 'before',
  after: 'after',
};

export const caseHeads = {
  number: 'number',
  title: 'title',
  site: 'site',
  strings: 'strings',
  units: 'units',
  kind: 'kind',
  origin: 'origin',
  state: 'state',
  assignedTo: 'assigned to',
  due: 'due',
  overdue: 'overdue',
  openedBy: 'opened by',
  openedUtc: 'opened (UTC)',
  changedUtc: 'changed (UTC)',
  closedUtc: 'closed (UTC)',
  lookedAtAgain: 'looked at again',
};

export const causeHeads = {
  site: 'site',
  kind: 'kind',
  what: 'what',
  strings: 'strings',
  units: 'units',
  sinceUtc: 'since (UTC)',
  foundUtc: 'found (UTC)',
  overUtc: 'over (UTC)',
  cameBack: 'came back',
  confidence: 'confidence',
  lossADayKWh: 'loss a day (kWh)',
  lossUntilNowKWh: 'loss so far (kWh)',
  lossUntilNowMoney: (currency: string | null) => `loss so far (${currency ?? 'no currency'})`,
  acknowledgedBy: 'acknowledged by',
  case: 'case',
};

export const commissioningHeads = {
  site: 'site',
  place: 'place',
  strings: 'strings',
  units: 'units',
  steps: {
    as_built: 'as built',
    install_checks: 'install checks',
    meter_readings: 'meter readings',
    roll_call: 'roll call',
    shutdown_test: 'shutdown test',
    handover: 'handover',
  } satisfies Record<StepKey, string>,
  pointsThatBlock: 'points that block',
  whatBlocks: 'what blocks',
  lastHand: 'last hand',
  lastHandAtUtc: 'last hand at (UTC)',
};

export const figureHeads = {
  energyAcKWh: 'energy AC (kWh)',
  energyDcKWh: 'energy DC (kWh)',
  specificYieldKWhKWp: 'specific yield (kWh/kWp)',
  insolationInThePlaneKWhM: 'insolation in the plane (kWh/m²)',
  referenceYieldH: 'reference yield (h)',
  arrayYieldH: 'array yield (h)',
  finalYieldH: 'final yield (h)',
  performanceRatio: 'performance ratio',
  performanceRatioAt25C: 'performance ratio at 25 °C',
  performanceRatioAnnual: 'performance ratio at the temperature of the year',
  moduleTemperatureByLightC: 'module temperature weighted by light (°C)',
  availability: 'availability',
  availabilityOwn: 'availability without minutes of grid loss',
  lostMin: 'lost (min)',
  lostWithoutGridMin: 'lost without grid (min)',
  deratedOrCurtailedMin: 'derated or curtailed (min)',
  dataOfThoseDue: 'data of those due',
  lightMeasured: 'light measured',
  moduleTemperatureMeasured: 'module temperature measured',
  day: 'day',
  site: 'site',
  place: 'place',
  yearBeforeKWh: 'energy AC of the same whole days a year before (kWh)',
  worth: (currency: string | null) => `worth (${currency ?? 'no currency set'})`,
};

export const lowOutputHeads = {
  site: 'site',
  string: 'string',
  plane: 'plane',
  sinceLocalDay: 'since (local day)',
  judgedLocalDay: 'judged (local day)',
  missingShare: 'missing share',
  lossADayKWh: 'loss a day (kWh)',
  lossADayAtLeastKWh: 'loss a day, at least (kWh)',
  lossADayAtMostKWh: 'loss a day, at most (kWh)',
  lossADayMoney: (currency: string | null) => `loss a day (${currency ?? 'no currency set'})`,
  lostSinceFoundKWh: 'lost since found (kWh)',
  signature: 'signature',
  whatItLooksLike: 'what it looks like',
  heldAgainst: 'held against',
  figuresOf: 'figures of',
  confidence: 'confidence',
  openCase: 'open case',
};

export const noticeHeads = {
  atUtc: 'at (UTC)',
  kind: 'kind',
  site: 'site',
  notice: 'notice',
  whatFollows: 'what follows',
  cameBack: 'came back',
  overSinceUtc: 'over since (UTC)',
  readUtc: 'read (UTC)',
};

export const peopleHeads = {
  name: 'name',
  eMail: 'e-mail',
  role: 'role',
  maySignIn: 'may sign in',
  secondFactor: 'second factor',
  lastSeenUtc: 'last seen (UTC)',
  sites: 'sites',
  allSites: 'all',
};

export const deliveryHeads = {
  notedUtc: 'noted (UTC)',
  call: 'call',
  kind: 'kind',
  site: 'site',
  state: 'state',
  tries: 'tries',
  lastStatus: 'last status',
  lastLatencyMs: 'last latency (ms)',
  lastFailure: 'last failure',
};

/** What a cell says where a table holds yes or no. */
export const csvCells = {
  yes: 'yes',
  no: 'no',
};

import type { EventKind, InForce, InverterStatus } from '../domain/verdicts/codes';
import type { EventUnits, RecoveredFrom } from '../domain/verdicts/event-words';
import { listed } from '../drawings/numbers';

/** What each kind of event is called where one chooses among them. */
export const eventKindTexts: Record<EventKind, string> = {
  units_stuck: 'Stuck in shutdown',
  units_not_shutting_down: 'Not shutting down',
  units_unconfirmed: 'Shutdown unconfirmed',
  units_recovered: 'Recovered',
  units_silent: 'Fell silent',
  units_back: 'Heard again',
  units_heard: 'First heard',
  string_finding: 'String finding',
  string_finding_ended: 'String finding ended',
  command: 'Command',
  inverter_status: 'Inverter status',
  logger_connected: 'Logger connected',
  logger_lost: 'Logger lost',
  gateway_silent: 'Gateway silent',
  gateway_back: 'Gateway heard again',
  roll_call_started: 'Roll call started',
  roll_call_stopped: 'Roll call stopped',
  roster_changed: 'Roster changed',
  hazard_acknowledged: 'Hazard taken on',
  cause_opened: 'Cause found',
  cause_changed: 'Cause changed',
  cause_closed: 'Cause over',
  cause_reopened: 'Cause is back',
  case_opened: 'Case opened',
  case_assigned: 'Case assigned',
  case_mentioned: 'Mentioned in a case',
  case_closed: 'Case closed',
  case_reopened: 'Case reopened',
  planned_work: 'Planned work',
  handover_made: 'Handed over',
};

/** What is in force, as it stands at the beginning of a line. */
export const commandTexts: Record<InForce, string> = {
  initiator: 'Shutdown by the initiator',
  keep_alive_lost: 'Keep-alive lost',
  power_lost: 'Shutdown: power lost',
  released: 'Released',
};

const subject = ({ positions, count }: EventUnits): string => {
  if (positions.length > 0)
    return positions.length === 1 ? `Position ${positions[0]}` : `Positions ${listed(positions)}`;
  return count === null ? 'Units' : count === 1 ? 'One unit' : `${count} units`;
};
const many = ({ positions, count }: EventUnits): boolean =>
  positions.length > 0 ? positions.length > 1 : count !== 1;
const is = (units: EventUnits): string => (many(units) ? 'are' : 'is');

const RECOVERED: Record<RecoveredFrom, [one: string, many: string]> = {
  stuck: ['passes again', 'pass again'],
  not_shutting_down: ['has shut down', 'have shut down'],
  unconfirmed: ['is confirmed', 'are confirmed'],
  other: ['is right again', 'are right again'],
};
const INVERTER: Record<InverterStatus | 'other', string> = {
  standby: 'stands by',
  running: 'runs',
  derated: 'is derated',
  curtailed: 'is curtailed',
  grid_lost: 'has lost the grid',
  fault: 'reports a fault',
  other: 'changed its state',
};
const CASE_DID = {
  case_opened: 'opened',
  case_assigned: 'assigned',
  case_mentioned: 'commented on',
  case_closed: 'closed',
  case_reopened: 'reopened',
};

const by = (person: string): string => (person ? ` by ${person}` : '');
const titled = (title: string, rest: string): string => (rest ? `${title}: ${rest}` : title);

/** One line for one event. A name that is not known is empty, and is left out. */
export const eventSaid = {
  stuck: (units: EventUnits) => `${subject(units)} ${is(units)} stuck in shutdown`,
  notShuttingDown: (units: EventUnits) => `${subject(units)} did not shut down`,
  unconfirmed: (units: EventUnits) => `Shutdown of ${subject(units).toLowerCase()} is not confirmed`,
  recovered: (units: EventUnits, from: RecoveredFrom) =>
    `${subject(units)} ${RECOVERED[from][many(units) ? 1 : 0]}`,
  silent: (units: EventUnits) => `${subject(units)} fell silent`,
  back: (units: EventUnits) => `${subject(units)} ${is(units)} heard again`,
  heard: (units: EventUnits) => `${subject(units)} answered the roll call`,
  stringNotShuttingDown: 'Voltage stands on the string while shutdown is commanded',
  stringStuck: 'Some units do not pass, positions unknown',
  stringUnexplained: 'The string’s voltage is not explained by its units',
  stringExplained: 'The string’s voltage is explained again',
  someCommand: 'A command came in force',
  command: (inForce: InForce, where: string, saidBy: string) =>
    `${commandTexts[inForce]}${where ? `, ${where}` : ''}${saidBy ? `, by ${saidBy}` : ''}`,
  inverter: (inverter: string, status: InverterStatus | 'other') =>
    `${inverter || 'The inverter'} ${INVERTER[status]}`,
  loggerReports: (logger: string) => (logger ? `The logger ${logger} reports` : 'The logger reports'),
  loggerLost: (logger: string) =>
    logger ? `The logger ${logger} stopped reporting` : 'The logger stopped reporting',
  gatewaySilent: (gateway: string, unitsBehind: number) =>
    `${gateway || 'A gateway'} fell silent${unitsBehind > 0 ? `, ${unitsBehind} ${unitsBehind === 1 ? 'unit' : 'units'} behind it` : ''}`,
  gatewayBack: (gateway: string) => `${gateway || 'A gateway'} is heard again`,
  rollCallStarted: (person: string, personOnSite: string) =>
    `Roll call started${by(person)}${personOnSite ? `, on site: ${personOnSite}` : ''}`,
  rollCallStopped: (person: string) => `Roll call stopped${by(person)}`,
  asBuiltChanged: 'The as-built was changed',
  hazardTakenOn: (person: string, headline: string) =>
    `${person || 'Somebody'} took on: ${headline || 'a hazard'}`,
  cause: (kind: EventKind, headline: string) => titled(eventKindTexts[kind], headline),
  case: (kind: keyof typeof CASE_DID, number: number | null, person: string, title: string) =>
    titled(`Case ${number === null ? '' : `${number} `}${CASE_DID[kind]}${by(person)}`, title),
  handover: (person: string) => `Handover papers made${by(person)}`,
  plannedWork: (reason: string) => titled('Planned work', reason),
};

/** What an event keeps with it, for programs that read it. */
export const keptWithEvents = {
  unitsOfSilentGateway:
    'Whether its units follow a shutdown can not be confirmed until they are heard again.',
};

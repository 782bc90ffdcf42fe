import { COMMANDS, EVENT_KINDS, type EventKind, type InForce } from './codes';

/** What an event says, in one line, for lists, charts and mail. */
export type EventTone = 'rust' | 'crimson' | 'plum' | 'slate' | 'petrol';
export interface EventWords {
  words: string;
  tone: EventTone;
}
type Detail = Readonly<Record<string, unknown>>;

/** What each kind of event is called where one chooses among them. */
export const KIND_WORDS: Record<EventKind, string> = {
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
/** The kinds to choose among, by their words. */
export const KINDS = EVENT_KINDS.map((value) => ({ value, label: KIND_WORDS[value] })).sort((a, b) =>
  a.label.localeCompare(b.label),
);

const text = (detail: Detail, key: string): string => (typeof detail[key] === 'string' ? detail[key] : '');
const positionsOf = (detail: Detail): number[] =>
  Array.isArray(detail.positions) ? detail.positions.filter((p): p is number => typeof p === 'number') : [];

const NAMED_MAX = 8;

/** "Position 5", "Positions 5 and 9", "14 units"; without positions the count of serials, or "Units". */
function unitsOf(detail: Detail): { subject: string; many: boolean } {
  const at = positionsOf(detail);
  const serials = Array.isArray(detail.serials) ? detail.serials.length : 0;
  if (at.length === 0 && serials > 0)
    return { subject: serials === 1 ? 'One unit' : `${serials} units`, many: serials > 1 };
  if (at.length === 0) return { subject: 'Units', many: true };
  if (at.length === 1) return { subject: `Position ${at[0]}`, many: false };
  if (at.length > NAMED_MAX) return { subject: `${at.length} units`, many: true };
  return { subject: `Positions ${at.slice(0, -1).join(', ')} and ${at.at(-1)}`, many: true };
}

const COMMAND_WORDS: Record<InForce, string> = {
  initiator: 'Shutdown by the initiator',
  keep_alive_lost: 'Keep-alive lost',
  power_lost: 'Shutdown: power lost',
  released: 'Released',
};
const INVERTER_WORDS: Record<string, string> = {
  standby: 'stands by',
  running: 'runs',
  derated: 'is derated',
  curtailed: 'is curtailed',
  grid_lost: 'has lost the grid',
  fault: 'reports a fault',
};

/** What is in force, as it stands at the beginning of a line. */
export const commandWords = (inForce: InForce): string => COMMAND_WORDS[inForce];

const RECOVERED_FROM: Record<string, [one: string, many: string]> = {
  stuck: ['passes again', 'pass again'],
  not_shutting_down: ['has shut down', 'have shut down'],
  unconfirmed: ['is confirmed', 'are confirmed'],
};

/** One line for one event; what a detail lacks is left out, never guessed. */
export function eventWords(kind: EventKind, detail: Detail): EventWords {
  const { subject, many } = unitsOf(detail);
  const is = many ? 'are' : 'is';
  const behind = Number(detail.units ?? 0);
  const at = (key: string, before = ' '): string =>
    text(detail, key) ? `${before}${text(detail, key)}` : '';
  switch (kind) {
    case 'units_stuck':
      return { words: `${subject} ${is} stuck in shutdown`, tone: 'rust' };
    case 'units_not_shutting_down':
      return { words: `${subject} did not shut down`, tone: 'crimson' };
    case 'units_unconfirmed':
      return { words: `Shutdown of ${subject.toLowerCase()} is not confirmed`, tone: 'slate' };
    case 'units_recovered':
      return {
        words: `${subject} ${RECOVERED_FROM[text(detail, 'from')]?.[many ? 1 : 0] ?? `${is} right again`}`,
        tone: 'petrol',
      };
    case 'units_silent':
      return { words: `${subject} fell silent`, tone: 'slate' };
    case 'units_back':
      return { words: `${subject} ${is} heard again`, tone: 'petrol' };
    case 'units_heard':
      return { words: `${subject} answered the roll call`, tone: 'petrol' };
    case 'string_finding':
      return text(detail, 'finding') === 'not_shutting_down'
        ? { words: 'Voltage stands on the string while shutdown is commanded', tone: 'crimson' }
        : text(detail, 'finding') === 'stuck_positions_unknown'
          ? { words: 'Some units do not pass, positions unknown', tone: 'rust' }
          : { words: 'The string’s voltage is not explained by its units', tone: 'rust' };
    case 'string_finding_ended':
      return { words: 'The string’s voltage is explained again', tone: 'petrol' };
    case 'command': {
      const inForce = COMMANDS.find((c) => c === detail.inForce);
      const where = text(detail, 'zone') || text(detail, 'transmitter');
      if (!inForce) return { words: 'A command came in force', tone: 'slate' };
      return {
        words: `${commandWords(inForce)}${where ? `, ${where}` : ''}${at('saidBy', ', by ')}`,
        tone: inForce === 'released' ? 'petrol' : 'plum',
      };
    }
    case 'inverter_status': {
      const status = INVERTER_WORDS[text(detail, 'status')] ?? 'changed its state';
      return { words: `${text(detail, 'inverter') || 'The inverter'} ${status}`, tone: 'slate' };
    }
    case 'logger_connected':
      return { words: `The logger${at('logger')} reports`, tone: 'petrol' };
    case 'logger_lost':
      return { words: `The logger${at('logger')} stopped reporting`, tone: 'slate' };
    case 'gateway_silent':
      return {
        words: `${text(detail, 'gateway') || 'A gateway'} fell silent${behind > 0 ? `, ${behind} ${behind === 1 ? 'unit' : 'units'} behind it` : ''}`,
        tone: 'slate',
      };
    case 'gateway_back':
      return { words: `${text(detail, 'gateway') || 'A gateway'} is heard again`, tone: 'petrol' };
    case 'roll_call_started':
      return {
        words: `Roll call started${at('person', ' by ')}${at('personOnSite', ', on site: ')}`,
        tone: 'petrol',
      };
    case 'roll_call_stopped':
      return { words: `Roll call stopped${at('person', ' by ')}`, tone: 'slate' };
    case 'roster_changed':
      return { words: 'The as-built was changed', tone: 'slate' };
    case 'hazard_acknowledged':
      return {
        words: `${text(detail, 'person') || 'Somebody'} took on: ${text(detail, 'headline') || 'a hazard'}`,
        tone: 'slate',
      };
    case 'cause_opened':
    case 'cause_changed':
    case 'cause_closed':
    case 'cause_reopened':
      return {
        words: `${KIND_WORDS[kind]}${at('headline', ': ')}`,
        tone: kind === 'cause_closed' ? 'petrol' : detail.hazard === true ? 'crimson' : 'rust',
      };
    case 'case_opened':
    case 'case_assigned':
    case 'case_mentioned':
    case 'case_closed':
    case 'case_reopened':
      return {
        words: `Case ${typeof detail.number === 'number' ? `${detail.number} ` : ''}${CASE_DID[kind]}${at('person', ' by ')}${at('title', ': ')}`,
        tone: kind === 'case_closed' ? 'petrol' : kind === 'case_reopened' ? 'rust' : 'slate',
      };
    case 'handover_made':
      return { words: `Handover papers made${at('person', ' by ')}`, tone: 'petrol' };
    case 'planned_work':
      return { words: `Planned work${at('reason', ': ')}`, tone: 'slate' };
  }
}

const CASE_DID = {
  case_opened: 'opened',
  case_assigned: 'assigned',
  case_mentioned: 'commented on',
  case_closed: 'closed',
  case_reopened: 'reopened',
} as const;

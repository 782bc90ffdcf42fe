import { COMMANDS, EVENT_KINDS, type EventKind, type InForce } from '../../domain/verdicts/codes';
import { countAtStart, counted, listed } from '../../drawings/numbers';
import type { EventItem } from '../../schemas/api/now';

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
};
export const KINDS = EVENT_KINDS.map((value) => ({ value, label: KIND_WORDS[value] })).sort((a, b) =>
  a.label.localeCompare(b.label),
);

type Detail = EventItem['detail'];
const text = (detail: Detail, key: string): string => {
  const value = detail[key];
  return typeof value === 'string' || typeof value === 'number' ? String(value) : '';
};
const numbers = (detail: Detail, key: string): number[] => {
  const value = detail[key];
  return Array.isArray(value) ? value.filter((v): v is number => typeof v === 'number') : [];
};
const listOf = (detail: Detail, key: string): unknown[] => {
  const value = detail[key];
  return Array.isArray(value) ? value : [];
};

const NAMED_MAX = 8;

/** "Units 3 and 11", "14 units": positions while they are few. */
function who(detail: Detail): { words: string; one: boolean } {
  const positions = numbers(detail, 'positions');
  const n = positions.length || listOf(detail, 'serials').length;
  if (positions.length === 0 && n > 0)
    return { words: `${countAtStart(n)} ${n === 1 ? 'unit' : 'units'}`, one: n === 1 };
  if (n === 0) return { words: 'Units', one: false };
  if (n > NAMED_MAX) return { words: counted(n, 'unit'), one: false };
  return { words: n === 1 ? `Unit ${positions[0]}` : `Units ${listed(positions)}`, one: n === 1 };
}

const IN_FORCE: Record<InForce, string> = {
  initiator: 'Initiator opened',
  keep_alive_lost: 'Keep-alive gone',
  power_lost: 'Power gone',
  released: 'Released',
};
const FINDINGS: Record<string, string> = {
  not_shutting_down: 'its conductors kept their voltage against a command',
  stuck_positions_unknown: 'units stuck in shutdown, positions unknown',
  unexplained_voltage: 'a voltage that its units do not explain',
};
const STATUS: Record<string, string> = {
  standby: 'in standby',
  running: 'running',
  derated: 'derated',
  curtailed: 'curtailed',
  grid_lost: 'without grid',
  fault: 'in fault',
};

/** What happened, in words, without the site and the string, which stand beside it. */
export function eventInWords({ kind, detail }: Pick<EventItem, 'kind' | 'detail'>): string {
  const { words, one } = who(detail);
  switch (kind) {
    case 'units_stuck':
      return `${words} ${one ? 'is' : 'are'} stuck in shutdown`;
    case 'units_not_shutting_down':
      return `${words} did not shut down`;
    case 'units_unconfirmed':
      return `The shutdown of ${words.charAt(0).toLowerCase()}${words.slice(1)} can't be confirmed`;
    case 'units_recovered':
      return `${words} recovered${RECOVERED_FROM[text(detail, 'from')] ?? ''}`;
    case 'units_silent':
      return `${words} fell silent`;
    case 'units_back':
      return `${words} ${one ? 'is' : 'are'} heard again`;
    case 'units_heard':
      return `${words} answered for the first time`;
    case 'string_finding':
      return `Finding: ${FINDINGS[text(detail, 'finding')] ?? 'something is not as it should be'}`;
    case 'string_finding_ended':
      return `Finding ended: ${FINDINGS[text(detail, 'finding')] ?? 'it is as it should be again'}`;
    case 'command': {
      const where = text(detail, 'zone') || text(detail, 'transmitter');
      const inForce = COMMANDS.find((c) => c === detail.inForce);
      const by = text(detail, 'saidBy');
      return `${inForce ? IN_FORCE[inForce] : 'A command'}${where ? `: ${where}` : ''}${by ? `, by ${by}` : ''}`;
    }
    case 'inverter_status':
      return `${text(detail, 'inverter') || 'An inverter'} is ${STATUS[text(detail, 'status')] ?? 'in another state'}`;
    case 'logger_connected':
      return `Logger ${text(detail, 'logger')} connected`.replace('  ', ' ');
    case 'logger_lost':
      return `Logger ${text(detail, 'logger')} is not heard any more`.replace('  ', ' ');
    case 'gateway_silent': {
      const units = Number(detail.units);
      return `${text(detail, 'gateway') || 'A gateway'} fell silent${units > 0 ? `, ${counted(units, 'unit')} behind it` : ''}`;
    }
    case 'gateway_back':
      return `${text(detail, 'gateway') || 'A gateway'} is heard again`;
    case 'roll_call_started': {
      const onSite = text(detail, 'personOnSite');
      return `Roll call started${onSite ? `, ${onSite} on site` : ''}`;
    }
    case 'roll_call_stopped':
      return 'Roll call stopped';
    case 'roster_changed':
      return `Roster ${text(detail, 'version')} went to the logger`.replace('  ', ' ');
    case 'hazard_acknowledged':
      return `${text(detail, 'person') || 'Somebody'} took on: ${text(detail, 'headline') || 'a hazard'}`;
  }
}

const RECOVERED_FROM: Record<string, string> = {
  stuck: ' and pass again',
  not_shutting_down: ' and have shut down',
  unconfirmed: ' and are confirmed',
};

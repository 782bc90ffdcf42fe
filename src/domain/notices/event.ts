import type { EventKind } from '../verdicts/codes';
import type { NoticeKind } from './kinds';

/** What an event is to people: which kind of notice, whether it comes, goes or merely happens, and to whom. */

export interface NoticeEvent {
  id: number;
  kind: EventKind;
  at: Date;
  recordedAt: Date;
  siteId: number;
  detail: Readonly<Record<string, unknown>>;
}

export interface Told {
  kind: NoticeKind;
  /** comes and goes: of a subject that lasts; happens: once. */
  phase: 'comes' | 'goes' | 'happens';
  /** What lasts; null for what merely happens. */
  subject: string | null;
  /** Everybody whose role and sites fit, these people, or whoever opened the case. */
  to: 'everybody' | 'opener' | readonly number[];
  /** Told only after it has lasted so long. */
  waitS: number;
  /** Never a letter: it explains one that went out. */
  inProductOnly: boolean;
}

/** A logger that is back within the hour was not worth a word. */
export const LOGGER_WAIT_S = 3600;
/** What went away is over once it stayed away so long; coming back before that is the same line. */
export const OVER_AFTER_S = 30 * 60;
/** What merely happened is told while it is news; recorded later than this after it happened, it is history. */
export const NEWS_FOR_S = 3600;

const text = (value: unknown): string | null => (typeof value === 'string' && value !== '' ? value : null);
const people = (value: unknown): number[] =>
  (Array.isArray(value) ? value : [value]).filter((v): v is number => Number.isInteger(v));

const told = (kind: NoticeKind, more: Partial<Told> = {}): Told => ({
  kind,
  phase: 'happens',
  subject: null,
  to: 'everybody',
  waitS: 0,
  inProductOnly: false,
  ...more,
});

function ofCause({ kind, detail }: NoticeEvent): Told[] {
  const cause = text(detail.cause);
  if (!cause) return [];
  const notice: NoticeKind =
    detail.hazard === true
      ? 'hazard'
      : detail.kind === 'silent' || detail.kind === 'unconfirmed'
        ? 'silence'
        : 'cause';
  return [told(notice, { phase: kind === 'cause_closed' ? 'goes' : 'comes', subject: `cause:${cause}` })];
}

function ofLogger({ siteId }: NoticeEvent, logger: string | null, phase: Told['phase']): Told[] {
  if (!logger) return [];
  const waitS = phase === 'comes' ? LOGGER_WAIT_S : 0;
  return [told('logger', { phase, subject: `logger:${siteId}:${logger}`, waitS })];
}

/** @returns nothing for what is not worth telling. A silent gateway is told as the cause of its silent units. */
export function toldOf(event: NoticeEvent): Told[] {
  const { kind, detail } = event;
  const parts = (): Told[] => {
    switch (kind) {
      case 'cause_opened':
      case 'cause_reopened':
      case 'cause_closed':
        return ofCause(event);
      case 'logger_lost':
      case 'logger_connected':
        return ofLogger(event, text(detail.logger), kind === 'logger_lost' ? 'comes' : 'goes');
      case 'hazard_acknowledged':
        return [told('hazard', { inProductOnly: true })];
      case 'case_opened':
        return [told(detail.origin === 'customer' ? 'report' : 'case')];
      case 'case_assigned':
        return [told('case_mine', { to: people(detail.assigneeId) }), told('own_report', { to: 'opener' })];
      case 'case_mentioned':
        return [told('case_mine', { to: people(detail.mentions) })];
      case 'case_closed':
      case 'case_reopened':
        return [told('own_report', { to: 'opener' }), told('case')];
      case 'roll_call_stopped':
        return [told('roll_call')];
      case 'handover_made':
        return [told('handover')];
      case 'planned_work':
        return [told('planned_work')];
      default:
        return [];
    }
  };
  const late = event.recordedAt.getTime() - event.at.getTime() > NEWS_FOR_S * 1000;
  return parts().filter((t) => t.phase !== 'happens' || !late);
}

/** The kinds of event that anybody is ever told of. */
export const TOLD_EVENTS = [
  'cause_opened',
  'cause_reopened',
  'cause_closed',
  'logger_lost',
  'logger_connected',
  'hazard_acknowledged',
  'case_opened',
  'case_assigned',
  'case_mentioned',
  'case_closed',
  'case_reopened',
  'roll_call_stopped',
  'handover_made',
  'planned_work',
] as const satisfies readonly EventKind[];

import { eventKindTexts, eventSaid as said } from '../../words/domain-verdicts-events';
import { COMMANDS, EVENT_KINDS, INVERTER_STATUSES, type EventKind } from './codes';

/** What an event says, in one line, for lists, charts and mail. */
export type EventTone = 'rust' | 'crimson' | 'plum' | 'slate' | 'petrol';
export interface EventWords {
  words: string;
  tone: EventTone;
}
type Detail = Readonly<Record<string, unknown>>;

/** Units that an event speaks of: by position where they are few and known, else by their count; null: not known. */
export interface EventUnits {
  positions: readonly number[];
  count: number | null;
}
const RECOVERED_FROM = ['stuck', 'not_shutting_down', 'unconfirmed'] as const;
export type RecoveredFrom = (typeof RECOVERED_FROM)[number] | 'other';

/** What each kind of event is called where one chooses among them. */
export const KIND_WORDS: Record<EventKind, string> = eventKindTexts;
/** The kinds to choose among, by their words. */
export const KINDS = EVENT_KINDS.map((value) => ({ value, label: KIND_WORDS[value] })).sort((a, b) =>
  a.label.localeCompare(b.label),
);

const text = (detail: Detail, key: string): string => (typeof detail[key] === 'string' ? detail[key] : '');
const positionsOf = (detail: Detail): number[] =>
  Array.isArray(detail.positions) ? detail.positions.filter((p): p is number => typeof p === 'number') : [];

const NAMED_MAX = 8;

function unitsOf(detail: Detail): EventUnits {
  const positions = positionsOf(detail);
  const serials = Array.isArray(detail.serials) ? detail.serials.length : 0;
  if (positions.length > NAMED_MAX) return { positions: [], count: positions.length };
  return { positions, count: positions.length || serials || null };
}

/** One line for one event; what a detail lacks is left out, never guessed. */
export function eventWords(kind: EventKind, detail: Detail): EventWords {
  const units = unitsOf(detail);
  const its = (key: string): string => text(detail, key);
  const line = (words: string, tone: EventTone): EventWords => ({ words, tone });
  switch (kind) {
    case 'units_stuck':
      return line(said.stuck(units), 'rust');
    case 'units_not_shutting_down':
      return line(said.notShuttingDown(units), 'crimson');
    case 'units_unconfirmed':
      return line(said.unconfirmed(units), 'slate');
    case 'units_recovered': {
      const from = RECOVERED_FROM.find((f) => f === detail.from) ?? 'other';
      return line(said.recovered(units, from), 'petrol');
    }
    case 'units_silent':
      return line(said.silent(units), 'slate');
    case 'units_back':
      return line(said.back(units), 'petrol');
    case 'units_heard':
      return line(said.heard(units), 'petrol');
    case 'string_finding':
      return its('finding') === 'not_shutting_down'
        ? line(said.stringNotShuttingDown, 'crimson')
        : line(
            its('finding') === 'stuck_positions_unknown' ? said.stringStuck : said.stringUnexplained,
            'rust',
          );
    case 'string_finding_ended':
      return line(said.stringExplained, 'petrol');
    case 'command': {
      const inForce = COMMANDS.find((c) => c === detail.inForce);
      if (!inForce) return line(said.someCommand, 'slate');
      const where = its('zone') || its('transmitter');
      return line(said.command(inForce, where, its('saidBy')), inForce === 'released' ? 'petrol' : 'plum');
    }
    case 'inverter_status': {
      const status = INVERTER_STATUSES.find((s) => s === detail.status) ?? 'other';
      return line(said.inverter(its('inverter'), status), 'slate');
    }
    case 'logger_connected':
      return line(said.loggerReports(its('logger')), 'petrol');
    case 'logger_lost':
      return line(said.loggerLost(its('logger')), 'slate');
    case 'gateway_silent':
      return line(said.gatewaySilent(its('gateway'), Number(detail.units ?? 0)), 'slate');
    case 'gateway_back':
      return line(said.gatewayBack(its('gateway')), 'petrol');
    case 'roll_call_started':
      return line(said.rollCallStarted(its('person'), its('personOnSite')), 'petrol');
    case 'roll_call_stopped':
      return line(said.rollCallStopped(its('person')), 'slate');
    case 'roster_changed':
      return line(said.asBuiltChanged, 'slate');
    case 'hazard_acknowledged':
      return line(said.hazardTakenOn(its('person'), its('headline')), 'slate');
    case 'cause_opened':
    case 'cause_changed':
    case 'cause_closed':
    case 'cause_reopened':
      return line(
        said.cause(kind, its('headline')),
        kind === 'cause_closed' ? 'petrol' : detail.hazard === true ? 'crimson' : 'rust',
      );
    case 'case_opened':
    case 'case_assigned':
    case 'case_mentioned':
    case 'case_closed':
    case 'case_reopened': {
      const number = typeof detail.number === 'number' ? detail.number : null;
      return line(
        said.case(kind, number, its('person'), its('title')),
        kind === 'case_closed' ? 'petrol' : kind === 'case_reopened' ? 'rust' : 'slate',
      );
    }
    case 'handover_made':
      return line(said.handover(its('person')), 'petrol');
    case 'planned_work':
      return line(said.plannedWork(its('reason')), 'slate');
  }
}

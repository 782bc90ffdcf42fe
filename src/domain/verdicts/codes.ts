/** The words of a unit's life, in the order of their codes in arrays and on the wire. Append only: codes are stored. */

/** What a unit claims of itself (`state` of a frame). */
export const CLAIMS = ['unknown', 'passing', 'shutdown', 'starting', 'fault'] as const;
export type Claim = (typeof CLAIMS)[number];

/** What Wakeline concludes of a unit's state. */
export const UNIT_STATES = ['unheard', 'passing', 'shutdown', 'silent', 'dark'] as const;
export type UnitState = (typeof UNIT_STATES)[number];

/** What Wakeline concludes of a unit's conduct. */
export const VERDICTS = [
  'ok',
  'stuck', // in shutdown while released, past the grace after its first report of the day
  'not_shutting_down', // passing past the time limit after a command: the gravest
  'unconfirmed', // shutdown is commanded and nothing shows that this unit followed
  'late', // followed, but past the time limit
  'flapping',
] as const;
export type Verdict = (typeof VERDICTS)[number];

/** What a string as a whole can be found to be, where positions are unknown or conductors contradict claims. */
export const STRING_FINDINGS = [
  'not_shutting_down',
  'stuck_positions_unknown',
  'unexplained_voltage',
] as const;
export type StringFinding = (typeof STRING_FINDINGS)[number];

/** What can be in force in a zone or at a transmitter. */
export const COMMANDS = ['initiator', 'keep_alive_lost', 'power_lost', 'released'] as const;
export type InForce = (typeof COMMANDS)[number];

export const INVERTER_STATUSES = [
  'standby',
  'running',
  'derated',
  'curtailed',
  'grid_lost',
  'fault',
] as const;
export type InverterStatus = (typeof INVERTER_STATUSES)[number];

/** Kinds of row in the append-only event table. */
export const EVENT_KINDS = [
  'units_stuck', // detail: {positions, serials}
  'units_not_shutting_down',
  'units_unconfirmed',
  'units_recovered', // detail: {positions, serials, from}
  'units_silent',
  'units_back',
  'units_heard',
  'string_finding', // detail: {finding, evidence}
  'string_finding_ended',
  'command', // detail: {inForce, zone | transmitter, since, saidBy}
  'inverter_status', // detail: {inverter, status, before}
  'logger_connected',
  'logger_lost',
  'gateway_silent', // detail: {gateway, units}
  'gateway_back',
  'roll_call_started', // detail: {person, personOnSite}
  'roll_call_stopped',
  'roster_changed',
  'hazard_acknowledged', // detail: {key, headline, person}
  'cause_opened', // detail: {cause, kind, headline, hazard, units}
  'cause_changed', // detail: as above, and {before: {headline, units}}
  'cause_closed', // detail: {cause, kind, headline, lossWh}
  'cause_reopened',
  'case_opened', // detail: {case, number, title, origin, person}
  'case_assigned', // detail: {case, number, title, person, assignee, assigneeId}
  'case_mentioned', // detail: {case, number, title, person, mentions: person ids, body}
  'case_closed', // detail: {case, number, title, person, state}
  'case_reopened', // detail: {case, number, title, reason}
  'planned_work', // detail: {work, reason, startsAt, endsAt, person}
  'handover_made', // detail: {pack, version, person}
] as const;
export type EventKind = (typeof EVENT_KINDS)[number];

export const codeOf = <T extends string>(list: readonly T[], word: T): number => list.indexOf(word);

import type { Role } from '../access/permissions';

/** What people can be told of, as they choose it: one table for rules, letters, the page of notices and calls. */

/** at_once: a letter now. digest: a line in the day's letter. in_product: shown here only. */
export const HOWS = ['at_once', 'digest', 'in_product', 'nothing'] as const;
export type How = (typeof HOWS)[number];

export const NOTICE_KINDS = [
  'hazard',
  'cause',
  'silence',
  'logger',
  'case_mine',
  'case',
  'report',
  'own_report',
  'roll_call',
  'handover',
  'planned_work',
  'webhook',
] as const;
export type NoticeKind = (typeof NOTICE_KINDS)[number];

export interface KindFacts {
  name: string;
  /** What it means to whoever gets it. */
  meaning: string;
  /** How each role is told until it chooses otherwise; a role that is not named is never told. */
  defaults: Partial<Record<Role, How>>;
  /** Can't be chosen away; why. */
  fixed?: string;
  /** A signed call to another system can carry it. */
  callable: boolean;
}

export const KINDS: Record<NoticeKind, KindFacts> = {
  hazard: {
    name: 'Not shutting down',
    meaning:
      'Voltage stands where shutdown is commanded: what to treat as live, where, and whom to call. Also when it is over.',
    defaults: { manager: 'at_once', technician: 'at_once', analyst: 'at_once' },
    fixed:
      'Always a letter at once, from every site that you see, in quiet hours too: somebody may be on that roof.',
    callable: true,
  },
  cause: {
    name: 'Causes',
    meaning: 'What holds units or output back was found, came back, or is over.',
    defaults: { manager: 'digest', technician: 'digest', analyst: 'digest' },
    callable: true,
  },
  silence: {
    name: 'Out of hearing',
    meaning: 'A gateway or units fell silent: while they are, a shutdown of them can’t be confirmed.',
    defaults: { manager: 'digest', technician: 'at_once', analyst: 'digest' },
    callable: true,
  },
  logger: {
    name: 'A logger is gone',
    meaning: 'A logger has not reported for an hour: nothing of its strings is seen, a hazard neither.',
    defaults: { manager: 'digest', technician: 'at_once', analyst: 'digest' },
    callable: true,
  },
  case_mine: {
    name: 'Cases that ask for you',
    meaning: 'A case was given to you, or somebody mentioned you in one.',
    defaults: { manager: 'at_once', technician: 'at_once', analyst: 'at_once' },
    callable: true,
  },
  case: {
    name: 'Other cases',
    meaning: 'A case was opened, closed, or opened again because the figures did not come back.',
    defaults: { manager: 'digest', technician: 'in_product', analyst: 'digest' },
    callable: true,
  },
  report: {
    name: 'A customer’s report',
    meaning: 'A customer wrote that something looks wrong.',
    defaults: { manager: 'at_once', technician: 'at_once', analyst: 'digest' },
    callable: true,
  },
  own_report: {
    name: 'What you reported',
    meaning: 'Your report was taken up, looked into, or taken up again.',
    defaults: { customer: 'at_once' },
    callable: false,
  },
  roll_call: {
    name: 'Roll calls',
    meaning: 'A roll call ended.',
    defaults: { manager: 'in_product', technician: 'in_product', analyst: 'nothing' },
    callable: true,
  },
  handover: {
    name: 'Handovers',
    meaning: 'The papers of a site were made. Customers get the letter that goes with them in any case.',
    defaults: { manager: 'digest', technician: 'in_product', analyst: 'in_product', customer: 'in_product' },
    callable: true,
  },
  planned_work: {
    name: 'Planned works',
    meaning: 'Work was planned: what happens in its time raises no alarm, hazards excepted.',
    defaults: { manager: 'in_product', technician: 'digest', analyst: 'in_product' },
    callable: true,
  },
  webhook: {
    name: 'Calls to other systems',
    meaning: 'A webhook was switched off because its target failed for days.',
    defaults: { manager: 'at_once' },
    callable: false,
  },
};

/** The kinds that a role is ever told of, in the order in which they are shown. */
export const kindsOf = (role: Role): NoticeKind[] =>
  NOTICE_KINDS.filter((kind) => KINDS[kind].defaults[role] !== undefined);

/** How a person is told: what was chosen, else the role's default; what is fixed can't be chosen away. */
export function howOf(kind: NoticeKind, role: Role, rules: Readonly<Partial<Record<string, How>>>): How {
  const standard = KINDS[kind].defaults[role];
  if (standard === undefined) return 'nothing';
  return KINDS[kind].fixed ? standard : (rules[kind] ?? standard);
}

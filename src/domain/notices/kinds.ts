import { noticeKindTexts } from '../../words/domain-notice-kinds';
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
    ...noticeKindTexts.hazard,
    defaults: { manager: 'at_once', technician: 'at_once', analyst: 'at_once' },
    callable: true,
  },
  cause: {
    ...noticeKindTexts.cause,
    defaults: { manager: 'digest', technician: 'digest', analyst: 'digest' },
    callable: true,
  },
  silence: {
    ...noticeKindTexts.silence,
    defaults: { manager: 'digest', technician: 'at_once', analyst: 'digest' },
    callable: true,
  },
  logger: {
    ...noticeKindTexts.logger,
    defaults: { manager: 'digest', technician: 'at_once', analyst: 'digest' },
    callable: true,
  },
  case_mine: {
    ...noticeKindTexts.case_mine,
    defaults: { manager: 'at_once', technician: 'at_once', analyst: 'at_once' },
    callable: true,
  },
  case: {
    ...noticeKindTexts.case,
    defaults: { manager: 'digest', technician: 'in_product', analyst: 'digest' },
    callable: true,
  },
  report: {
    ...noticeKindTexts.report,
    defaults: { manager: 'at_once', technician: 'at_once', analyst: 'digest' },
    callable: true,
  },
  own_report: {
    ...noticeKindTexts.own_report,
    defaults: { customer: 'at_once' },
    callable: false,
  },
  roll_call: {
    ...noticeKindTexts.roll_call,
    defaults: { manager: 'in_product', technician: 'in_product', analyst: 'nothing' },
    callable: true,
  },
  handover: {
    ...noticeKindTexts.handover,
    defaults: { manager: 'digest', technician: 'in_product', analyst: 'in_product', customer: 'in_product' },
    callable: true,
  },
  planned_work: {
    ...noticeKindTexts.planned_work,
    defaults: { manager: 'in_product', technician: 'digest', analyst: 'in_product' },
    callable: true,
  },
  webhook: {
    ...noticeKindTexts.webhook,
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

/** What a cause can be of. The first four follow reports as they come, the others a site's days. Kinds are stored. */
export const LIVE_KINDS = ['not_shutting_down', 'stuck', 'unconfirmed', 'silent'] as const;
export const DAILY_KINDS = ['low_output', 'loop_resistance', 'wrong_string', 'weak_unit'] as const;
export const CAUSE_KINDS = [...LIVE_KINDS, ...DAILY_KINDS] as const;
export type CauseKind = (typeof CAUSE_KINDS)[number];

/** The kind that outranks everything: it is told in every stage and during planned works, and can't be muted. */
export const isHazardKind = (kind: CauseKind): boolean => kind === 'not_shutting_down';

const MINUTE_S = 60;
const DAY_S = 86_400;

/** When a cause is told, seconds. From experience: long enough that what comes and goes makes one row and one letter. */
export interface Patience {
  /** A finding must have stood so long before it is told. */
  settleS: number;
  /** What it consists of is told anew at most so often. */
  changeS: number;
  /** Nothing may have shown it for so long before it is over. */
  closeS: number;
  /** What comes back within so long is the same again, not another. */
  reopenS: number;
}

const live = (settleS: number): Patience => ({
  settleS,
  changeS: 5 * MINUTE_S,
  closeS: 3 * MINUTE_S,
  reopenS: DAY_S,
});
/** The night's judgements look at several days themselves. */
const daily: Patience = { settleS: 0, changeS: 0, closeS: 0, reopenS: 30 * DAY_S };

export const PATIENCE: Record<CauseKind, Patience> = {
  not_shutting_down: { settleS: 0, changeS: MINUTE_S, closeS: 2 * MINUTE_S, reopenS: 3600 },
  stuck: live(2 * MINUTE_S),
  unconfirmed: live(MINUTE_S),
  silent: live(5 * MINUTE_S),
  low_output: daily,
  loop_resistance: daily,
  wrong_string: daily,
  weak_unit: daily,
};

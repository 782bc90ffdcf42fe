import type { RuleSet } from './context';

/** Seconds from command to shutdown by a rule set; 30 s as a yardstick where it names none. */
export const timeLimitSOf = (ruleSet: RuleSet): number => (ruleSet === 'rapid_shutdown_10s' ? 10 : 30);

/**
 * Seconds for which an inverter's capacitors may hold the home run up, without current, after the time limit. From
 * experience; the inverter's sheet may say more.
 */
export const CAPACITOR_HOLD_S = 120;

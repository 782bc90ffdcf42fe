import { UNIT_STATES, VERDICTS, type UnitState, type Verdict } from './codes';

/** What a unit said at one moment of the past; volts, the claim as reported (1 passing, 2 shutdown). */
export interface UnitThen {
  voltage: number | null;
  voltageIn: number | null;
  claim: number | null;
}

/** Below this share of what a passing unit gives, a mean voltage is that of a unit in shutdown. */
const PASSING_FROM = 0.5;

/**
 * State and verdict of a unit at a moment: as concluded then, where it is known; else by its claim, or by its voltage
 * where only means are kept. A unit that said nothing is silent, whatever was concluded before.
 */
export function conductThen(
  unit: UnitThen,
  concluded: { state: number; verdict: number } | null,
  meansOnly: boolean,
  typicalV: number | null,
): { state: UnitState | null; verdict: Verdict | null } {
  const measured = unit.voltage ?? unit.voltageIn;
  const verdict = concluded ? (VERDICTS[concluded.verdict] ?? null) : null;
  const state = concluded ? (UNIT_STATES[concluded.state] ?? null) : null;
  if (measured === null && unit.claim === null)
    return { state: state === 'unheard' || state === 'dark' ? state : 'silent', verdict };
  if (meansOnly) {
    const passing =
      measured !== null && (typicalV === null ? measured > 5 : measured >= typicalV * PASSING_FROM);
    return { state: passing ? 'passing' : 'shutdown', verdict };
  }
  // what it said itself at that minute counts before what was concluded of it earlier
  if (unit.claim === 1) return { state: 'passing', verdict: verdict === 'stuck' ? 'ok' : verdict };
  if (unit.claim === 2) return { state: 'shutdown', verdict };
  return { state: state === 'silent' || state === 'unheard' ? 'passing' : (state ?? 'passing'), verdict };
}

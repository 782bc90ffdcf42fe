import type { UnitBehaviour } from './context';
import type { Claim } from './codes';
import { SEEN_PASSING, SEEN_SHUTDOWN } from './memory';

/** Codes of CLAIMS, as numbers for the loop. */
const PASSING = 1;
const SHUTDOWN = 2;
const STARTING = 3;

/** Limits (cV) that part outputs "in shutdown" from "passing", made once per unit type. */
export interface OutputLimits {
  /** At or above: not in shutdown, whatever it claims. */
  passingFromCv: number;
  /** Between these: a unit in shutdown on an open string. */
  shutdownFromCv: number;
  shutdownToCv: number;
  /** Module-side voltage that shows that the module itself is lit, cV. */
  litFromCv: number;
  measuresOutput: boolean;
}

/**
 * Limits from the type entered: well above three times its highest shutdown voltage (3 V at least) a unit can't be in
 * shutdown; between half its lowest and one and a half times its highest it can hardly be passing. From experience:
 * no module in daylight works between them.
 */
export function outputLimits(behaviour: Pick<UnitBehaviour, 'shutdownVoltage' | 'measures'>): OutputLimits {
  const { min, max } = behaviour.shutdownVoltage;
  return {
    passingFromCv: Math.max(3, 3 * max) * 100,
    shutdownFromCv: 0.5 * min * 100,
    shutdownToCv: (1.5 * max + 0.1) * 100,
    litFromCv: Math.max(5, 5 * max) * 100,
    measuresOutput: behaviour.measures === 'output' || behaviour.measures === 'both',
  };
}

/** `seen`: SEEN_PASSING, SEEN_SHUTDOWN or 0 (can't tell); odd one out: `measured` says that a voltage showed it. */
export const MEASURED = 4;

/**
 * What one report shows of a unit's output: its claim, unless the voltage measured on its conductors says otherwise.
 * A negative output proves nothing: under string current a unit in shutdown and a shaded module both show one.
 * Returns SEEN_PASSING or SEEN_SHUTDOWN, plus MEASURED where a voltage showed it; 0: can't tell.
 */
export function seenOutput(
  limits: OutputLimits,
  claim: number,
  voltageOutCv: number | null | undefined,
  voltageInCv: number | null | undefined,
): number {
  if (limits.measuresOutput && voltageOutCv !== null && voltageOutCv !== undefined) {
    if (voltageOutCv >= limits.passingFromCv) return SEEN_PASSING + MEASURED;
    const low = voltageOutCv <= limits.shutdownToCv;
    const moduleLit = voltageInCv !== null && voltageInCv !== undefined && voltageInCv >= limits.litFromCv;
    if (low && (voltageOutCv >= limits.shutdownFromCv || moduleLit)) return SEEN_SHUTDOWN + MEASURED;
  }
  if (claim === PASSING) return SEEN_PASSING;
  if (claim === SHUTDOWN || claim === STARTING) return SEEN_SHUTDOWN;
  return 0;
}

/**
 * Output (V) that a unit's claim stands for, where its output isn't measured: drawn dashed and called assumed.
 * `modulePassingV` is what its module gives now (voc on an open string, its working voltage under load); `underLoad`
 * says that string current flows. Null where the claim says nothing of the output.
 */
export function expectedFromClaims(
  behaviour: Pick<UnitBehaviour, 'shutdownVoltage' | 'bypassVoltage'>,
  claim: Claim,
  modulePassingV: number | null,
  underLoad: boolean,
): number | null {
  if (claim === 'passing') return modulePassingV;
  if (claim === 'shutdown' || claim === 'starting')
    return underLoad ? behaviour.bypassVoltage : behaviour.shutdownVoltage.nominal;
  return null;
}

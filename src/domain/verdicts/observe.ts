import type { OutputLimits, UnitBehaviour } from './context';
import type { Claim } from './codes';
import { SEEN_PASSING, SEEN_SHUTDOWN } from './memory';

/** Codes of CLAIMS, as numbers for the loop. */
const PASSING = 1;
const SHUTDOWN = 2;
const STARTING = 3;

/**
 * Limits from the type entered: well above three times its highest shutdown voltage (3 V at least) a unit can't be in
 * shutdown; between half its lowest and one and a half times its highest it can hardly be passing. From experience:
 * no module in daylight works between them.
 */
export function outputLimits(behaviour: Pick<UnitBehaviour, 'shutdownVoltage' | 'measures'>): OutputLimits {
  const { min, max } = behaviour.shutdownVoltage;
  return {
    passingFromCv: Math.round(Math.max(3, 3 * max) * 100),
    shutdownFromCv: Math.round(0.5 * min * 100),
    shutdownToCv: Math.round((1.5 * max + 0.1) * 100),
    litFromCv: Math.round(Math.max(5, 5 * max) * 100),
    measuresOutput: behaviour.measures === 'output' || behaviour.measures === 'both',
  };
}

/** Added to SEEN_PASSING or SEEN_SHUTDOWN where a voltage on the unit's conductors showed it. */
export const MEASURED = 4;

/** One frame of a string as it comes over the wire: arrays in slot order, null = not heard. cV. */
export interface JudgedFrame {
  atS: number;
  state: readonly (number | null)[];
  voltageOut?: readonly (number | null)[] | undefined;
  voltageIn?: readonly (number | null)[] | undefined;
}

/** What `scanFrame` found; one object is used again and again, so read it before the next scan. */
export interface Scan {
  /** Slots that don't report what they are settled on. */
  unsettled: number;
  heard: number;
  /** Sum of the outputs that were measured, cV, and how many there were. */
  outputSum: number;
  outputs: number;
  /**
   * What each slot's report shows of its output: SEEN_PASSING or SEEN_SHUTDOWN, plus MEASURED where a voltage showed
   * it; 0: can't tell; −1: not heard, or as settled.
   */
  shown: Int8Array;
}
const scan: Scan = { unsettled: 0, heard: 0, outputSum: 0, outputs: 0, shown: new Int8Array(256) };

/**
 * Runs over one frame: a unit's output is what it claims, unless the voltage measured on its conductors says otherwise.
 * A negative output proves nothing: under string current a unit in shutdown and a shaded module both show one, so only
 * a lit module behind it tells. A slot that reports what it is settled on (`settled`: claim × 8 + shown) is passed by
 * with its time of report in `seen`. This is the loop that every reading runs through: it is written out for speed.
 */
export function scanFrame(limits: OutputLimits, frame: JudgedFrame, settled: number[], seen: number[]): Scan {
  const { atS, state, voltageOut, voltageIn } = frame;
  const { passingFromCv, shutdownFromCv, shutdownToCv, litFromCv, measuresOutput } = limits;
  const shown = scan.shown;
  const n = Math.min(settled.length, state.length);
  let unsettled = 0;
  let heard = 0;
  let outputSum = 0;
  let outputs = 0;
  for (let i = 0; i < n; i++) {
    shown[i] = -1;
    const claim = state[i];
    if (claim === null || claim === undefined) continue;
    heard++;
    let shows =
      claim === PASSING ? SEEN_PASSING : claim === SHUTDOWN || claim === STARTING ? SEEN_SHUTDOWN : 0;
    const out = voltageOut === undefined ? null : voltageOut[i];
    if (out !== null && out !== undefined) {
      outputSum += out;
      outputs++;
      if (measuresOutput) {
        if (out >= passingFromCv) shows = SEEN_PASSING + MEASURED;
        else if (out <= shutdownToCv) {
          const behind = voltageIn === undefined ? null : voltageIn[i];
          const lit = behind !== null && behind !== undefined && behind >= litFromCv;
          if (out >= shutdownFromCv || lit) shows = SEEN_SHUTDOWN + MEASURED;
        }
      }
    }
    if (settled[i] === claim * 8 + shows) {
      seen[i] = atS;
    } else {
      shown[i] = shows;
      unsettled++;
    }
  }
  scan.unsettled = unsettled;
  scan.heard = heard;
  scan.outputSum = outputSum;
  scan.outputs = outputs;
  return scan;
}

/** Units that measure their module only and, while they pass, give its voltage on unchanged. */
export const outputFollowsClaim = (behaviour: Pick<UnitBehaviour, 'kind' | 'measures'>): boolean =>
  behaviour.kind === 'monitored' && behaviour.measures === 'input';

/**
 * What the outputs of a string add up to, V, if every unit does what it claims: its module's voltage where it claims to
 * pass, next to nothing where it claims shutdown. Null where a claim or a module's voltage is missing.
 */
export function claimedSum({ state, voltageIn }: JudgedFrame): number | null {
  let sum = 0;
  for (let i = 0; i < state.length; i++) {
    const claim = state[i];
    if (claim === null || claim === undefined || claim === SHUTDOWN || claim === STARTING) continue;
    const behind = voltageIn?.[i];
    if (claim !== PASSING || behind === null || behind === undefined) return null;
    sum += behind / 100;
  }
  return sum;
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

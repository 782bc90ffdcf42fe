import { timeLimitSources } from '../../words/domain-verdicts-evidence';
import type { UnitType } from '../equipment/unit-type';
import type { InForce } from './codes';
import { CAPACITOR_HOLD_S, timeLimitSOf } from './time-limits';

/** What the judgement of one string is made against: everything that isn't in its frames. Times are epoch seconds. */

/** The part of a unit type that the judgement rests on ("according to the type entered"). */
export type UnitBehaviour = Pick<
  UnitType,
  | 'kind'
  | 'outOfBox'
  | 'releasedBy'
  | 'onCommandLoss'
  | 'commandLossAfterS'
  | 'shutdownVoltage'
  | 'bypassVoltage'
  | 'measures'
  | 'voltageAccuracy'
>;

/** `dim` is the light of dawn and dusk: some units are awake and some are not, and none is blamed for either. */
export type Light = 'light' | 'dim' | 'dark';
export interface LightSpan {
  sinceS: number;
  light: Light;
}

/** What a zone or a transmitter was told, oldest first. */
export interface CommandPoint {
  sinceS: number;
  inForce: InForce;
}
/** A transmitter that the string can hear: what it was told itself, and what its zone was told. */
export interface TransmitterCommands {
  own: readonly CommandPoint[];
  zone: readonly CommandPoint[];
}

/**
 * What a string is to do from `sinceS` on. `hold`: its command was lost and its type holds the last one.
 * `unknown`: nobody has said.
 */
export interface Commanded {
  sinceS: number;
  expects: 'passing' | 'shutdown' | 'hold' | 'unknown';
  inForce: InForce | null;
}

/** Times of the judgement, in seconds. All are settings; the defaults are common practice or from experience. */
export interface JudgementTimes {
  /** Rule set's time from command to shutdown. */
  timeLimitS: number;
  reportIntervalS: number;
  /** From the latest of first report of the day, release, change of state and daylight until `stuck` may be said. */
  graceS: number;
  /** From the string's first report of the day until a unit of it that hasn't reported is missed. */
  wakeGraceS: number;
  /** From daylight until a string that hasn't reported at all is missed. */
  stringWakeGraceS: number;
  /** Changes of state without a command in `flapWindowS` that make `flapping`. */
  flapChanges: number;
  flapWindowS: number;
  /** How long an inverter's capacitors may hold the home run up, without current, after the time limit. */
  capacitorHoldS: number;
}

export type RuleSet = 'rapid_shutdown_30s' | 'rapid_shutdown_10s' | 'hazard_control' | 'none';

/** The time limit of a rule set and where it comes from. Without one, 30 s is used as a yardstick and said to be one. */
export function timeLimitOf(ruleSet: RuleSet): { timeLimitS: number; source: string } {
  return { timeLimitS: timeLimitSOf(ruleSet), source: timeLimitSources[ruleSet] };
}

/** Default times for a report interval: grace of two reports, 30 s at least, so that the third report decides. */
export function judgementTimes(reportIntervalS: number, timeLimitS: number): JudgementTimes {
  return {
    timeLimitS,
    reportIntervalS,
    graceS: Math.max(30, 2 * reportIntervalS),
    wakeGraceS: Math.max(1800, 3 * reportIntervalS), // from experience: units of one string wake within minutes
    stringWakeGraceS: 7200, // from experience: heavy cloud or frost on the glass
    flapChanges: 4,
    flapWindowS: 3600,
    capacitorHoldS: CAPACITOR_HOLD_S,
  };
}

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

/** What follows from a context alone, and what is in force around the time last asked for. */
export interface Prepared {
  limits: OutputLimits;
  units: number;
  command: Commanded;
  light: LightSpan;
  /** `command` and `light` hold from here until there, epoch seconds. */
  fromS: number;
  untilS: number;
}

export interface StringContext {
  behaviour: UnitBehaviour;
  times: JudgementTimes;
  /** Where the time limit comes from, for the evidence. */
  timeLimitSource: string;
  /** Per slot in position order: whether a unit sits there. */
  slots: readonly boolean[];
  /** Per slot: when its unit first answered the roll call; 0 = not yet. */
  heardAtS: readonly number[];
  commands: readonly Commanded[];
  /** Oldest first; empty: always light. */
  light: readonly LightSpan[];
  /** Weather and neighbours speak for snow on the modules: a string that doesn't wake is `dark`, not `silent`. */
  snowLikely: boolean;
  /** Worked out from the rest by the judgement, for speed. Leave it out of a new context. */
  prepared?: Prepared;
}

/** Air this cold, °C, can leave snow or ice on the modules; this warm clears them. From experience. */
export const SNOW_FROM = 2;
export const SNOW_GONE_FROM = 5;

/**
 * Whether snow may be why a string does not wake. Between the two limits it stays as it was; without a sensor nothing
 * speaks for snow. `temperatureAir` in °C.
 */
export function snowMayLie(before: boolean, temperatureAir: number | null): boolean {
  if (temperatureAir === null || temperatureAir >= SNOW_GONE_FROM) return false;
  return before || temperatureAir <= SNOW_FROM;
}

const pointAt = <T extends { sinceS: number }>(points: readonly T[], atS: number): T | undefined => {
  for (let i = points.length - 1; i >= 0; i--) if (points[i]!.sinceS <= atS) return points[i];
  return undefined;
};

/** What the string is to do at `atS`. Cheap when `atS` is recent. */
export function commandedAt(commands: readonly Commanded[], atS: number): Commanded {
  return pointAt(commands, atS) ?? NOBODY_SAID;
}
const NOBODY_SAID: Commanded = { sinceS: 0, expects: 'unknown', inForce: null };

const ALWAYS_LIGHT: LightSpan = { sinceS: 0, light: 'light' };
/** The light at `atS` and since when it is so. */
export function lightAt(spans: readonly LightSpan[], atS: number): LightSpan {
  return pointAt(spans, atS) ?? ALWAYS_LIGHT;
}

/** Below this sun elevation, degrees, no module powers its unit. From experience. */
export const DARK_BELOW_ELEVATION = 0;
/** Below this one, degrees, brown-outs are ordinary. From experience: about 60 W/m² under a clear sky. */
export const DIM_BELOW_ELEVATION = 6;

/**
 * Spans of light from the sun's elevation (degrees) looked at every `stepS` from `fromS` to `toS`, their bounds found
 * to the second; `poaGlobal`
 * (W/m²), where it is measured, can only make it darker.
 */
export function lightSpans(
  elevation: (atS: number) => number,
  fromS: number,
  toS: number,
  stepS = 300,
  poaGlobal?: (atS: number) => number | null,
): LightSpan[] {
  const lightOf = (atS: number): Light => {
    const up = elevation(atS);
    const poa = poaGlobal?.(atS) ?? null;
    if (up < DARK_BELOW_ELEVATION) return 'dark';
    return up < DIM_BELOW_ELEVATION || (poa !== null && poa < 40) ? 'dim' : 'light';
  };
  const spans: LightSpan[] = [];
  for (let atS = fromS; atS <= toS; atS += stepS) {
    const light = lightOf(atS);
    const last = spans.at(-1);
    if (last?.light === light) continue;
    // to the second within the step: a grace begins here, and reports come more often than samples
    let before = last === undefined ? atS : atS - stepS;
    let from = atS;
    while (from - before > 1) {
      const middle = Math.floor((before + from) / 2);
      if (lightOf(middle) === light) from = middle;
      else before = middle;
    }
    spans.push({ sinceS: from, light });
  }
  return spans;
}

const byTime = (a: CommandPoint, b: CommandPoint): number => a.sinceS - b.sinceS;

/**
 * What a string is to do over time, from what its zone and the transmitters it can hear were told.
 * - A zone that isn't released shuts its strings down, whatever a neighbour's transmitter does: a string that keeps
 *   passing because it hears one is then `not_shutting_down`, not excused.
 * - A string whose units need a keep-alive is released while any transmitter it hears is released, and is to shut down
 *   only when all are known to be off.
 * - Units released by the logger follow their zone alone.
 * - Nobody has said anything: `unknown`, but at a site in operation `passing`, for such a site is meant to run.
 */
export function commandedSpans(
  behaviour: Pick<UnitBehaviour, 'releasedBy' | 'onCommandLoss'>,
  stage: 'commissioning' | 'operating',
  zone: readonly CommandPoint[],
  transmitters: readonly TransmitterCommands[],
): Commanded[] {
  const zoneSorted = [...zone].sort(byTime);
  const heard = behaviour.releasedBy === 'keep_alive' ? transmitters : [];
  const sorted = heard.map((t) => ({ own: [...t.own].sort(byTime), zone: [...t.zone].sort(byTime) }));
  const times = new Set<number>([0]);
  for (const point of zoneSorted) times.add(point.sinceS);
  for (const t of sorted) for (const point of [...t.own, ...t.zone]) times.add(point.sinceS);

  const spans: Commanded[] = [];
  for (const atS of [...times].sort((a, b) => a - b)) {
    const next = { sinceS: atS, ...commandedBy(behaviour, stage, zoneSorted, sorted, atS) };
    const last = spans.at(-1);
    if (last === undefined || last.expects !== next.expects) spans.push(next);
    else if (last.inForce === null) last.inForce = next.inForce;
  }
  return spans;
}

function commandedBy(
  behaviour: Pick<UnitBehaviour, 'onCommandLoss'>,
  stage: 'commissioning' | 'operating',
  zone: readonly CommandPoint[],
  transmitters: readonly TransmitterCommands[],
  atS: number,
): Omit<Commanded, 'sinceS'> {
  const off = (inForce: InForce): Omit<Commanded, 'sinceS'> => ({
    expects: inForce !== 'initiator' && behaviour.onCommandLoss === 'holds' ? 'hold' : 'shutdown',
    inForce,
  });
  const ofZone = pointAt(zone, atS)?.inForce ?? null;
  if (ofZone !== null && ofZone !== 'released') return off(ofZone);

  let anyReleased = false;
  let anyUnknown = false;
  let lastOff: InForce | null = null;
  for (const transmitter of transmitters) {
    const own = pointAt(transmitter.own, atS)?.inForce ?? null;
    const itsZone = pointAt(transmitter.zone, atS)?.inForce ?? null;
    if (own !== null && own !== 'released') lastOff = own;
    else if (itsZone !== null && itsZone !== 'released') lastOff = itsZone;
    else if (own === 'released' || itsZone === 'released') anyReleased = true;
    else anyUnknown = true;
  }
  if (anyReleased || (ofZone === 'released' && lastOff === null))
    return { expects: 'passing', inForce: 'released' };
  if (lastOff !== null && !anyUnknown) return off(lastOff);
  return { expects: stage === 'operating' ? 'passing' : 'unknown', inForce: null };
}

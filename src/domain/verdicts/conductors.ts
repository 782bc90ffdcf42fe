import { conductorsSaid as said } from '../../words/domain-verdicts-evidence';
import { OUTSIDE_ARRAY_LIMIT_V } from './conductor-limits';
import { commandedAt, lightAt, type Commanded, type StringContext } from './context';
import { UNCHANGED, type JudgeOutcome } from './evidence';
import type { StringFinding } from './codes';
import { SIBLINGS_FOR_SPREAD } from '../output/expected';
import { SEEN_SHUTDOWN, type FindingEvidence, type StringMemory } from './memory';

/** What the voltage of a string's input says of the string as a whole. Volts, amperes. */

/** One report of an inverter input. */
export interface InputReading {
  atS: number;
  voltageV: number | null;
  currentA: number | null;
  /** Strings on this input, this one included: they share its voltage. */
  strings: number;
  /** Units of the other strings on this input that are seen to pass (`seenPassing`): they explain a voltage too. */
  othersPassing?: number;
  /**
   * What one passing module of this string should give now (its working voltage when current flows, voc otherwise) and
   * the relative standard deviation of a whole string of them; null: nobody can say. `siblings`: strings on other
   * inputs of the same inverter from which it was learned, 0 if from elsewhere.
   */
  module: { expectedV: number; relativeSd: number; siblings?: number } | null;
}

/** A, into the inverter: from here on modules feed the input; an idle one's own error is less. From experience. */
export const FLOWS_FROM_A = 0.2;

/** Readings that must agree before a finding begins or ends. The gravest needs two, for one may be a stray. */
export const AGREEING: Record<StringFinding, number> = {
  not_shutting_down: 2,
  stuck_positions_unknown: 3,
  unexplained_voltage: 3,
};
export const AGREEING_TO_END = 2;
/** A sum of unit outputs and an input reading belong together within so many report intervals. */
const TOGETHER_INTERVALS = 1.5;
/** Relative uncertainty of an inverter's own input measurement; from experience. */
export const INPUT_ACCURACY = 0.02;
/**
 * Relative standard deviation between two inputs of one inverter, volts a module: meters, modules and warmth. From
 * experience; the spread of five or more such inputs takes its place where it is wider.
 */
export const INPUTS_DIFFER = 0.012;
/**
 * A string of silent units that misses some modules' voltage, not all: shade moves on and held units stay, so the same
 * count must stand this long, seconds. From experience.
 */
export const STEADY_S = 7200;
/** For what stands that long so many standard deviations do (Shewhart 1931). */
export const STEADY_DEVIATIONS = 3;
/** So many agreeing readings one that disagrees undoes: a cloud's edge, an inverter that starts anew. */
const UNDONE_BY_ONE = 3;
/** A deficit or excess must be so many standard deviations (as for the modified z-score: Iglewicz & Hoaglin 1993). */
export const DEVIATIONS = 3.5;

type Suspicion = { kind: StringFinding; evidence: FindingEvidence; steadyForS?: number };

/**
 * Judges one input reading against what the string's units claim and what is commanded, and updates `memory` in
 * place. Where strings share an input the evidence says `scope: 'input'`: it can't be told which one it is.
 * A night proves nothing: readings without light change nothing. Neither do readings older than the last sweep's
 * command.
 */
export function judgeInput(memory: StringMemory, context: StringContext, input: InputReading): JudgeOutcome {
  if (input.voltageV === null) return UNCHANGED;
  const command = commandedAt(context.commands, input.atS);
  if (command.sinceS < memory.commandSince) return UNCHANGED;
  if (lightAt(context.light, input.atS).light !== 'light') return UNCHANGED;
  const suspicion =
    command.expects === 'shutdown'
      ? afterShutdown(memory, context, command, input, input.voltageV)
      : command.expects === 'passing'
        ? whileReleased(memory, context, command, input, input.voltageV)
        : null;
  if (suspicion === 'undecided') return UNCHANGED;
  return settle(memory, suspicion, input.atS);
}

/** Shutdown is commanded and its time is over: what stands on the home run must come from somewhere. */
function afterShutdown(
  memory: StringMemory,
  context: StringContext,
  command: Commanded,
  input: InputReading,
  voltageV: number,
): Suspicion | null | 'undecided' {
  const { timeLimitS, capacitorHoldS } = context.times;
  // current through the string proves that it is not the capacitor
  const holdS = flows(input) ? 0 : capacitorHoldS;
  if (input.atS < command.sinceS + timeLimitS + holdS) return 'undecided';
  const units = unitCount(context);
  const { shutdownVoltage } = context.behaviour;
  const thresholdV = Math.max(OUTSIDE_ARRAY_LIMIT_V, 2 * units * shutdownVoltage.max);
  if (voltageV <= thresholdV) return null;
  // units that say that they pass explain it: they have a verdict of their own
  if (seenPassing(memory, context, input.atS) + (input.othersPassing ?? 0) > 0) return null;
  const alone = input.strings === 1;
  const per = input.module === null ? null : input.module.expectedV - shutdownVoltage.nominal;
  const likely = (v: number): number => Math.min(units, Math.max(1, Math.round(v)));
  const raw = per === null || !alone ? null : (voltageV - units * shutdownVoltage.nominal) / per;
  return {
    kind: 'not_shutting_down',
    evidence: {
      scope: alone ? 'string' : 'input',
      measuredV: voltageV,
      expectedV: units * shutdownVoltage.nominal,
      thresholdV,
      thresholdSource: thresholdV === OUTSIDE_ARRAY_LIMIT_V ? said.outsideArray : said.twiceShutdown,
      units: raw === null ? null : likely(raw),
      unitsRange: raw === null ? null : [likely(raw * 0.85), likely(raw * 1.15)],
      ofN: units,
      atS: input.atS,
      confidence: alone ? 0.9 : 0.8,
      couldBe: [...(flows(input) ? said.flowingCouldBe : said.afterShutdownCouldBe)],
    },
  };
}

function whileReleased(
  memory: StringMemory,
  context: StringContext,
  command: Commanded,
  input: InputReading,
  voltageV: number,
): Suspicion | null | 'undecided' {
  const { graceS, reportIntervalS } = context.times;
  if (input.atS < command.sinceS + context.times.timeLimitS + graceS) return 'undecided';
  if (context.behaviour.kind === 'shutdown_only') return countHeld(context, input, voltageV);
  const together = Math.abs(input.atS - memory.sumAtS) <= TOGETHER_INTERVALS * reportIntervalS;
  if (!together || memory.sumAtS < command.sinceS) return 'undecided';
  const units = unitCount(context);
  const meanV = memory.sumV / units;
  // a unit's gain errors are its own; the input's is common. Two thirds of a module is a module.
  const sd = Math.hypot(
    INPUT_ACCURACY * voltageV,
    (context.behaviour.voltageAccuracy * memory.sumV) / Math.sqrt(units),
  );
  const thresholdV = Math.max(DEVIATIONS * sd, 0.67 * Math.abs(meanV), 5);
  const excess = voltageV - memory.sumV;
  if (Math.abs(excess) <= thresholdV) return null;
  return {
    kind: 'unexplained_voltage',
    evidence: {
      scope: 'string', // strings in parallel share a voltage, so each one's own sum must match it
      measuredV: voltageV,
      expectedV: memory.sumV,
      thresholdV,
      thresholdSource: memory.sumAssumed ? said.twoThirdsOfClaims : said.twoThirds,
      units: null,
      unitsRange: null,
      ofN: units,
      atS: input.atS,
      confidence: 0.8,
      couldBe:
        excess > 0
          ? [...said.excessCouldBe]
          : [...(memory.sumAssumed ? [said.claimsToPass] : []), ...said.lackCouldBe],
    },
  };
}

/** A string whose units tell nothing: how many of them don't pass, from the voltage alone. */
function countHeld(
  context: StringContext,
  input: InputReading,
  voltageV: number,
): Suspicion | null | 'undecided' {
  if (input.module === null) return 'undecided';
  const units = unitCount(context);
  const { expectedV: per } = input.module;
  const { shutdownVoltage, bypassVoltage } = context.behaviour;
  const underLoad = flows(input);
  const heldV = underLoad ? bypassVoltage : shutdownVoltage.nominal;
  const full = units * per;
  const sd = relativeSdOf(input.module) * full;
  const deficit = full - voltageV;
  const thresholdV = Math.max(0.6 * per, STEADY_DEVIATIONS * sd);
  if (deficit <= thresholdV) return null;
  const alone = input.strings === 1;
  const allHeld = voltageV <= Math.max(2 * units * shutdownVoltage.max, 0.1 * full);
  // under snow nothing powers the units, and the string is dark like any other
  if (allHeld && context.snowLikely) return 'undecided';
  // in parallel under load the others hold the voltage up: a little missing says nothing of how many are held
  if (!alone && !allHeld) return 'undecided';
  const count = (d: number): number => Math.min(units, Math.max(0, Math.round(d / (per - heldV))));
  const range: [number, number] = [Math.max(1, count(deficit - 2 * sd)), count(deficit + 2 * sd)];
  return {
    kind: 'stuck_positions_unknown',
    steadyForS: allHeld ? 0 : STEADY_S,
    evidence: {
      scope: alone ? 'string' : 'input',
      measuredV: voltageV,
      expectedV: full,
      thresholdV: full - thresholdV,
      thresholdSource: said.sixTenths(STEADY_DEVIATIONS),
      units: allHeld ? units : Math.max(1, count(deficit)),
      unitsRange: allHeld ? [range[0], units] : range,
      ofN: units,
      atS: input.atS,
      confidence: allHeld ? 0.9 : range[0] === range[1] ? 0.85 : 0.7,
      couldBe: [...(allHeld ? said.allHeldCouldBe : said.someHeldCouldBe)],
    },
  };
}

const flows = (input: InputReading): boolean => (input.currentA ?? 0) > FLOWS_FROM_A;

/** Of a string's voltage about what is expected of it, both measured by inputs. */
function relativeSdOf({ relativeSd, siblings = 0 }: NonNullable<InputReading['module']>): number {
  if (siblings === 0) return Math.hypot(relativeSd, INPUT_ACCURACY);
  const unlike = INPUTS_DIFFER * Math.sqrt(1 + 1 / siblings);
  return siblings >= SIBLINGS_FOR_SPREAD ? Math.max(relativeSd, unlike) : unlike;
}

/**
 * Units of a string that were seen to pass since the command that is in force at `atS`, by their claim or by what was
 * measured on them. One that fell silent before it counts for nothing: it may have followed or not.
 */
export function seenPassing(memory: StringMemory, context: StringContext, atS: number): number {
  const { sinceS } = commandedAt(context.commands, atS);
  return memory.output.filter(
    (o, i) => context.slots[i] && o !== 0 && o !== SEEN_SHUTDOWN && memory.seen[i]! > sinceS,
  ).length;
}

const unitCount = (context: StringContext): number => context.slots.filter(Boolean).length;

/** Lets a finding begin, change its kind or end only when enough readings in a row agree. */
function settle(memory: StringMemory, suspicion: Suspicion | null, atS: number): JudgeOutcome {
  const standing = memory.finding;
  if (suspicion === null) {
    if (standing === null) {
      memory.pendingCount = Math.max(0, memory.pendingCount - UNDONE_BY_ONE);
      if (memory.pendingCount === 0) memory.pending = '';
      return UNCHANGED;
    }
    memory.pendingCount = memory.pending === '' ? memory.pendingCount + 1 : 1;
    memory.pending = '';
    if (memory.pendingCount < AGREEING_TO_END) return UNCHANGED;
    memory.finding = null;
    memory.pendingCount = 0;
    return { changes: [], finding: { atS, finding: null, before: standing.kind } };
  }
  const { kind, evidence } = suspicion;
  if (standing?.kind === kind) {
    memory.pending = kind;
    memory.pendingCount = 0;
    if (standing.evidence.units === evidence.units || evidence.units === null) return UNCHANGED;
    // a different count may be one cloud: only a count outside the range found before is news
    const [low, high] = standing.evidence.unitsRange ?? [0, Infinity];
    if (evidence.units >= low && evidence.units <= high) return UNCHANGED;
    memory.finding = { kind, sinceS: standing.sinceS, evidence };
    return { changes: [], finding: { atS, finding: memory.finding, before: kind } };
  }
  const { steadyForS = 0 } = suspicion;
  const agrees = memory.pending === kind && (steadyForS === 0 || memory.pendingUnits === evidence.units);
  if (!agrees && memory.pending === kind && memory.pendingCount > UNDONE_BY_ONE) {
    memory.pendingCount -= UNDONE_BY_ONE;
    return UNCHANGED;
  }
  if (!agrees) memory.pendingSinceS = atS;
  memory.pendingCount = agrees ? memory.pendingCount + 1 : 1;
  memory.pending = kind;
  memory.pendingUnits = evidence.units;
  if (memory.pendingCount < AGREEING[kind]) return UNCHANGED;
  if (steadyForS > 0 && atS - (memory.pendingSinceS ?? atS) < steadyForS) return UNCHANGED;
  memory.finding = { kind, sinceS: atS, evidence };
  memory.pendingCount = 0;
  return { changes: [], finding: { atS, finding: memory.finding, before: standing?.kind ?? null } };
}

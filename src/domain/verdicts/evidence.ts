import { evidenceSaid, verdictCouldBe } from '../../words/domain-verdicts-evidence';
import {
  CLAIMS,
  UNIT_STATES,
  VERDICTS,
  type Claim,
  type InForce,
  type UnitState,
  type Verdict,
} from './codes';
import type { Commanded, StringContext } from './context';
import { SEEN_SHUTDOWN, type FindingEvidence, type StringMemory } from './memory';
import type { StringFinding } from './codes';

/** Why a unit is said to be what it is said to be. */
export interface VerdictEvidence {
  inForce: InForce | null;
  commandSinceS: number;
  /** Newest report of the unit; null: none. */
  seenS: number | null;
  claim: Claim;
  /** What it rests on: a voltage measured on the unit's conductors, its claim alone, or that nothing was heard. */
  basis: 'measured' | 'claim' | 'nothing_heard';
  /** A time limit or grace that was passed, seconds, and its source; null: none was needed. */
  thresholdS: number | null;
  thresholdSource: string;
  /** Seconds from the command to shutdown: at least, at most. Reports come at intervals, so this is an interval. */
  followedAfterS: [number, number] | null;
  /** 0 … 1, from experience: how often such evidence is right. */
  confidence: number;
  couldBe: string[];
}

export interface UnitChange {
  /** 0-based; position = slot + 1. */
  slot: number;
  position: number;
  atS: number;
  /** null: nothing can be said (the unit tells nothing itself, or the slot is empty). */
  state: UnitState | null;
  stateBefore: UnitState | null;
  verdict: Verdict;
  verdictBefore: Verdict;
  evidence: VerdictEvidence;
}

/** A string-level finding that began, changed or ended (`finding` null: ended). */
export interface FindingChange {
  atS: number;
  finding: { kind: StringFinding; sinceS: number; evidence: FindingEvidence } | null;
  before: StringFinding | null;
}

export interface JudgeOutcome {
  changes: readonly UnitChange[];
  finding: FindingChange | null;
}

/** The outcome when nothing changed: always this one object. */
export const UNCHANGED: JudgeOutcome = Object.freeze({ changes: Object.freeze([]), finding: null });

/** How far each kind of evidence goes; from experience, and a measurement outweighs a claim. */
function confidenceOf(verdict: Verdict, measured: boolean): number {
  if (verdict === 'unconfirmed') return 1; // it says only that nothing is known
  if (verdict === 'flapping' || verdict === 'late') return 0.9;
  return measured ? 0.99 : 0.95;
}

/** Evidence for slot `i` as `memory` stands. `thresholdS`: what was passed, if anything. */
export function evidenceFor(
  memory: StringMemory,
  context: StringContext,
  command: Commanded,
  i: number,
  verdict: Verdict,
): VerdictEvidence {
  const seen = memory.seen[i]!;
  const heard = UNIT_STATES[memory.state[i]!];
  const reporting = heard === 'passing' || heard === 'shutdown';
  const { graceS, timeLimitS } = context.times;
  const limited = verdict === 'not_shutting_down' || verdict === 'late' || verdict === 'unconfirmed';
  const to = memory.followedTo[i]!;
  return {
    inForce: command.inForce,
    commandSinceS: command.sinceS,
    seenS: seen === 0 ? null : seen,
    claim: CLAIMS[memory.claim[i]!] ?? 'unknown',
    basis: !reporting ? 'nothing_heard' : memory.measured[i] === 1 ? 'measured' : 'claim',
    thresholdS: verdict === 'stuck' ? graceS : limited ? timeLimitS : null,
    thresholdSource: verdict === 'stuck' ? evidenceSaid.grace : limited ? context.timeLimitSource : '',
    followedAfterS:
      command.expects === 'shutdown' && to >= 0 && memory.output[i] === SEEN_SHUTDOWN
        ? [memory.followedFrom[i]!, to]
        : null,
    confidence: confidenceOf(verdict, memory.measured[i] === 1),
    couldBe: [...(verdictCouldBe[verdict] ?? [])],
  };
}

export const stateOf = (code: number): UnitState | null => UNIT_STATES[code] ?? null;
export const verdictOf = (code: number): Verdict => VERDICTS[code] ?? 'ok';

import { UNIT_STATES, VERDICTS, type StringFinding, type UnitState, type Verdict } from './codes';
import type { Commanded, StringContext } from './context';

/** In `state`: nothing can be said of this slot (it is empty, or its unit tells nothing itself). Stored as NULL. */
export const NO_STATE = -1;

/** What was last seen of a unit's output: 0 nothing yet, 1 passing, 2 in shutdown. */
export const SEEN_PASSING = 1;
export const SEEN_SHUTDOWN = 2;

/** Evidence of a string-level finding. */
export interface FindingEvidence {
  /** `input`: several strings share the input and it can't be told which one. */
  scope: 'string' | 'input';
  measuredV: number;
  expectedV: number | null;
  thresholdV: number;
  thresholdSource: string;
  /** Units that would explain the voltage: most likely, and the range that can't be excluded; of `ofN`. */
  units: number | null;
  unitsRange: [number, number] | null;
  ofN: number;
  /** Time of the reading that made the finding, epoch seconds. */
  atS: number;
  confidence: number;
  couldBe: string[];
}
export interface Finding {
  kind: StringFinding;
  sinceS: number;
  evidence: FindingEvidence;
}

/**
 * What the judgement carries from frame to frame, as plain JSON. Arrays run over slots in position order, times are
 * epoch seconds, 0 = never. `judgeFrame`, `sweepString` and `judgeInput` change it in place: keep a `structuredClone`
 * where a failed transaction must be able to go back.
 */
export interface StringMemory {
  /** Newest frame judged. */
  atS: number;
  /** Newest sweep: what is known as of then. */
  sweptAtS: number;
  state: number[];
  verdict: number[];
  /** Since when the verdict, or where that is `ok` the state, holds. */
  since: number[];
  seen: number[];
  /** First report of the day. */
  first: number[];
  claim: number[];
  output: number[];
  /** Since when `output` is what it is. */
  outputSince: number[];
  /** 1: `output` was measured on the conductors; 0: it rests on the unit's claim. */
  measured: number[];
  /** Seconds from the command in force to its being followed, at least and at most; −1: not seen to have followed. */
  followedFrom: number[];
  followedTo: number[];
  flaps: number[];
  flapFrom: number[];
  /** What the slot would report if nothing changed (claim × 8 + what its output shows); −1: look closely. */
  settled: number[];
  /** First report of any unit of the string today. */
  stringFirst: number;
  commandSince: number;
  commandExpects: Commanded['expects'] | '';
  /** Sum of unit outputs (V) in the newest frame that had all of them, and its time. */
  sumV: number;
  sumAtS: number;
  /** That sum rests on claims and on what the modules give; not kept by earlier versions. */
  sumAssumed?: boolean;
  finding: Finding | null;
  /** A finding on its way in (or, '' while one stands, on its way out), and how many readings agree. */
  pending: StringFinding | '';
  pendingCount: number;
  /** Since when the readings agree, and on how many units; not kept by earlier versions. */
  pendingSinceS?: number;
  pendingUnits?: number | null;
}

const zeros = (n: number): number[] => new Array<number>(n).fill(0);

/** The memory of a string that nothing has been heard of. */
export function newMemory(context: Pick<StringContext, 'slots' | 'behaviour'>): StringMemory {
  const n = context.slots.length;
  const unheard = UNIT_STATES.indexOf('unheard');
  const tellsNothing = context.behaviour.kind === 'shutdown_only';
  return {
    atS: 0,
    sweptAtS: 0,
    state: context.slots.map((hasUnit) => (hasUnit && !tellsNothing ? unheard : NO_STATE)),
    verdict: zeros(n),
    since: zeros(n),
    seen: zeros(n),
    first: zeros(n),
    claim: zeros(n),
    output: zeros(n),
    outputSince: zeros(n),
    measured: zeros(n),
    followedFrom: zeros(n).fill(-1),
    followedTo: zeros(n).fill(-1),
    flaps: zeros(n),
    flapFrom: zeros(n),
    settled: zeros(n).fill(-1),
    stringFirst: 0,
    commandSince: 0,
    commandExpects: '',
    sumV: 0,
    sumAtS: 0,
    finding: null,
    pending: '',
    pendingCount: 0,
  };
}

/** Forgets what was known of one slot (0-based): its unit was exchanged, taken out or put in. Changes `memory`. */
export function resetSlot(
  memory: StringMemory,
  context: Pick<StringContext, 'slots' | 'behaviour'>,
  slot: number,
): void {
  const fresh = newMemory({ slots: [context.slots[slot] ?? false], behaviour: context.behaviour });
  for (const key of PER_SLOT) memory[key][slot] = fresh[key][0]!;
}
/**
 * The string has another number of slots: what is known of those that stay is kept, new ones begin unheard. What was
 * concluded of the string as a whole is begun anew. Changes `memory`.
 */
export function resizeMemory(
  memory: StringMemory,
  context: Pick<StringContext, 'slots' | 'behaviour'>,
): void {
  const before = memory.state.length;
  const fresh = newMemory(context);
  for (const key of PER_SLOT)
    memory[key] = fresh[key].map((value, slot) => (slot < before ? (memory[key][slot] ?? value) : value));
  memory.sumV = 0;
  memory.sumAtS = 0;
  memory.pending = '';
  memory.pendingCount = 0;
}

const PER_SLOT = [
  'state',
  'verdict',
  'since',
  'seen',
  'first',
  'claim',
  'output',
  'outputSince',
  'measured',
  'followedFrom',
  'followedTo',
  'flaps',
  'flapFrom',
  'settled',
] as const satisfies readonly (keyof StringMemory)[];

/** How many slots are in each state and verdict; the words of codes.ts. Empty slots don't count. */
export interface UnitCounts extends Record<UnitState, number> {
  units: number;
  verdicts: Record<Verdict, number>;
}

/** Counts a string's units by state and verdict. A unit that tells nothing counts in `units` and its verdict only. */
export function countUnits(memory: StringMemory, slots: readonly boolean[]): UnitCounts {
  const counts: UnitCounts = {
    units: 0,
    unheard: 0,
    passing: 0,
    shutdown: 0,
    silent: 0,
    dark: 0,
    verdicts: { ok: 0, stuck: 0, not_shutting_down: 0, unconfirmed: 0, late: 0, flapping: 0 },
  };
  for (let i = 0; i < slots.length; i++) {
    if (!slots[i]) continue;
    counts.units++;
    const state = UNIT_STATES[memory.state[i] ?? NO_STATE];
    if (state !== undefined) counts[state]++;
    counts.verdicts[VERDICTS[memory.verdict[i] ?? 0] ?? 'ok']++;
  }
  return counts;
}

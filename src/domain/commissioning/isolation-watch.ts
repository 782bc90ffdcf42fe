import { median } from '../output/robust';

/** What a watch for the isolation of one string takes and gives. Currents in A, instants in epoch seconds. */

export interface CurrentSample {
  atS: number;
  /** null: not reported. */
  current: number | null;
}
export interface WatchedUnit {
  serial: string;
  string: string;
  position: number;
  samples: readonly CurrentSample[];
}
/** An input's own measurement: what is left where units tell nothing. */
export interface WatchedInput {
  name: string;
  /** Strings on it, by the drawing. */
  strings: readonly string[];
  samples: readonly CurrentSample[];
}
export interface IsolationWatch {
  /** The string that the person on site isolates. */
  string: string;
  startedAtS: number;
  nowS: number;
  reportIntervalS: number;
  units: readonly WatchedUnit[];
  inputs: readonly WatchedInput[];
}

/** Between which two reports something happened. */
export interface Between {
  afterS: number;
  byS: number;
}
export type UnitFate =
  | 'member_dropped'
  | 'member_kept'
  | 'other_dropped'
  | 'other_kept'
  /** No report since, or too little current to part zero from the rest. */
  | 'not_told';
export interface UnitResult {
  serial: string;
  string: string;
  position: number;
  fate: UnitFate;
  /** A, median before the start; null: none. */
  before: number | null;
  /** A, while the string was isolated; the newest value before that. */
  during: number | null;
  dropped: Between | null;
}
export interface InputResult {
  name: string;
  strings: string[];
  before: number | null;
  during: number | null;
  /** Share of its current lost beyond what all inputs lost, 0 … 1. */
  lost: number | null;
}
export type IsolationOutcome =
  /** Nothing has dropped yet. */
  | 'watching'
  /** The string dropped: who is in it is told. */
  | 'told'
  /** Another string than the one named dropped. */
  | 'other_string'
  /** Two strings or more dropped together. */
  | 'several_strings'
  /** Only the input's current tells: the string's units report nothing. */
  | 'input_only'
  | 'cant_tell';
export interface IsolationFinding {
  outcome: IsolationOutcome;
  /** Why it can't be told; null otherwise. */
  reason:
    | 'no_current_before'
    | 'no_reports'
    | 'everything_stopped'
    | 'too_little_current'
    | 'nothing_beside'
    | null;
  /** Strings of which more than half of the units dropped, by the drawing. */
  strings: string[];
  /** When, as an interval of reports; null: not seen. */
  dropped: Between | null;
  /** When current came back; null: not yet. */
  returned: Between | null;
  units: UnitResult[];
  inputs: InputResult[];
}

/** Reads as no current, A: rounding of a report and its offset. From experience, twice a unit's resolution error. */
export const ZERO_A = 0.06;
/** And no more than this share of what the unit would otherwise carry. */
export const ZERO_SHARE = 0.04;
/** Less than this before the start says nothing, A. */
export const BEFORE_MIN_A = 0.3;
/** What a unit should carry, over ZERO_A, before "zero" means anything: clouds must leave four times the noise. */
export const CLEAR_OF_ZERO = 4;
/** How far back the current before is taken, in report intervals. */
export const BEFORE_INTERVALS = 6;
/** Reports in a row that must agree. */
export const IN_A_ROW = 2;
/** A unit outside the string belongs to the drop when both fell within so many report intervals. */
export const TOGETHER_INTERVALS = 1.5;
/** Share of a string's units that must drop before the string is said to have dropped. */
export const MAJORITY = 0.5;
/** An input has lost a string when it lost at least this share of one string's part of its current. */
export const INPUT_SHARE = 0.6;

/** Median current before the start; null where nothing was reported. */
export function currentBefore(samples: readonly CurrentSample[], watch: IsolationWatch): number | null {
  const fromS = watch.startedAtS - BEFORE_INTERVALS * watch.reportIntervalS;
  const values = samples.flatMap((s) =>
    s.current !== null && s.atS >= fromS && s.atS <= watch.startedAtS ? [s.current] : [],
  );
  return values.length === 0 ? null : median(values);
}

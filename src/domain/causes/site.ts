import type { UnitKind } from '../equipment/unit-type';
import type { InForce, UnitState, Verdict } from '../verdicts/codes';
import type { Finding } from '../verdicts/memory';

/** A site as it stands at one moment: what the search for causes looks at. Times are epoch seconds. */

export interface SlotCondition {
  position: number;
  serial: string | null;
  state: UnitState | null;
  verdict: Verdict;
  sinceS: number;
  /** Newest report; null: never. */
  seenS: number | null;
  /** Gateway that its newest report came by. */
  gateway: string | null;
}

export interface StringCondition {
  id: string;
  name: string;
  kind: UnitKind;
  releasedBy: 'keep_alive' | 'logger';
  zone: string;
  /** Transmitters that serve it, by the as-built. */
  transmitters: readonly string[];
  logger: string | null;
  inverter: string;
  input: number;
  /** Slots that hold a unit. */
  slots: readonly SlotCondition[];
  finding: Pick<Finding, 'kind' | 'sinceS' | 'evidence'> | null;
}

export interface SiteCondition {
  name: string;
  atS: number;
  reportIntervalS: number;
  strings: readonly StringCondition[];
  /** What is in force now. */
  zones: readonly { name: string; inForce: InForce | null }[];
  transmitters: readonly { name: string; zone: string; inForce: InForce | null }[];
  gateways: readonly { name: string; lastHeardS: number | null }[];
  loggers: readonly { name: string; connected: boolean }[];
  inputs: readonly { inverter: string; number: number; currentA: number | null }[];
}

export const CAUSE_VERDICTS = ['not_shutting_down', 'stuck', 'unconfirmed', 'silent'] as const;
export type CauseVerdict = (typeof CAUSE_VERDICTS)[number];
export type PartKind =
  'unit' | 'string' | 'transmitter' | 'gateway' | 'input' | 'inverter' | 'logger' | 'zone' | 'site';

export interface CauseUnit {
  stringId: string;
  stringName: string;
  /** null: the string as a whole, positions unknown. */
  position: number | null;
  serial: string | null;
  sinceS: number;
}

/** One explanation of several units' conduct, with what else would explain them. */
export interface Cause {
  /** Stable while it lasts. */
  key: string;
  verdict: CauseVerdict;
  sinceS: number;
  sharedPart: { kind: PartKind; name: string } | null;
  headline: string;
  evidence: string;
  alternatives: string[];
  /** 0 … 1: share of this explanation among those weighed. */
  confidence: number;
  units: CauseUnit[];
}

import type { DocumentedPair, ConnectorIdentity } from '../../equipment/connectors';
import type { ModuleType } from '../../equipment/module-type';
import type { UnitType } from '../../equipment/unit-type';
import type { RuleSet } from '../../verdicts/context';

/** What an install check is: a thing that a person looks at or measures on one string, and says how it stands. */

/** In the order in which they are done. Stored in records: new ones go where they belong, none is renamed. */
export const CHECK_KEYS = [
  'lead_order',
  'orientation',
  'face',
  'mounting',
  'connectors',
  'strain_relief',
  'labels',
  'serials',
  'polarity',
  'earth_continuity',
  'voltage_to_earth',
  'insulation',
  'string_current',
] as const;
export type CheckKey = (typeof CHECK_KEYS)[number];

export const CHECK_RESULTS = ['pass', 'fail', 'not_applicable'] as const;
export type CheckResult = (typeof CHECK_RESULTS)[number];

/** A number that is measured, one of a few words, or a connector type of the catalogue. */
export type Figure =
  | {
      key: string;
      kind: 'number';
      name: string;
      unit: string;
      min: number;
      max: number;
      /** Whether a pass needs it. */
      needed: boolean;
    }
  | {
      key: string;
      kind: 'choice';
      name: string;
      options: readonly { value: string; words: string }[];
      needed: boolean;
    }
  | { key: string; kind: 'connector'; name: string; needed: boolean };

export type FigureValue = number | string;
export type Figures = Readonly<Record<string, FigureValue>>;

export interface CheckDefinition {
  key: CheckKey;
  name: string;
  /** What holds when it passes. */
  asks: string;
  /** How it is done. */
  how: string;
  /** Clause, or "common practice". */
  source: string;
  /** When it is done: while units go up, before energising, or once current flows. */
  phase: 'mounting' | 'before_energising' | 'energised';
  figures: readonly Figure[];
  /** Whether the string can be signed off without it. */
  mayFollow: boolean;
}

/** A check as it is asked of one string, in the words that fit its types and its rule set. */
export interface StringCheck extends CheckDefinition {
  /** Why it does not apply here, for a "not applicable" with one tap; null: it applies. */
  offersNotApplicable: string | null;
  /** What must not be done here, said before somebody does it; null: nothing. */
  warning: string | null;
}

export interface SiblingCurrent {
  string: string;
  currentA: number;
  method: string;
  /** W/m² in the plane, where it was written down. */
  poaGlobal: number | null;
  /** When it was measured, epoch seconds. */
  atS: number;
}

/** What is known of the string that the checks are judged by. */
export interface CheckContext {
  units: number;
  /** Slots that hold no serial. */
  emptySlots: number;
  unitType: Pick<UnitType, 'name' | 'kind' | 'facesAllowed' | 'insulationTestMax' | 'shutdownVoltage'>;
  module: ModuleType;
  ruleSet: RuleSet;
  connectors: readonly ConnectorIdentity[];
  pairs: readonly DocumentedPair[];
  /** What strings of the same types and plane carried: what a current is held against. */
  siblingCurrents: readonly SiblingCurrent[];
}

/** One record, as far as it is judged. */
export interface CheckStanding {
  check: CheckKey;
  result: CheckResult;
  reason: string;
  figures: Figures;
  /** When it was recorded by the clock of whoever did, epoch seconds. */
  atS: number;
}

/** What the figures of a record say of its result. */
export interface CheckJudgement {
  /** `blocks`: a pass that its figures contradict, or a fail. `told`: worth knowing. */
  weight: 'blocks' | 'told' | 'none';
  /** The pass is contradicted by what was measured or chosen. */
  contradicts: boolean;
  /** Not identical and not documented as intermatable. */
  fireRisk: boolean;
  words: string[];
  /** What would do; null: nothing has to be done. */
  remedy: string | null;
  /** Clause or practice behind the words. */
  source: string;
}

import { expectedStateSaid as said } from '../../words/domain-readings';
import type { ModuleType } from '../equipment/module-type';
import type { UnitType } from '../equipment/unit-type';

/** A meter reading at a string's home run, and what is known around it. The string is separated from others. Volts. */

export type ReadingLight = 'bright' | 'dull' | 'snow' | 'night';

export interface Meter {
  mode: 'high_impedance' | 'low_impedance';
  /** Standard uncertainty: share of the reading plus volts. */
  relativeSd: number;
  sd: number;
}
/** An ordinary rated multimeter; from experience. */
export const ORDINARY_METER: Meter = { mode: 'high_impedance', relativeSd: 0.004, sd: 0.05 };

export interface Conditions {
  /** W/m² in the plane, with relative standard deviation. */
  poaGlobal: number;
  poaRelativeSd: number;
  /** °C with standard deviation. */
  temperatureCell: number;
  temperatureSd: number;
}

/** A reading of another string of the same types, taken under the same light: it pins what one unit gives. */
export interface SiblingReading {
  units: number;
  voltageV: number;
}

export interface ReadingQuestion {
  units: number;
  unitType: Pick<UnitType, 'kind' | 'outOfBox' | 'shutdownVoltage'>;
  module: ModuleType;
  /** What is in force where the units listen: keep-alive present or logger's release, shutdown, or nobody knows. */
  commanded: 'released' | 'shutdown' | 'unknown';
  /** Units that answered the roll call; ignored for units that answer none. */
  heard: number;
  light: ReadingLight;
  /** Measured or well-known conditions; null: taken from `light`, widely. */
  conditions: Conditions | null;
  meter: Meter;
  /** + to −. */
  voltageV: number;
  siblings: readonly SiblingReading[];
  /** + to earth and − to earth, each null where not taken. */
  earth: { positiveV: number | null; negativeV: number | null } | null;
}

export type HypothesisKind =
  | 'all_in_shutdown'
  | 'all_passing'
  | 'some_passing'
  | 'unmated'
  | 'wired_past_its_unit'
  | 'reversed'
  | 'one_reversed'
  | 'substring_bypassed'
  | 'open'
  | 'two_in_series'
  | 'unpowered'
  | 'unexplained';

/** One way in which the string can be, as coefficients of what a passing module and a unit in shutdown give. */
export interface Hypothesis {
  kind: HypothesisKind;
  /** Units that the kind speaks of: passing, unmated, left out, bypassed sub-strings. */
  count: number;
  /** The string as it should be by what was installed, commanded and heard. */
  asExpected: boolean;
  passing: number;
  inShutdown: number;
  /** Independent standard deviation besides that of modules and units, V. */
  ownSd: number;
  prior: number;
}

/** What the string should be at this moment by type, command and roll call: units passing of all. */
export interface ExpectedState {
  passing: number;
  /** Units that pass because nobody has spoken to them yet: they don't obey the initiator. */
  unheardPassing: number;
  words: string;
}

/**
 * What to expect before the meter is put on: a `shutdown_only` string without keep-alive is in shutdown; a `monitored`
 * one passes full voltage until its units have answered the roll call, whatever is commanded ("according to the type
 * entered").
 */
export function expectedState(question: ReadingQuestion): ExpectedState {
  const { units, unitType, commanded } = question;
  if (unitType.kind === 'shutdown_only') {
    if (commanded === 'released') return { passing: units, unheardPassing: 0, words: said.keepAlive };
    const passing = unitType.outOfBox === 'passing' && commanded === 'unknown' ? units : 0;
    return {
      passing,
      unheardPassing: passing,
      words: passing > 0 ? said.outOfTheBox : said.noKeepAlive,
    };
  }
  const heard = Math.min(units, Math.max(0, question.heard));
  const unheard = units - heard;
  const unheardPassing = unitType.outOfBox === 'passing' ? unheard : 0;
  if (commanded === 'shutdown')
    return {
      passing: unheardPassing,
      unheardPassing,
      words: unheardPassing > 0 ? said.someUnheardInShutdown(heard, unheardPassing) : said.allInShutdown,
    };
  return {
    passing: heard + unheardPassing,
    unheardPassing,
    words: unheardPassing > 0 ? said.someUnheard(heard, unheardPassing) : said.allReleased,
  };
}
